// The toolkit's molecule and the few things arene needs from it.
#pragma once

// first: other headers of the toolkit lay out their classes by it
#include <RDGeneral/RDConfig.h>

#include <GraphMol/GraphMol.h>
#include <GraphMol/RWMol.h>

#include <array>
#include <bitset>
#include <cstdint>
#include <map>
#include <memory>
#include <string>
#include <string_view>
#include <unordered_map>
#include <utility>
#include <vector>

#include "isotally/arene.hpp"

namespace isotally {

struct Screened;  // a compiled pattern

namespace toolkit {

using AtomClass = std::array<int, 5>;  // what simple queries ask: see class_of
using AtomClasses = std::bitset<128>;

/// Bonds of one kind: classes of their ends, order, ring, and the first of them.
struct SeenBond {
    std::uint8_t low = 0, high = 0;
    RDKit::Bond::BondType type{};
    bool in_ring = false;
    unsigned example = 0;
    bool operator==(const SeenBond& other) const {
        return low == other.low && high == other.high && type == other.type && in_ring == other.in_ring;
    }
};

/// Atoms and bonds by the classes of a workspace, once it was asked for a pattern.
struct Seen {
    std::shared_ptr<const int> by;  // the workspace
    AtomClasses classes;
    std::array<std::uint16_t, AtomClasses().size()> atoms{};
    std::vector<SeenBond> bonds;
    std::vector<std::pair<const Screened*, bool>> results;  // of patterns that were looked for
};

}  // namespace toolkit

struct Molecule {
    RDKit::RWMol mol;
    mutable toolkit::Seen seen{};
};

struct Pattern {
    RDKit::RWMol query;
};

struct Workspace {
    struct Example {
        RDKit::ROMol mol;
        unsigned atom;
    };
    std::shared_ptr<const int> identity =
        std::make_shared<const int>(0);  // its address is this workspace's name
    std::map<toolkit::AtomClass, std::size_t> numbers;
    std::vector<Example> examples;  // an atom of each class, by number
    std::unordered_map<std::string, std::shared_ptr<Screened>> patterns;
    std::unordered_map<const char*, Screened*> places;  // the same by where their text stands
    std::unordered_map<std::string, int> groups;        // as they are written -> index
    std::unordered_map<std::string, std::shared_ptr<const Molecule>> molecules;
    std::unordered_map<std::string, RDKit::RWMol> new_groups;  // without their dummy
};

namespace toolkit {

inline constexpr std::size_t longest_smiles = 1000;
inline constexpr unsigned most_atoms = 300;

/// The toolkit's own reading: null or an exception of its own where it can't. All parsing goes through here,
/// as its log is global and read_smiles looks into it.
std::unique_ptr<RDKit::RWMol> parse(const std::string& smiles);

/// Canonical SMILES. Where a molecule has no stereo marks the toolkit need not look for centres: half the
/// time, the same text.
std::string write_smiles(const RDKit::ROMol& mol);

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

/// The same group as its atoms and bonds happen to stand in the molecule: equal texts are equal groups, not
/// the other way round.
std::string written_group(const RDKit::ROMol& mol, unsigned ring_atom, unsigned first);

/// SMILES of benzene with one group ("*C" -> "c1ccccc1C").
std::string on_benzene(std::string_view group);

}  // namespace toolkit
}  // namespace isotally
