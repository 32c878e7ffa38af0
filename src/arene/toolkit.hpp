// The toolkit's molecule and the few things arene needs from it.
#pragma once

#include <GraphMol/GraphMol.h>
#include <GraphMol/RWMol.h>

#include <memory>
#include <string>
#include <string_view>
#include <vector>

#include "isotally/arene.hpp"

namespace isotally {

struct Molecule {
    RDKit::ROMol mol;
};

struct Pattern {
    RDKit::RWMol query;
};

namespace toolkit {

inline constexpr std::size_t longest_smiles = 1000;
inline constexpr unsigned most_atoms = 300;

/// Parses and sanitises. Throws Error{input} whose `where` is "SMILES" or "SMILES character N".
std::unique_ptr<RDKit::RWMol> read_smiles(std::string_view smiles);

/// The same from a molfile; `where` is "molfile" or "molfile line N".
std::unique_ptr<RDKit::RWMol> read_molfile(std::string_view text);

/// Takes off the counter-ions of simple salts and neutralises what they leave; says so in `notes`.
/// Refuses other mixtures.
Answer<std::unique_ptr<RDKit::RWMol>> without_counter_ions(std::unique_ptr<RDKit::RWMol> mol,
                                                           std::vector<std::string>& notes);

/// Key of the group that starts at `first` and hangs on ring atom `ring_atom`: its canonical SMILES
/// with the ring atom written as *. Empty where the group comes back to the ring.
std::string group_key(const RDKit::ROMol& mol, unsigned ring_atom, unsigned first);

/// SMILES of benzene with one group ("*C" -> "c1ccccc1C").
std::string on_benzene(std::string_view group);

}  // namespace toolkit
}  // namespace isotally
