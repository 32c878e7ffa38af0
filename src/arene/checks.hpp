// What arene refuses, and why.
#pragma once

#include <optional>

#include "toolkit.hpp"

namespace isotally::toolkit {

/// Isotopes, radicals, metals, dummy atoms, odd bonds.
std::optional<Refusal> refuse_atoms(const RDKit::ROMol& mol);

/// No benzene ring, fused rings, hetero rings.
std::optional<Refusal> refuse_rings(const RDKit::ROMol& mol);

}  // namespace isotally::toolkit
