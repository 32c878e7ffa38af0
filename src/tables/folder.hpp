#pragma once

#include <string>
#include <vector>

#include "isotally/tables.hpp"

namespace isotally {

/// Writes every file into the folder, which is created or must be empty, each under a temporary name
/// and then renamed. Throws Error{output}.
void write_table_folder(const std::vector<TableFile>& files, const std::string& folder);

}  // namespace isotally
