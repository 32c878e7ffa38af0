#include "isotally/arene.hpp"

#include <GraphMol/MolOps.h>
#include <GraphMol/SmilesParse/SmilesWrite.h>
#include <GraphMol/new_canon.h>
#include <fmt/format.h>

#include <algorithm>
#include <optional>

#include "arene/checks.hpp"
#include "arene/toolkit.hpp"

namespace isotally {
namespace {

using RDKit::ROMol;
using RDKit::RWMol;

/// Known groups that look most like this one, by their SMILES: same first atoms, then fewest edits.
std::string nearest_groups(const Tables& tables, const std::string& key) {
    std::vector<std::pair<std::size_t, const Substituent*>> near;
    for (const auto& group : tables.substituents) {
        if (group.smiles.empty() || group.smiles.find("Al") != std::string::npos)
            continue;
        std::size_t same = 0;
        while (same < std::min(key.size(), group.smiles.size()) && key[same] == group.smiles[same])
            ++same;
        const std::size_t apart = std::max(key.size(), group.smiles.size()) - same;
        near.emplace_back(100 * (key.size() - std::min(same, key.size())) + apart, &group);
    }
    std::stable_sort(near.begin(), near.end(),
                     [](const auto& a, const auto& b) { return a.first < b.first; });
    std::string text;
    for (std::size_t i = 0; i < std::min<std::size_t>(3, near.size()); ++i)
        text += (i ? ", " : "") + near[i].second->name + " (" + near[i].second->smiles + ")";
    return text;
}

/// Generic classes match on the group cut off with its ring atom as a dummy.
int generic_group(const Tables& tables, const GroupIndex& index, const std::string& key,
                  Workspace& workspace) {
    std::unique_ptr<RWMol> parsed;
    try {
        parsed = toolkit::parse(key);
    } catch (const std::exception&) {
        return -1;
    }
    if (!parsed)
        return -1;
    const Molecule fragment{std::move(*parsed), {}};
    for (const int candidate : index.generic) {
        const auto& group = tables.substituents[static_cast<std::size_t>(candidate)];
        if (occurs(workspace, fragment, group.smarts, "substituents.csv:" + group.id))
            return candidate;
    }
    return -1;
}

Answer<Ring> read_ring(const Tables& tables, const GroupIndex& index, const ROMol& mol,
                       const std::vector<int>& atoms, Workspace& workspace) {
    Ring ring;
    std::copy(atoms.begin(), atoms.end(), ring.atoms.begin());
    for (std::size_t i = 0; i < 6; ++i) {
        ring.groups[i] = -1;
        const auto* atom = mol.getAtomWithIdx(static_cast<unsigned>(ring.atoms[i]));
        for (const auto* next : mol.atomNeighbors(atom)) {
            if (std::find(atoms.begin(), atoms.end(), static_cast<int>(next->getIdx())) != atoms.end())
                continue;
            const std::string written = toolkit::written_group(mol, atom->getIdx(), next->getIdx());
            if (const auto met = workspace.groups.find(written); met != workspace.groups.end()) {
                ring.groups[i] = met->second;
                continue;
            }
            const std::string key = toolkit::group_key(mol, atom->getIdx(), next->getIdx());
            if (std::count(key.begin(), key.end(), '*') != 1 || key.empty())
                return Refusal{"molecule",
                               "a bridge between two positions of the benzene ring (as in indane or "
                               "benzodioxole): only groups that hang on one position are known"};
            const auto found = index.exact.find(key);
            ring.groups[i] =
                found != index.exact.end() ? found->second : generic_group(tables, index, key, workspace);
            if (ring.groups[i] < 0)
                return Refusal{"molecule",
                               fmt::format("the group {} is not in the tables; the nearest known ones are {}",
                                           key, nearest_groups(tables, key))};
            workspace.groups.emplace(written, ring.groups[i]);
        }
    }
    return ring;
}

/// Does any group of the ring come back to it by another position?
bool bridged(const ROMol& mol, const std::vector<int>& ring) {
    std::vector<int> home(mol.getNumAtoms(), -1);
    for (const int atom : ring)
        home[static_cast<std::size_t>(atom)] = atom;
    for (const int atom : ring) {
        std::vector<unsigned> front;
        for (const auto* next : mol.atomNeighbors(mol.getAtomWithIdx(static_cast<unsigned>(atom))))
            if (home[next->getIdx()] < 0) {
                home[next->getIdx()] = atom;
                front.push_back(next->getIdx());
            }
        while (!front.empty()) {
            const unsigned at = front.back();
            front.pop_back();
            for (const auto* next : mol.atomNeighbors(mol.getAtomWithIdx(at))) {
                auto& owner = home[next->getIdx()];
                if (owner >= 0 && owner != atom)
                    return true;
                if (owner == atom)
                    continue;
                owner = atom;
                front.push_back(next->getIdx());
            }
        }
    }
    return false;
}

/// The molecule with its atoms in the order of its canonical SMILES.
std::unique_ptr<RWMol> in_canonical_order(const RWMol& mol, const std::string& smiles) {
    if (smiles.find_first_of("@/\\") != std::string::npos)
        return toolkit::parse(smiles);  // hands hang on the order of atoms
    std::vector<unsigned> order;
    mol.getProp(RDKit::common_properties::_smilesAtomOutputOrder, order);
    const std::unique_ptr<ROMol> ordered(RDKit::MolOps::renumberAtoms(mol, order));
    return std::make_unique<RWMol>(std::move(*ordered));
}

Answer<Arene> from_toolkit(const Tables& tables, const GroupIndex& index, std::unique_ptr<RWMol> raw,
                           Workspace& workspace) {
    Arene arene;
    for (auto* atom : raw->atoms())
        atom->setAtomMapNum(0);  // numbers of a reaction drawing say nothing about the molecule
    if (const auto refused = toolkit::refuse_atoms(*raw)) {
        // a metal counter-ion is taken off first; anything else is final
        if (RDKit::MolOps::getMolFrags(*raw, false).size() == 1)
            return *refused;
    }
    auto single = toolkit::without_counter_ions(std::move(raw), arene.notes);
    if (const auto* refused = refusal(single))
        return *refused;
    const auto& mol = *std::get<std::unique_ptr<RWMol>>(single);
    if (const auto refused = toolkit::refuse_atoms(mol))
        return *refused;
    if (const auto refused = toolkit::refuse_rings(mol))
        return *refused;

    arene.smiles = toolkit::write_smiles(mol);
    const auto canonical = in_canonical_order(mol, arene.smiles);
    for (const auto& atoms : canonical->getRingInfo()->atomRings()) {
        if (!canonical->getAtomWithIdx(static_cast<unsigned>(atoms[0]))->getIsAromatic())
            continue;
        auto order = atoms;
        const auto first = std::min_element(order.begin(), order.end());
        std::rotate(order.begin(), first, order.end());
        if (order[1] > order[5])
            std::reverse(order.begin() + 1, order.end());
        if (bridged(*canonical, order))
            return Refusal{"molecule", "a bridge between two positions of a benzene ring (as in indane or "
                                       "benzodioxole): only groups that hang on one position are known"};
        auto ring = read_ring(tables, index, *canonical, order, workspace);
        if (const auto* refused = refusal(ring))
            return *refused;
        arene.rings.push_back(std::get<Ring>(ring));
    }
    std::sort(arene.rings.begin(), arene.rings.end(),
              [](const Ring& a, const Ring& b) { return a.atoms[0] < b.atoms[0]; });
    bool free = false;
    for (const auto& ring : arene.rings)
        free |= std::count(ring.groups.begin(), ring.groups.end(), -1) > 0;
    if (!free)
        return Refusal{"molecule", "no free position on the benzene ring"};
    arene.molecule = std::make_shared<const Molecule>(Molecule{std::move(*canonical), {}});
    return arene;
}

void add_rings(RDKit::RingInfo& rings, const RWMol& mol, unsigned first_atom, unsigned first_bond) {
    const auto moved = [](std::vector<int> numbers, unsigned first) {
        for (int& number : numbers)
            number += static_cast<int>(first);
        return numbers;
    };
    const auto& known = *mol.getRingInfo();
    for (std::size_t i = 0; i < known.atomRings().size(); ++i)
        rings.addRing(moved(known.atomRings()[i], first_atom), moved(known.bondRings()[i], first_bond));
}

/// The molecule with the group's first atom bound to a ring atom. Both are sanitised and a single bond
/// between them changes neither rings nor aromaticity, so that counting valences anew is enough.
RWMol product(const RWMol& mol, const RWMol& group, unsigned ring_atom) {
    RWMol made(mol, true);  // without what is only remembered about it
    const unsigned offset = made.getNumAtoms();
    made.insertMol(group);
    made.addBond(ring_atom, offset, RDKit::Bond::SINGLE);
    auto* atom = made.getAtomWithIdx(ring_atom);
    if (atom->getNumExplicitHs() > 0)
        atom->setNumExplicitHs(atom->getNumExplicitHs() - 1);
    made.updatePropertyCache(true);
    auto& rings = *made.getRingInfo();
    if (rings.isInitialized())
        rings.reset();
    rings.initialize();
    add_rings(rings, mol, 0, 0);
    add_rings(rings, group, offset, mol.getNumBonds());
    return made;
}

/// The new group without its dummy; its first atom keeps the open valence.
RWMol open_group(const std::string& new_group) {
    const auto group = toolkit::parse(new_group);
    group->removeAtom(0u);
    if (group->getRingInfo()->isInitialized())
        group->getRingInfo()->reset();
    RDKit::MolOps::symmetrizeSSSR(*group);
    return *group;
}

}  // namespace

Answer<Arene> parse_arene(const Tables& tables, const GroupIndex& index, std::string_view smiles) {
    Workspace workspace;
    return parse_arene(tables, index, smiles, workspace);
}

Answer<Arene> parse_arene(const Tables& tables, const GroupIndex& index, std::string_view smiles,
                          Workspace& workspace) {
    return from_toolkit(tables, index, toolkit::read_smiles(smiles), workspace);
}

Answer<Arene> parse_molfile(const Tables& tables, const GroupIndex& index, std::string_view text) {
    Workspace workspace;
    return from_toolkit(tables, index, toolkit::read_molfile(text), workspace);
}

std::vector<Site> sites(const Arene& arene, const std::string& new_group) {
    Workspace workspace;
    return sites(arene, new_group, workspace);
}

std::vector<Site> sites(const Arene& arene, const std::string& new_group, Workspace& workspace) {
    const auto& mol = arene.molecule->mol;
    auto opened = workspace.new_groups.find(new_group);
    if (opened == workspace.new_groups.end())
        opened = workspace.new_groups.emplace(new_group, open_group(new_group)).first;
    const auto& group = opened->second;
    std::vector<unsigned> rank(mol.getNumAtoms());
    RDKit::Canon::rankMolAtoms(mol, rank, false);
    std::vector<Site> found;
    std::vector<std::pair<unsigned, std::size_t>> known;  // symmetry class -> entry
    for (std::size_t r = 0; r < arene.rings.size(); ++r)
        for (std::size_t p = 0; p < 6; ++p) {
            if (arene.rings[r].groups[p] >= 0)
                continue;
            const auto atom = static_cast<unsigned>(arene.rings[r].atoms[p]);
            const auto same = std::find_if(known.begin(), known.end(),
                                           [&](const auto& entry) { return entry.first == rank[atom]; });
            std::size_t entry = found.size();
            if (same != known.end()) {
                entry = same->second;
            } else {
                auto made = std::make_shared<const Molecule>(Molecule{product(mol, group, atom), {}});
                const std::string smiles = toolkit::write_smiles(made->mol);
                const auto twin = std::find_if(found.begin(), found.end(),
                                               [&](const Site& site) { return site.product == smiles; });
                entry = static_cast<std::size_t>(twin - found.begin());
                if (twin == found.end())
                    found.push_back({static_cast<int>(r), {}, 0, smiles, std::move(made)});
                known.emplace_back(rank[atom], entry);
            }
            auto& site = found[entry];
            ++site.multiplicity;
            if (site.ring == static_cast<int>(r))
                site.positions.push_back(static_cast<int>(p));
        }
    return found;
}

}  // namespace isotally
