// Files the program writes: whole or not at all.
#pragma once

#include <string>

namespace isotally::cli {

/// Writes to a temporary file beside it, then renames. Throws Error{output}.
void write_file(const std::string& path, const std::string& text);

}  // namespace isotally::cli
