// Faults of table files, collected with their places and put in order.
#pragma once

#include <cstddef>
#include <map>
#include <string>
#include <string_view>
#include <vector>

#include "isotally/tables.hpp"

namespace isotally {

class FaultList {
public:
    /// Line 0: the file as a whole; empty field: the record as a whole. After 1,000 faults of one
    /// file the others are only counted.
    void add(const std::string& file, std::size_t line, std::string_view field, std::string message);

    /// In order of file name and line.
    std::vector<Fault> take();

private:
    struct Located {
        std::string file;
        std::size_t line = 0;
        Fault fault;
    };
    std::vector<Located> faults_;
    std::map<std::string, std::size_t> count_;
};

/// In quotes for a message: control characters and bytes that are not UTF-8 replaced, long texts cut.
std::string in_quotes(std::string_view text);

/// "a, b, c"
std::string joined(const std::vector<std::string>& words);

/// `; did you mean "nitro"?` or empty.
std::string did_you_mean(std::string_view word, const std::vector<std::string>& known);

}  // namespace isotally
