// Knowledge as bytes: made at build time, read at start-up.
#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "isotally/factors.hpp"

namespace isotally {

/// Two parts, so that start-up reads only the first: knowledge, then the files it was made from.
std::string pack(const Knowledge& knowledge, const std::vector<TableFile>& files);

Knowledge unpack_knowledge(std::string_view packed);
std::vector<TableFile> unpack_files(std::string_view packed);

}  // namespace isotally
