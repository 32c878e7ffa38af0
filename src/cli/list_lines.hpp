// Lines of any length from a stream, in bounded memory.
#pragma once

#include <cstddef>
#include <istream>
#include <optional>
#include <string>

namespace isotally::cli {

/// Longest line of a list that is read; what goes beyond is skipped up to the end of the line.
inline constexpr std::size_t longest_line = 10'000;

struct ListLine {
    std::size_t number = 0;  // in the input, from 1
    std::string molecule;    // first word
    std::string label;       // what stands after it
    bool too_long = false;
};

/// The next line that holds something: a byte order mark, CRLF, blanks around and empty lines are passed
/// over.
std::optional<ListLine> next_line(std::istream& in, std::size_t& lines_read);

}  // namespace isotally::cli
