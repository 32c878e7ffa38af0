// The tables packed into the library when it was built.
#pragma once

#include <vector>

#include "isotally/factors.hpp"
#include "isotally/tables.hpp"

namespace isotally {

/// Knowledge made from the built-in tables; no file is read.
Knowledge built_in_knowledge();

/// The built-in files of tables/, byte for byte.
std::vector<TableFile> built_in_files();

}  // namespace isotally
