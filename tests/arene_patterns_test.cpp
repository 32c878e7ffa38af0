// The quick look before a search never hides a match, and products made the quick way are those of the
// toolkit's own full treatment.
#include <gtest/gtest.h>

#include <set>

#include "arene/toolkit.hpp"
#include "knowledge.hpp"

#include <GraphMol/SmilesParse/SmilesParse.h>
#include <GraphMol/SmilesParse/SmilesWrite.h>
#include <GraphMol/Substruct/SubstructMatch.h>

namespace isotally {
namespace {

std::set<std::string> patterns_of_the_tables() {
    std::set<std::string> all;
    for (const auto& ban : tables().bans)
        all.insert({ban.smarts, ban.unless});
    for (const auto& caution : tables().cautions)
        all.insert({caution.substrate_smarts, caution.product_smarts});
    for (const auto& group : tables().substituents)
        all.insert(group.smarts);
    all.erase("");
    return all;
}

/// Benzenes with every group of the tables alone, beside nitro, opposite to methyl, and the energetic ones.
std::vector<std::string> molecules() {
    std::vector<std::string> all{"O=[N+]([O-])c1ccc(N=[N+]=[N-])cc1",
                                 "c1ccccc1[N+]#N",
                                 "c1ccccc1OO",
                                 "OOCc1ccccc1",
                                 "c1ccccc1N(C)[N+](=O)[O-]",
                                 "c1ccccc1N(Cl)C",
                                 "c1ccccc1ON=O",
                                 "c1ccccc1CO[N+](=O)[O-]",
                                 "C=CCc1ccccc1",
                                 "OCCc1ccccc1"};
    for (const auto& group : tables().substituents) {
        if (group.smiles.empty())
            continue;
        const auto rest = "(" + group.smiles.substr(1) + ")";
        all.push_back("c%99" + rest + "ccccc%99");
        all.push_back("c%99" + rest + "c([N+](=O)[O-])cccc%99");
        all.push_back("c%99" + rest + "ccc(C)cc%99");
    }
    return all;
}

TEST(Patterns, TheQuickLookHidesNoMatch) {
    const auto workspace = new_workspace();
    const auto patterns = patterns_of_the_tables();
    std::size_t spared = 0, searched = 0;
    for (const auto& smiles : molecules()) {
        const auto molecule = read_molecule(smiles);
        for (const auto& smarts : patterns) {
            const std::unique_ptr<RDKit::RWMol> query(RDKit::SmartsToMol(smarts));
            RDKit::MatchVectType match;
            const bool found = RDKit::SubstructMatch(molecule->mol, *query, match);
            EXPECT_EQ(occurs(*workspace, *molecule, smarts, "here"), found) << smarts << " in " << smiles;
            if (found) {
                EXPECT_TRUE(may_occur(*workspace, *molecule, smarts, "here")) << smarts << " in " << smiles;
            }
            ++searched;
            spared += !may_occur(*workspace, *molecule, smarts, "here");
        }
    }
    EXPECT_GT(spared, searched / 2) << "and it is worth taking";
}

TEST(Patterns, WorkspacesDoNotMixUpTheirClasses) {
    const auto molecule = read_molecule("O=[N+]([O-])c1ccc(C)cc1");
    for (int i = 0; i < 20; ++i) {
        const auto workspace = new_workspace();
        if (i % 2)
            occurs(*workspace, *read_molecule("BrC1CCCCC1"), "[Br]", "here");
        EXPECT_TRUE(occurs(*workspace, *molecule, "c-[NX3+](=[OX1])[OX1-]", "here"));
        EXPECT_FALSE(occurs(*workspace, *molecule, "[Br]", "here"));
    }
}

TEST(Patterns, ProductsAreThoseOfTheFullTreatment) {
    std::size_t products = 0;
    for (const auto& reaction : tables().reactions)
        for (const auto& smiles :
             {"Cc1ccccc1", "c1ccc(-c2ccccc2)cc1", "O=[N+]([O-])c1cccc(C(=O)OCC)c1", "C[C@H](O)c1ccccc1",
              "C/C=C/c1ccccc1", "O=C(Nc1ccccc1)c1ccccc1", "C[N+](C)(C)c1ccccc1"})
            for (const auto& site : sites(arene(smiles), reaction.new_group)) {
                const std::unique_ptr<RDKit::RWMol> anew(RDKit::SmilesToMol(site.product));
                ASSERT_TRUE(anew) << site.product;
                EXPECT_EQ(RDKit::MolToSmiles(*anew), site.product) << smiles << ", " << reaction.id;
                EXPECT_EQ(anew->getNumAtoms(), site.molecule->mol.getNumAtoms());
                EXPECT_EQ(anew->getRingInfo()->numRings(), site.molecule->mol.getRingInfo()->numRings());
                ++products;
            }
    EXPECT_GT(products, 500u);
}

}  // namespace
}  // namespace isotally
