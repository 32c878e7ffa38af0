// Molecules by any name the program reads, and isomer shares by their place to the only group.
#pragma once

#include <algorithm>
#include <array>
#include <optional>
#include <string>

#include "../knowledge.hpp"
#include "isotally/names.hpp"

namespace isotally {

/// SMILES of a known name or of one the program writes itself; any other text as it is.
inline std::string named(const std::string& text) {
    const std::string known = smiles_of(text);
    if (known != text)
        return known;
    const auto groups = read_ring_name(tables(), text);
    return groups ? ring_smiles(tables(), *groups) : text;
}

inline Asked at(std::optional<double> temperature_C, std::optional<double> acid_percent = {}) {
    return {temperature_C, acid_percent, {}};
}

/// Isomer shares of a ring with one group: ortho, meta, para.
inline std::array<Range, 3> by_relation(const StepAnswer& answer) {
    std::array<Range, 3> out{};
    for (const auto& share : answer.shares) {
        const int locant = share.locants.front();
        out.at(static_cast<std::size_t>(std::min(locant, 8 - locant) - 2)) = share.percent;
    }
    return out;
}

}  // namespace isotally
