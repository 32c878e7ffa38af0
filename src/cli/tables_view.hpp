// How the entries of each kind are listed, found and shown.
#pragma once

#include <nlohmann/json.hpp>
#include <string>
#include <utility>
#include <vector>

#include "cli/tables_layout.hpp"
#include "isotally/tables.hpp"
#include "tables/records.hpp"

namespace isotally {

/// Rows of one file that belong to an entry.
struct RelatedRows {
    std::string title;  // "constants"; the key in JSON
    const FileSchema* schema;
    std::vector<const Record*> rows;
};

struct TablesView {
    const Tables& tables;
    const FolderRecords& folder;
};

/// One row an entry, the columns a reader looks for.
TextTable listing(const TablesView& view, const FileSchema& schema);

/// Every column; one row an isomer for measurements, id, type and citation for sources.
TextTable full_listing(const TablesView& view, const FileSchema& schema,
                       const std::vector<const Record*>& records);

/// The entries that this id, name or first key means. Throws Error{usage} where there is none.
std::vector<const Record*> find_entries(const TablesView& view, const FileSchema& schema,
                                        const std::string& id);

std::vector<RelatedRows> related_rows(const TablesView& view, const FileSchema& schema, const Record& record);

std::string entry_text(const TablesView& view, const FileSchema& schema,
                       const std::vector<const Record*>& records);

nlohmann::ordered_json record_json(const TablesView& view, const FileSchema& schema, const Record& record);
nlohmann::ordered_json entry_json(const TablesView& view, const FileSchema& schema, const Record& record);

/// Id and citation of every source that these entries and the rows that belong to them name.
std::vector<const Source*> sources_of(const TablesView& view, const FileSchema& schema,
                                      const std::vector<const Record*>& records);

}  // namespace isotally
