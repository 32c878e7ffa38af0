#include <GraphMol/SmilesParse/SmilesParse.h>
#include <GraphMol/SmilesParse/SmilesWrite.h>
#include <fmt/format.h>

#include <algorithm>

#include "toolkit.hpp"

namespace isotally {
namespace toolkit {

std::string on_benzene(std::string_view group) {
    return "c1ccccc1" + std::string(group.substr(1));
}

std::string group_key(const RDKit::ROMol& mol, unsigned ring_atom, unsigned first) {
    std::vector<int> atoms{static_cast<int>(ring_atom)};
    std::vector<bool> seen(mol.getNumAtoms(), false);
    seen[ring_atom] = true;
    std::vector<unsigned> front{first};
    seen[first] = true;
    while (!front.empty()) {
        const unsigned at = front.back();
        front.pop_back();
        atoms.push_back(static_cast<int>(at));
        for (const auto* next : mol.atomNeighbors(mol.getAtomWithIdx(at))) {
            const unsigned index = next->getIdx();
            if (index == ring_atom && at != first)
                return {};
            if (seen[index])
                continue;
            seen[index] = true;
            front.push_back(index);
        }
    }
    std::vector<std::string> symbols(mol.getNumAtoms());
    for (const auto* atom : mol.atoms()) {
        auto& symbol = symbols[atom->getIdx()];
        if (atom->getIdx() == ring_atom)
            symbol = "*";
        else
            symbol = RDKit::SmilesWrite::GetAtomSmiles(atom, false, nullptr, false, false);
    }
    return RDKit::MolFragmentToSmiles(mol, atoms, nullptr, &symbols, nullptr, false);
}

std::string written_group(const RDKit::ROMol& mol, unsigned ring_atom, unsigned first) {
    std::string text;
    const auto put = [&](unsigned number) { text += static_cast<char>(number); };
    std::vector<unsigned> order{ring_atom, first};  // in the order in which they are met
    for (std::size_t i = 1; i < order.size(); ++i) {
        const auto* atom = mol.getAtomWithIdx(order[i]);
        put(static_cast<unsigned>(atom->getAtomicNum()));
        put(atom->getTotalNumHs());
        put(static_cast<unsigned>(atom->getFormalCharge() + 8));
        put(static_cast<unsigned>(atom->getChiralTag()));
        for (const auto* bond : mol.atomBonds(atom)) {
            const unsigned other = bond->getOtherAtomIdx(order[i]);
            auto at = std::find(order.begin(), order.end(), other);
            if (at == order.end())
                at = order.insert(at, other);
            put(static_cast<unsigned>(bond->getBondType()));
            put(static_cast<unsigned>(bond->getStereo()));
            const auto place = static_cast<unsigned>(at - order.begin());
            put(place & 0xff);
            put(place >> 8);
        }
        put(0xff);
    }
    return text;
}

}  // namespace toolkit

GroupIndex index_groups(const Tables& tables) {
    GroupIndex index;
    for (std::size_t i = 0; i < tables.substituents.size(); ++i) {
        const auto& group = tables.substituents[i];
        const std::string where = fmt::format("substituents.csv:{}", group.line);
        if (group.smiles.empty()) {
            read_pattern(group.smarts, where + ":smarts");
            index.generic.push_back(static_cast<int>(i));
            continue;
        }
        try {
            const auto mol = toolkit::read_smiles(toolkit::on_benzene(group.smiles));
            index.exact.emplace(toolkit::group_key(*mol, 5, 6), static_cast<int>(i));
        } catch (const Error& e) {
            throw Error(ErrorKind::tables, where + ":smiles", e.what());
        }
    }
    std::stable_sort(index.generic.begin(), index.generic.end(), [&](int a, int b) {
        const auto& left = tables.substituents[static_cast<std::size_t>(a)];
        const auto& right = tables.substituents[static_cast<std::size_t>(b)];
        return std::tie(left.rank, left.id) < std::tie(right.rank, right.id);
    });
    return index;
}

std::string ring_smiles(const Tables& tables, const RingGroups& groups) {
    std::string smiles;
    for (std::size_t i = 0; i < 6; ++i) {
        smiles += 'c';
        if (i == 0 || i == 5)
            smiles += "%99";
        if (groups[i] < 0)
            continue;
        const auto& group = tables.substituents[static_cast<std::size_t>(groups[i])];
        if (group.smiles.empty())
            return {};
        smiles += "(" + group.smiles.substr(1) + ")";
    }
    return canonical_smiles(smiles, "ring");
}

std::string canonical_smiles(std::string_view smiles, const std::string& where) {
    try {
        return RDKit::MolToSmiles(*toolkit::read_smiles(smiles));
    } catch (const Error& e) {
        throw Error(ErrorKind::tables, where, fmt::format("{}: {}", e.where, e.what()));
    }
}

std::shared_ptr<const Molecule> read_molecule(std::string_view smiles) {
    return std::make_shared<const Molecule>(Molecule{std::move(*toolkit::read_smiles(smiles)), {}});
}

}  // namespace isotally
