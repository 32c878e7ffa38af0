// The rows of all files with their fields as typed values, each row with its place.
#pragma once

#include <cstddef>
#include <map>
#include <string>
#include <string_view>
#include <vector>

#include "tables/columns.hpp"
#include "tables/faults.hpp"

namespace isotally {

struct Cell {
    enum class Kind { absent, faulty, text, number, flag };
    Kind kind = Kind::absent;
    std::string text;  // as written
    double number = 0;
    bool flag = false;
};

struct Record {
    std::size_t line = 0;
    std::map<std::string, Cell, std::less<>> cells;
    std::vector<Record> parts;  // products of a measurement
    std::string json;           // a source: the record itself

    const Cell& at(std::string_view column) const;  // an absent cell where there is none
    const std::string& text(std::string_view column) const { return at(column).text; }
    bool has(std::string_view column) const { return at(column).kind != Cell::Kind::absent; }
    /// Not a number where the cell holds none.
    double number(std::string_view column) const;
};

struct FileRecords {
    std::vector<Record> records;
    bool complete = false;  // false: some records could not be read, so ids may be missing
};

struct FolderRecords {
    std::map<std::string, FileRecords, std::less<>> files;
    std::string version;  // of datapackage.json

    const FileRecords& of(std::string_view file) const;
};

/// Everything that can be seen in one field or one record goes to `faults`.
FolderRecords read_records(const std::vector<TableFile>& files, FaultList& faults);

/// What only a look at other records shows: ids that stand twice, references, sums, used constants.
void check_records(const FolderRecords& folder, FaultList& faults);

}  // namespace isotally
