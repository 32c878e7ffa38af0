// The least a program on this toolkit can do: read one SMILES, print its canonical form.
#include <GraphMol/RDKitBase.h>
#include <GraphMol/SmilesParse/SmilesParse.h>
#include <GraphMol/SmilesParse/SmilesWrite.h>

#include <iostream>
#include <memory>

int main(int argc, char** argv) {
    const std::unique_ptr<RDKit::RWMol> molecule(RDKit::SmilesToMol(argc > 1 ? argv[1] : ""));
    if (!molecule) {
        return 1;
    }
    std::cout << RDKit::MolToSmiles(*molecule) << '\n';
}
