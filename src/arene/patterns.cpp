// first: other headers of the toolkit lay out their classes by it
#include <RDGeneral/RDConfig.h>

#include <GraphMol/QueryAtom.h>
#include <GraphMol/QueryOps.h>
#include <GraphMol/SmilesParse/SmartsWrite.h>
#include <GraphMol/SmilesParse/SmilesParse.h>
#include <GraphMol/Substruct/SubstructMatch.h>

#include <algorithm>
#include <string_view>

#include "toolkit.hpp"

namespace isotally {
namespace {

using toolkit::AtomClasses;
using Query = RDKit::Atom::QUERYATOM_QUERY;
using BondQuery = RDKit::Bond::QUERYBOND_QUERY;

/// What the simple queries ask of an atom (element, aromatic, charge, degree, hydrogens); two atoms of one
/// class give them the same answers.
toolkit::AtomClass class_of(const RDKit::Atom& atom) {
    return {atom.getAtomicNum(), atom.getIsAromatic(), atom.getFormalCharge(),
            static_cast<int>(atom.getTotalDegree()), static_cast<int>(atom.getTotalNumHs())};
}

bool is_simple(std::string_view description) {
    for (const std::string_view known :
         {"AtomAtomicNum", "AtomType", "AtomFormalCharge", "AtomNegativeFormalCharge", "AtomHCount",
          "AtomTotalDegree", "AtomIsAromatic", "AtomIsAliphatic"})
        if (description == known)
            return true;
    return false;
}

/// Whether an atom of this class may be one that the query wants; false is certain.
bool may_match(const Query& query, const RDKit::Atom& atom) {
    const std::string_view description = query.getDescription();
    if (is_simple(description))
        return query.Match(&atom);
    if (query.getNegation())
        return true;
    const auto child_may = [&](const auto& child) { return may_match(*child, atom); };
    if (description == "AtomAnd")
        return std::all_of(query.beginChildren(), query.endChildren(), child_may);
    if (description == "AtomOr")
        return std::any_of(query.beginChildren(), query.endChildren(), child_may);
    if (description == "RecursiveStructure") {
        const auto& inner = *dynamic_cast<const RDKit::RecursiveStructureQuery&>(query).getQueryMol();
        return may_match(*inner.getAtomWithIdx(0)->getQuery(), atom);
    }
    return true;
}

/// Whether the query looks at nothing but the order of a bond and whether it stands in a ring.
bool is_simple_bond(const BondQuery& query) {
    const std::string_view description = query.getDescription();
    for (const std::string_view known : {"BondOrder", "SingleOrAromaticBond", "BondInRing"})
        if (description == known)
            return true;
    return (description == "BondAnd" || description == "BondOr") &&
           std::all_of(query.beginChildren(), query.endChildren(),
                       [](const auto& child) { return is_simple_bond(*child); });
}

/// What a molecule must hold for a pattern to occur in it: atoms of some class, bonds between atoms of some
/// classes (its two parts), all or any of its parts.
struct Need {
    enum class Kind { atom, bond, all, any } kind = Kind::all;
    const Query* query = nullptr;
    const BondQuery* bond = nullptr;
    std::size_t times = 1;  // atoms of the pattern that ask the same
    std::vector<Need> parts;
    std::size_t classes_tried = 0;
    AtomClasses may;
};

Need need_of(const RDKit::ROMol& pattern);

Need need_of(const Query& query) {
    const std::string_view description = query.getDescription();
    Need need;
    if (query.getNegation())
        return need;
    if (description == "RecursiveStructure")
        return need_of(*dynamic_cast<const RDKit::RecursiveStructureQuery&>(query).getQueryMol());
    if (description != "AtomAnd" && description != "AtomOr")
        return need;
    if (description == "AtomOr")
        need.kind = Need::Kind::any;
    for (auto child = query.beginChildren(); child != query.endChildren(); ++child)
        need.parts.push_back(need_of(**child));
    return need;
}

Need need_of(const RDKit::ROMol& pattern) {
    Need need;
    std::map<std::string, std::vector<const RDKit::Atom*>> alike;
    for (const auto* atom : pattern.atoms())
        if (atom->hasQuery())
            alike[RDKit::SmartsWrite::GetAtomSmarts(dynamic_cast<const RDKit::QueryAtom*>(atom))].push_back(
                atom);
    const auto atom_need = [](const RDKit::Atom& atom, std::size_t times) {
        Need one;
        one.kind = Need::Kind::atom;
        one.query = atom.getQuery();
        one.times = times;
        return one;
    };
    // what carbon can't be is looked for first, as it is most often missing
    for (const bool carbon : {false, true})
        for (const auto& [smarts, atoms] : alike)
            if (carbon == (smarts.find_first_of("cC") != std::string::npos))
                need.parts.push_back(atom_need(*atoms.front(), atoms.size()));
    for (const auto* bond : pattern.bonds()) {
        if (!bond->getBeginAtom()->hasQuery() || !bond->getEndAtom()->hasQuery())
            continue;
        Need of_bond;
        of_bond.kind = Need::Kind::bond;
        if (bond->hasQuery() && is_simple_bond(*bond->getQuery()))
            of_bond.bond = bond->getQuery();
        of_bond.parts = {atom_need(*bond->getBeginAtom(), 1), atom_need(*bond->getEndAtom(), 1)};
        need.parts.push_back(std::move(of_bond));
    }
    for (const auto& [smarts, atoms] : alike)
        if (auto inner = need_of(*atoms.front()->getQuery()); !inner.parts.empty())
            need.parts.push_back(std::move(inner));
    return need;
}

}  // namespace

/// A compiled pattern with what a molecule must hold for it.
struct Screened {
    std::string smarts;
    std::shared_ptr<const Pattern> pattern;
    Need need;
    // "[$(A),$(B)]" occurs where A or B does, which is found faster one by one
    std::vector<std::pair<const RDKit::ROMol*, Need>> any_of{};
};

namespace {

/// Number of an atom's class in this workspace; the last number stands for all classes beyond the first ones.
std::size_t class_number(Workspace& workspace, const RDKit::ROMol& mol, const RDKit::Atom& atom) {
    const auto [at, fresh] = workspace.numbers.try_emplace(class_of(atom), workspace.examples.size());
    if (fresh && workspace.examples.size() + 1 < AtomClasses().size())
        workspace.examples.push_back({RDKit::ROMol(mol), atom.getIdx()});
    else if (fresh)
        at->second = AtomClasses().size() - 1;
    return at->second;
}

/// Classifies the atoms and bonds of a molecule, once.
const Molecule& classed(Workspace& workspace, const Molecule& molecule) {
    auto& seen = molecule.seen;
    if (seen.by == workspace.identity)
        return molecule;
    seen = {};
    std::vector<std::uint8_t> number;
    for (const auto* atom : molecule.mol.atoms()) {
        number.push_back(static_cast<std::uint8_t>(class_number(workspace, molecule.mol, *atom)));
        seen.classes.set(number.back());
        ++seen.atoms[number.back()];
    }
    for (const auto* bond : molecule.mol.bonds()) {
        const auto [low, high] = std::minmax(number[bond->getBeginAtomIdx()], number[bond->getEndAtomIdx()]);
        const bool in_ring = molecule.mol.getRingInfo()->numBondRings(bond->getIdx()) > 0;
        const toolkit::SeenBond one{low, high, bond->getBondType(), in_ring, bond->getIdx()};
        if (std::find(seen.bonds.begin(), seen.bonds.end(), one) == seen.bonds.end())
            seen.bonds.push_back(one);
    }
    seen.by = workspace.identity;
    return molecule;
}

/// Classes that an atom of the pattern may be of, those met since the last look included.
const AtomClasses& classes_for(const Workspace& workspace, Need& need) {
    need.may.set(need.may.size() - 1);
    for (auto& tried = need.classes_tried; tried < workspace.examples.size(); ++tried) {
        const auto& example = workspace.examples[tried];
        need.may.set(tried, may_match(*need.query, *example.mol.getAtomWithIdx(example.atom)));
    }
    return need.may;
}

std::size_t atoms_of(const Workspace& workspace, Need& need, const Molecule& molecule) {
    const auto found = classes_for(workspace, need) & molecule.seen.classes;
    std::size_t atoms = 0;
    for (std::size_t number = 0; number < found.size(); ++number)
        atoms += found.test(number) ? molecule.seen.atoms[number] : 0u;
    return atoms;
}

bool is_met(const Workspace& workspace, Need& need, const Molecule& molecule) {
    const auto& seen = molecule.seen;
    const auto part_is_met = [&](Need& part) { return is_met(workspace, part, molecule); };
    switch (need.kind) {
    case Need::Kind::all:
        return std::all_of(need.parts.begin(), need.parts.end(), part_is_met);
    case Need::Kind::any:
        return std::any_of(need.parts.begin(), need.parts.end(), part_is_met);
    case Need::Kind::bond: {
        const auto& one = classes_for(workspace, need.parts[0]);
        const auto& other = classes_for(workspace, need.parts[1]);
        return std::any_of(seen.bonds.begin(), seen.bonds.end(), [&](const auto& bond) {
            return ((one.test(bond.low) && other.test(bond.high)) ||
                    (one.test(bond.high) && other.test(bond.low))) &&
                   (!need.bond || need.bond->Match(molecule.mol.getBondWithIdx(bond.example)));
        });
    }
    case Need::Kind::atom:
        break;
    }
    if (need.times == 1)
        return (classes_for(workspace, need) & seen.classes).any();
    return atoms_of(workspace, need, molecule) >= need.times;
}

std::vector<std::pair<const RDKit::ROMol*, Need>> alternatives(const RDKit::ROMol& pattern) {
    std::vector<std::pair<const RDKit::ROMol*, Need>> found;
    const auto add = [&](const Query& query) {
        if (query.getNegation() || query.getDescription() != "RecursiveStructure")
            return false;
        const auto& inner = *dynamic_cast<const RDKit::RecursiveStructureQuery&>(query).getQueryMol();
        found.emplace_back(&inner, need_of(inner));
        return true;
    };
    const auto* only = pattern.getNumAtoms() == 1 ? pattern.getAtomWithIdx(0)->getQuery() : nullptr;
    const bool either = only && only->getDescription() == "AtomOr" && !only->getNegation();
    if (!only || !(either ? std::all_of(only->beginChildren(), only->endChildren(),
                                        [&](const auto& child) { return add(*child); })
                          : add(*only)))
        found.clear();
    return found;
}

Screened& screened(Workspace& workspace, const std::string& smarts, std::string_view where) {
    // most texts come again from the same place in the tables: comparing is faster than hashing
    auto& place = workspace.places[smarts.data()];
    if (place && place->smarts == smarts)
        return *place;
    auto& found = workspace.patterns[smarts];
    if (!found) {
        const auto pattern = read_pattern(smarts, std::string(where));
        found = std::make_shared<Screened>(
            Screened{smarts, pattern, need_of(pattern->query), alternatives(pattern->query)});
    }
    place = found.get();
    return *found;
}

}  // namespace

std::shared_ptr<Workspace> new_workspace() {
    return std::make_shared<Workspace>();
}

std::shared_ptr<const Molecule> read_molecule(const std::string& smiles, Workspace& workspace) {
    auto& known = workspace.molecules[smiles];
    if (!known)
        known = read_molecule(smiles);
    return known;
}

bool may_occur(Workspace& workspace, const Molecule& molecule, const std::string& smarts,
               std::string_view where) {
    return is_met(workspace, screened(workspace, smarts, where).need, classed(workspace, molecule));
}

int most_atoms_for(Workspace& workspace, const Molecule& molecule, const std::string& smarts,
                   std::string_view where) {
    auto& need = screened(workspace, smarts, where).need;
    if (!is_met(workspace, need, classed(workspace, molecule)))
        return 0;
    return static_cast<int>(atoms_of(workspace, need.parts.front(), molecule));
}

int count_matches(Workspace& workspace, const Molecule& molecule, const std::string& smarts,
                  std::string_view where) {
    auto& pattern = screened(workspace, smarts, where);
    if (!is_met(workspace, pattern.need, classed(workspace, molecule)))
        return 0;
    return static_cast<int>(RDKit::SubstructMatch(molecule.mol, pattern.pattern->query).size());
}

bool occurs(Workspace& workspace, const Molecule& molecule, const std::string& smarts,
            std::string_view where) {
    auto& pattern = screened(workspace, smarts, where);
    classed(workspace, molecule);
    auto& results = molecule.seen.results;
    for (const auto& [known, result] : results)
        if (known == &pattern)
            return result;
    const auto found = [&](const RDKit::ROMol& query, Need& need) {
        RDKit::MatchVectType match;
        return is_met(workspace, need, molecule) && RDKit::SubstructMatch(molecule.mol, query, match);
    };
    bool result = false;
    if (!is_met(workspace, pattern.need, molecule))
        return false;
    if (pattern.any_of.empty())
        result = found(pattern.pattern->query, pattern.need);
    for (auto& [query, need] : pattern.any_of)
        result = result || found(*query, need);
    results.emplace_back(&pattern, result);
    return result;
}

std::shared_ptr<const Pattern> read_pattern(const std::string& smarts, const std::string& where) {
    std::unique_ptr<RDKit::RWMol> query;
    try {
        query.reset(RDKit::SmartsToMol(smarts));
    } catch (const std::exception&) {
    }
    if (!query)
        throw Error(ErrorKind::tables, where, "the pattern can't be read: " + smarts);
    return std::make_shared<const Pattern>(Pattern{std::move(*query)});
}

}  // namespace isotally
