// The tables packed into the library when it was built.
#pragma once

#include <vector>

#include "isotally/factors.hpp"
#include "isotally/tables.hpp"

namespace isotally {

/// Knowledge made from the built-in tables; no file is read.
Knowledge built_in_knowledge();

/// Rows of the built-in bans.csv that decline energetic molecules and are missing from `tables` or altered
/// there: other tables may add to them, never take from them.
std::vector<Fault> missing_safety_rows(const Tables& tables);

/// The built-in files of tables/, byte for byte.
std::vector<TableFile> built_in_files();

}  // namespace isotally
