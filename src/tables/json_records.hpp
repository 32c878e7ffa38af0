// Files that hold a JSON array of objects, every object with the line it begins on.
#pragma once

#include <cstddef>
#include <nlohmann/json.hpp>
#include <string>
#include <string_view>
#include <vector>

#include "tables/faults.hpp"

namespace isotally {

struct JsonRecord {
    std::size_t line = 0;
    nlohmann::ordered_json object;
};

struct JsonRecords {
    std::vector<JsonRecord> records;  // where the text is broken, those before the break
    bool complete = true;
};

/// An array of objects, strictly: names that stand twice in one object, texts over 64 KiB and
/// nesting over 16 levels are faults.
JsonRecords read_json_records(const std::string& file, std::string_view text, FaultList& faults);

/// A file that is one JSON object, as strictly; null where it can't be read.
nlohmann::ordered_json read_json_object(const std::string& file, std::string_view text, FaultList& faults);

}  // namespace isotally
