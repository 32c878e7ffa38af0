#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "isotally/tables.hpp"

namespace isotally {

/// SHA-256 (FIPS 180-4) in lower-case hexadecimal digits.
std::string sha256_hex(std::string_view bytes);

/// "sha256:" and what `LC_ALL=C sha256sum * | sha256sum` prints in the folder of these files.
std::string digest_of(const std::vector<TableFile>& files);

}  // namespace isotally
