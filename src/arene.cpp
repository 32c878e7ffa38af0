#include "isotally/arene.hpp"

#include <GraphMol/MolOps.h>
#include <GraphMol/SmilesParse/SmilesParse.h>
#include <GraphMol/SmilesParse/SmilesWrite.h>
#include <GraphMol/Substruct/SubstructMatch.h>
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
int generic_group(const Tables& tables, const GroupIndex& index, const std::string& key) {
    std::unique_ptr<RWMol> fragment;
    try {
        fragment.reset(RDKit::SmilesToMol(key));
    } catch (const std::exception&) {
        return -1;
    }
    if (!fragment)
        return -1;
    for (const int candidate : index.generic) {
        const auto& group = tables.substituents[static_cast<std::size_t>(candidate)];
        const std::unique_ptr<RWMol> pattern(RDKit::SmartsToMol(group.smarts));
        if (!RDKit::SubstructMatch(*fragment, *pattern).empty())
            return candidate;
    }
    return -1;
}

Answer<Ring> read_ring(const Tables& tables, const GroupIndex& index, const ROMol& mol,
                       const std::vector<int>& atoms) {
    Ring ring;
    std::copy(atoms.begin(), atoms.end(), ring.atoms.begin());
    for (std::size_t i = 0; i < 6; ++i) {
        ring.groups[i] = -1;
        const auto* atom = mol.getAtomWithIdx(static_cast<unsigned>(ring.atoms[i]));
        for (const auto* next : mol.atomNeighbors(atom)) {
            if (std::find(atoms.begin(), atoms.end(), static_cast<int>(next->getIdx())) != atoms.end())
                continue;
            const std::string key = toolkit::group_key(mol, atom->getIdx(), next->getIdx());
            if (std::count(key.begin(), key.end(), '*') != 1 || key.empty())
                return Refusal{"molecule",
                               "a bridge between two positions of the benzene ring (as in indane or "
                               "benzodioxole): only groups that hang on one position are known"};
            const auto found = index.exact.find(key);
            ring.groups[i] = found != index.exact.end() ? found->second : generic_group(tables, index, key);
            if (ring.groups[i] < 0)
                return Refusal{"molecule",
                               fmt::format("the group {} is not in the tables; the nearest known ones are {}",
                                           key, nearest_groups(tables, key))};
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

Answer<Arene> from_toolkit(const Tables& tables, const GroupIndex& index, std::unique_ptr<RWMol> raw) {
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

    arene.smiles = RDKit::MolToSmiles(mol);
    std::unique_ptr<RWMol> canonical(RDKit::SmilesToMol(arene.smiles));
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
        auto ring = read_ring(tables, index, *canonical, order);
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
    arene.molecule = std::make_shared<const Molecule>(Molecule{ROMol(*canonical)});
    return arene;
}

/// The molecule with the group's first atom bound to a ring atom.
ROMol product(const ROMol& mol, const ROMol& group, unsigned ring_atom) {
    RWMol made(mol);
    const unsigned offset = made.getNumAtoms();
    made.insertMol(group);
    made.addBond(ring_atom, offset, RDKit::Bond::SINGLE);
    auto* atom = made.getAtomWithIdx(ring_atom);
    if (atom->getNumExplicitHs() > 0)
        atom->setNumExplicitHs(atom->getNumExplicitHs() - 1);
    RDKit::MolOps::sanitizeMol(made);
    return made;
}

/// The new group without its dummy; its first atom keeps the open valence.
RWMol open_group(std::string_view new_group) {
    std::unique_ptr<RWMol> group(RDKit::SmilesToMol(std::string(new_group)));
    group->removeAtom(0u);
    return *group;
}

}  // namespace

Answer<Arene> parse_arene(const Tables& tables, const GroupIndex& index, std::string_view smiles) {
    return from_toolkit(tables, index, toolkit::read_smiles(smiles));
}

Answer<Arene> parse_molfile(const Tables& tables, const GroupIndex& index, std::string_view text) {
    return from_toolkit(tables, index, toolkit::read_molfile(text));
}

std::vector<Site> sites(const Arene& arene, std::string_view new_group) {
    const auto& mol = arene.molecule->mol;
    const auto group = open_group(new_group);
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
                auto made = std::make_shared<const Molecule>(Molecule{product(mol, group, atom)});
                const std::string smiles = RDKit::MolToSmiles(made->mol);
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
