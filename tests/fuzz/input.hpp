// What all fuzz targets need.
#pragma once

#include <cstdint>
#include <cstdlib>
#include <string>

#include "isotally/built_in.hpp"

namespace isotally::fuzz {

inline std::string text_of(const std::uint8_t* data, std::size_t size) {
    return {reinterpret_cast<const char*>(data), size};
}

inline const Knowledge& knowledge() {
    static const Knowledge known = built_in_knowledge();
    return known;
}

/// What has to hold whatever is read.
inline void require(bool holds) {
    if (!holds)
        std::abort();
}

}  // namespace isotally::fuzz
