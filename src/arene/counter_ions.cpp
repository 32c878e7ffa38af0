#include <GraphMol/MolOps.h>
#include <GraphMol/SmilesParse/SmilesWrite.h>
#include <fmt/format.h>

#include <algorithm>
#include <map>

#include "toolkit.hpp"

namespace isotally::toolkit {
namespace {

/// Canonical SMILES of what is taken off, and what the note calls it.
const std::map<std::string, std::string>& counter_ions() {
    static const std::map<std::string, std::string> known{{"[Na+]", "sodium"},
                                                          {"[K+]", "potassium"},
                                                          {"[Cl-]", "chloride"},
                                                          {"Cl", "hydrogen chloride"},
                                                          {"O=S(=O)([O-])O", "hydrogen sulfate"},
                                                          {"O=S(=O)(O)O", "sulfuric acid"}};
    return known;
}

/// Anions next to no cation take a proton, protonated amines lose one: the form that is fed.
void neutralise(RDKit::RWMol& mol) {
    for (auto* atom : mol.atoms()) {
        bool charged_neighbour = false;
        for (const auto* other : mol.atomNeighbors(atom))
            charged_neighbour |= other->getFormalCharge() != 0;
        if (charged_neighbour)
            continue;
        if (atom->getFormalCharge() == -1 && atom->getAtomicNum() == 8) {
            atom->setFormalCharge(0);
            if (atom->getNoImplicit())
                atom->setNumExplicitHs(atom->getNumExplicitHs() + 1);
        } else if (atom->getFormalCharge() == 1 && atom->getAtomicNum() == 7 && atom->getTotalNumHs() > 0) {
            atom->setFormalCharge(0);
            if (atom->getNumExplicitHs() > 0)
                atom->setNumExplicitHs(atom->getNumExplicitHs() - 1);
        }
        atom->updatePropertyCache(false);
    }
    RDKit::MolOps::sanitizeMol(mol);
}

/// As sulfanilic acid is often written: ammonium and acid anion in one molecule.
bool is_inner_salt(const RDKit::RWMol& mol) {
    int ammonium = 0, anion = 0;
    for (const auto* atom : mol.atoms()) {
        ammonium += atom->getFormalCharge() == 1 && atom->getAtomicNum() == 7 && atom->getTotalNumHs() > 0;
        anion += atom->getFormalCharge() == -1 && atom->getAtomicNum() == 8 && atom->getDegree() == 1 &&
                 (*mol.atomNeighbors(atom).begin())->getFormalCharge() == 0;
    }
    return ammonium > 0 && ammonium == anion;
}

}  // namespace

Answer<std::unique_ptr<RDKit::RWMol>> without_counter_ions(std::unique_ptr<RDKit::RWMol> mol,
                                                           std::vector<std::string>& notes) {
    std::vector<int> fragment_of_atom;
    if (RDKit::MolOps::getMolFrags(*mol, fragment_of_atom) == 1) {
        if (is_inner_salt(*mol)) {
            neutralise(*mol);
            notes.emplace_back("an inner salt, taken in its uncharged form");
        }
        return mol;
    }
    std::unique_ptr<RDKit::RWMol> kept;
    for (const auto& part : RDKit::MolOps::getMolFrags(*mol, false)) {
        const std::string smiles = RDKit::MolToSmiles(*part);
        const auto ion = counter_ions().find(smiles);
        if (ion != counter_ions().end()) {
            const auto note = fmt::format("{} taken off as a counter-ion", ion->second);
            if (std::find(notes.begin(), notes.end(), note) == notes.end())
                notes.push_back(note);
        } else if (!kept) {
            kept = std::make_unique<RDKit::RWMol>(*part);
        } else if (RDKit::MolToSmiles(*kept) == smiles) {
            const std::string note = "the same molecule stands there more than once: taken once";
            if (std::find(notes.begin(), notes.end(), note) == notes.end())
                notes.push_back(note);
        } else {
            return Refusal{"molecule",
                           fmt::format("a mixture ({} with {}): only one substance is taken, and the "
                                       "counter-ions Na, K, Cl and HSO4 are taken off",
                                       RDKit::MolToSmiles(*kept), smiles)};
        }
    }
    if (!kept)
        return Refusal{"molecule", "it holds counter-ions only, no benzene ring"};
    if (const int charge = RDKit::MolOps::getFormalCharge(*mol); charge != 0)
        return Refusal{"molecule",
                       fmt::format("the charges of the salt do not cancel: {:+d} is left over", charge)};
    neutralise(*kept);
    return kept;
}

}  // namespace isotally::toolkit
