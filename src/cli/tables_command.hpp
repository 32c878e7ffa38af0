// isotally tables: what is known, with every source.
#pragma once

#include <cstddef>
#include <functional>
#include <iosfwd>
#include <string>
#include <utility>
#include <vector>

#include "isotally/tables.hpp"

namespace isotally {

struct TablesRequest {
    std::string kind = {}, id = {};
    bool json = false, csv = false, lint = false, summary = false;
    std::string export_folder = {};

    /// Further lines of the summary, what is counted and how many; may be empty.
    std::function<std::vector<std::pair<std::string, std::size_t>>(const Tables&)> evidence_counts = {};
    /// Faults that only chemistry shows, asked for once the files are free of others; may be empty.
    std::function<std::vector<Fault>(const Tables&)> chemistry_faults = {};
};

/// Exit status: 0, or 4 where --lint finds faults. With lint, `tables` is not looked at. Throws
/// Error{usage} for kinds and ids that are not known, Error{output} where the export can't be written.
int tables_command(const TablesRequest& request, const Tables& tables, const std::vector<TableFile>& files,
                   std::ostream& out, std::ostream& err);

}  // namespace isotally
