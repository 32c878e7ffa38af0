#include "checks.hpp"

#include <GraphMol/PeriodicTable.h>
#include <GraphMol/RingInfo.h>
#include <fmt/format.h>

#include <algorithm>
#include <set>

namespace isotally::toolkit {
namespace {

/// Elements a group may hold; everything else but carbon and hydrogen is refused as a metal or as unknown.
bool is_usual_element(unsigned atomic_number) {
    static const std::set<unsigned> usual{1, 5, 6, 7, 8, 9, 13, 14, 15, 16, 17, 33, 35, 51, 53};
    return usual.contains(atomic_number);
}

/// Aromatic rings that share an atom; a saturated ring fused to a benzene is a bridge, not a fused aromatic.
int aromatic_rings(const RDKit::ROMol& mol, unsigned atom) {
    int count = 0;
    for (const auto& ring : mol.getRingInfo()->atomRings()) {
        const bool here = std::find(ring.begin(), ring.end(), static_cast<int>(atom)) != ring.end();
        count += here && std::all_of(ring.begin(), ring.end(), [&](int other) {
                     return mol.getAtomWithIdx(static_cast<unsigned>(other))->getIsAromatic();
                 });
    }
    return count;
}

std::string polycycle_name(const RDKit::ROMol& mol) {
    unsigned shared = 0, hetero = 0;
    for (const auto* atom : mol.atoms())
        if (atom->getIsAromatic() && mol.getRingInfo()->numAtomRings(atom->getIdx()) > 1) {
            ++shared;
        } else if (atom->getIsAromatic() && atom->getAtomicNum() != 6) {
            ++hetero;
        }
    if (hetero == 0 && shared == 2)
        return "a naphthalene or another fused ring system";
    return "a fused ring system";
}

}  // namespace

std::optional<Refusal> refuse_atoms(const RDKit::ROMol& mol) {
    for (const auto* atom : mol.atoms()) {
        const auto where = fmt::format("molecule, atom {}", atom->getIdx() + 1);
        if (atom->getAtomicNum() == 0)
            return Refusal{where, "an atom without an element (*); a whole molecule was expected"};
        if (atom->getIsotope() != 0)
            return Refusal{where,
                           fmt::format("an isotope ({}{}): rates of labelled rings are not in the tables",
                                       atom->getIsotope(), atom->getSymbol())};
        if (atom->getNumRadicalElectrons() != 0)
            return Refusal{where, fmt::format("a radical at {}: only closed-shell molecules are known",
                                              atom->getSymbol())};
        if (!is_usual_element(static_cast<unsigned>(atom->getAtomicNum())))
            return Refusal{where,
                           fmt::format("the element {}: organometallic compounds are not in the tables",
                                       atom->getSymbol())};
    }
    for (const auto* bond : mol.bonds())
        if (bond->getBondType() != RDKit::Bond::SINGLE && bond->getBondType() != RDKit::Bond::DOUBLE &&
            bond->getBondType() != RDKit::Bond::TRIPLE && bond->getBondType() != RDKit::Bond::AROMATIC)
            return Refusal{"molecule", "a bond that is neither single, double, triple nor aromatic"};
    return std::nullopt;
}

std::optional<Refusal> refuse_rings(const RDKit::ROMol& mol) {
    const auto& rings = *mol.getRingInfo();
    bool benzene = false;
    for (const auto& ring : rings.atomRings()) {
        bool aromatic = true, carbon = true;
        for (const int atom : ring) {
            aromatic &= mol.getAtomWithIdx(static_cast<unsigned>(atom))->getIsAromatic();
            carbon &= mol.getAtomWithIdx(static_cast<unsigned>(atom))->getAtomicNum() == 6;
        }
        if (!aromatic)
            continue;
        for (const int atom : ring)
            if (aromatic_rings(mol, static_cast<unsigned>(atom)) > 1)
                return Refusal{"molecule",
                               polycycle_name(mol) + ": factors are known for single benzene rings only"};
        if (!carbon || ring.size() != 6)
            return Refusal{"molecule",
                           "a hetero ring (such as pyridine or thiophene): its reactivity is not in the "
                           "tables, only benzene rings are"};
        benzene = true;
    }
    if (!benzene)
        return Refusal{"molecule", "no benzene ring in it"};
    return std::nullopt;
}

}  // namespace isotally::toolkit
