// The least a list needs of the toolkit: parse and canonicalise each SMILES, then build, sanitise and
// canonicalise its nitro products (one for each class of equal free positions of a benzene ring).
#include <GraphMol/MolOps.h>
#include <GraphMol/RWMol.h>
#include <GraphMol/RingInfo.h>
#include <GraphMol/SmilesParse/SmilesParse.h>
#include <GraphMol/SmilesParse/SmilesWrite.h>
#include <GraphMol/new_canon.h>

#include <iostream>
#include <memory>
#include <set>
#include <string>

int main() {
    std::ios::sync_with_stdio(false);
    const std::unique_ptr<RDKit::RWMol> nitro(RDKit::SmilesToMol("[N+](=O)[O-]"));
    std::string line;
    while (std::getline(std::cin, line)) {
        const std::unique_ptr<RDKit::RWMol> molecule(RDKit::SmilesToMol(line));
        if (!molecule)
            continue;
        std::cout << RDKit::MolToSmiles(*molecule);
        std::vector<unsigned> rank(molecule->getNumAtoms());
        RDKit::Canon::rankMolAtoms(*molecule, rank, false);
        std::set<unsigned> done;
        for (const auto* atom : molecule->atoms()) {
            if (!atom->getIsAromatic() || atom->getAtomicNum() != 6 || atom->getTotalNumHs() != 1 ||
                !done.insert(rank[atom->getIdx()]).second)
                continue;
            RDKit::RWMol made(*molecule);
            const unsigned offset = made.getNumAtoms();
            made.insertMol(*nitro);
            made.addBond(atom->getIdx(), offset, RDKit::Bond::SINGLE);
            RDKit::MolOps::sanitizeMol(made);
            std::cout << ' ' << RDKit::MolToSmiles(made);
        }
        std::cout << '\n';
    }
}
