// Which rings, groups and sites a molecule has, and what substitution makes of it.
#pragma once

#include <array>
#include <memory>
#include <string>
#include <string_view>
#include <unordered_map>
#include <vector>

#include "isotally/names.hpp"
#include "isotally/tables.hpp"

namespace isotally {

/// Longest molfile that is read, in bytes.
inline constexpr std::size_t longest_molfile = 1u << 20;

/// The groups of the tables as they are found on a ring: key of the group (a canonical form made by
/// the toolkit) to its index in Tables::substituents. Made once by index_groups.
struct GroupIndex {
    std::unordered_map<std::string, int> exact;
    std::vector<int> generic;  // generic classes in the order in which they are tried
};

/// Throws Error{tables} where the SMILES or SMARTS of a substituent can't be read.
GroupIndex index_groups(const Tables& tables);

/// One benzene ring: its atoms in order round the ring and the group at each (-1: hydrogen).
struct Ring {
    std::array<int, 6> atoms{};
    RingGroups groups{};
};

struct Molecule;  // the toolkit's molecule

/// What one thread keeps between molecules: patterns compiled on first use, groups met before.
struct Workspace;
std::shared_ptr<Workspace> new_workspace();

struct Arene {
    std::string smiles;              // canonical, as fed
    std::vector<Ring> rings;         // every benzene ring; order and start follow the canonical form
    std::vector<std::string> notes;  // counter-ions taken off ...
    std::shared_ptr<const Molecule> molecule;  // not to be shared between threads
};

/// Positions that give the same product.
struct Site {
    int ring = 0;                              // ring of the first of them
    std::vector<int> positions;                // positions on that ring
    int multiplicity = 0;                      // all equivalent positions of the molecule
    std::string product;                       // canonical SMILES
    std::shared_ptr<const Molecule> molecule;  // of the product
};

/// Reads a SMILES of up to 1,000 characters and 300 atoms. Throws Error{input} where it is none;
/// refuses what has no benzene ring, fused or hetero rings, mixtures other than simple salts (Na, K,
/// Cl, HSO4 are taken off with a note), isotopes, radicals, metals, and groups the tables don't know.
Answer<Arene> parse_arene(const Tables& tables, const GroupIndex& index, std::string_view smiles);
Answer<Arene> parse_arene(const Tables& tables, const GroupIndex& index, std::string_view smiles,
                          Workspace& workspace);

/// The same from a molfile (V2000 or V3000).
Answer<Arene> parse_molfile(const Tables& tables, const GroupIndex& index, std::string_view text);

/// SMILES of a ring that carries these groups; empty where a group is a generic class.
std::string ring_smiles(const Tables& tables, const RingGroups& groups);

/// Canonical form of a SMILES that the tables hold. Throws Error{tables}.
std::string canonical_smiles(std::string_view smiles, const std::string& where);

/// The free positions, grouped by product, for a new group ("*[N+](=O)[O-]").
std::vector<Site> sites(const Arene& arene, const std::string& new_group);
std::vector<Site> sites(const Arene& arene, const std::string& new_group, Workspace& workspace);

struct Pattern;  // the toolkit's query

/// Throws Error{tables} at `where` for a SMARTS that can't be read.
std::shared_ptr<const Pattern> read_pattern(const std::string& smarts, const std::string& where);

/// The toolkit's molecule of a SMILES; throws as parse_arene does, refuses nothing.
std::shared_ptr<const Molecule> read_molecule(std::string_view smiles);

/// The same for a text that comes again and again: read once.
std::shared_ptr<const Molecule> read_molecule(const std::string& smiles, Workspace& workspace);

/// Whether, and how often, a pattern (SMARTS; read_pattern's errors) occurs in a molecule.
bool occurs(Workspace& workspace, const Molecule& molecule, const std::string& smarts,
            std::string_view where);
int count_matches(Workspace& workspace, const Molecule& molecule, const std::string& smarts,
                  std::string_view where);

/// At most so many atoms can be the only one of a pattern of one atom.
int most_atoms_for(Workspace& workspace, const Molecule& molecule, const std::string& smarts,
                   std::string_view where);

/// The quick look that comes before: false only where the atoms for the pattern are not there.
bool may_occur(Workspace& workspace, const Molecule& molecule, const std::string& smarts,
               std::string_view where);

}  // namespace isotally
