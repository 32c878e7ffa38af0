// Tables of text: aligned columns within a width, or CSV.
#pragma once

#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

namespace isotally {

struct TextColumn {
    std::string title;
    bool right = false;  // numbers
    bool fixed = false;  // made narrower only when nothing else is left (ids that are typed back)
};

struct TextTable {
    std::vector<TextColumn> columns;
    std::vector<std::vector<std::string>> rows;
    std::vector<std::string> remarks = {};  // below each row, indented; empty or as many as rows
};

enum class Overflow { cut, wrap };

/// Characters, not bytes.
std::size_t text_width(std::string_view text);

/// Lines of at most `width` characters, broken at blanks where there are any.
std::vector<std::string> wrapped(std::string_view text, std::size_t width);

/// One line for each row with Overflow::cut, as many as it takes with Overflow::wrap; columns that are
/// empty throughout are left out.
std::string aligned(const TextTable& table, Overflow overflow, std::size_t indent = 0,
                    std::size_t width = 100);

std::string as_csv(const TextTable& table);

}  // namespace isotally
