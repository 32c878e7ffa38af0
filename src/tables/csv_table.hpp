// Comma-separated files (RFC 4180, UTF-8), every row with the line it begins on.
#pragma once

#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

#include "tables/faults.hpp"

namespace isotally {

struct CsvRow {
    std::size_t line = 0;
    std::vector<std::string> fields;  // as many as the header has; blanks at the ends taken off
};

struct CsvTable {
    std::vector<std::string> header;
    std::size_t header_line = 0;
    std::vector<CsvRow> rows;
    bool complete = true;  // false: some rows could not be read
};

constexpr std::size_t max_file_bytes = std::size_t{16} << 20;
constexpr std::size_t max_field_bytes = std::size_t{64} << 10;

/// Byte order mark, CRLF, CR, empty lines and lines of empty fields are accepted. A broken row is a
/// fault, and reading goes on at the line after the one it begins on.
CsvTable read_csv(const std::string& file, std::string_view text, FaultList& faults);

/// Size, UTF-8 and control characters, for files of any kind; false: not worth reading on.
bool readable_text(const std::string& file, std::string_view text, FaultList& faults);

/// One field, in quotes where RFC 4180 needs them.
std::string csv_field(std::string_view text);

}  // namespace isotally
