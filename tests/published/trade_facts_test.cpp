// Facts of the trade: common practice, no source. What is judged about the conditions stands beside each.
#include <gtest/gtest.h>

#include <string>
#include <vector>

#include "named.hpp"

namespace isotally {
namespace {

using Words = std::vector<std::string>;

std::string lead_of(const StepAnswer& answer) {
    return answer.shares.at(0).site.product;
}

TEST(TradeFacts, ChlorobenzeneIsSulfonatedMainlyPara) {
    for (const auto& reaction :
         Words{"sulfonation-sulfuric-acid", "sulfonation-sulfur-trioxide", "chlorosulfonation"}) {
        const auto percent = by_relation(step("chlorobenzene", reaction));
        EXPECT_GT(percent[para].value, 90) << reaction;
        EXPECT_GT(percent[para].low, 50) << reaction << ": mainly, whatever the interval";
    }
}

/// Halogenation, alkylation with a bulky group and hot sulfonation: there para leads although it is one
/// position against two. Not nitration, where ortho leads (70.6 to 29.4 in dilute acid, Coombes, Golding &
/// Hadjigeorgiou, J. Chem. Soc. Perkin Trans. 2 1979, 496) and not chlorination by hypochlorous acid; nor
/// reactions in which the oxygen binds the reagent (formylation, small alkyl groups).
TEST(TradeFacts, PhenolReactsAtParaBeforeOrtho) {
    for (const auto& reaction :
         Words{"bromination-acetic-acid", "bromination-lewis-acid", "chlorination-acetic-acid",
               "chlorination-lewis-acid", "iodination-oxidative", "tert-butylation-lewis-acid"}) {
        const auto percent = by_relation(step("phenol", reaction));
        EXPECT_GT(percent[para].value, percent[ortho].value) << reaction;
    }
    const auto hot = by_relation(step("phenol", "sulfonation-sulfuric-acid", at(100)));
    EXPECT_GT(hot[para].value, hot[ortho].value) << "100 C";
}

/// Rings whose carbon chain begins with a carbonyl, in every nitrating medium that is used on them.
TEST(TradeFacts, CarbonylBearingRingsAreNitratedMeta) {
    for (const auto& molecule : Words{"benzaldehyde", "acetophenone", "CCC(=O)c1ccccc1", "benzoic acid",
                                      "methyl benzoate", "ethyl benzoate", "NC(=O)c1ccccc1"})
        for (const auto& reaction :
             Words{"nitration-mixed-acid", "nitration-strong-acid", "nitration-nitric-acid"}) {
            const auto percent = by_relation(step(named(molecule), reaction));
            EXPECT_GT(percent[meta].value, 50) << molecule << ", " << reaction;
            EXPECT_GT(percent[meta].value, percent[ortho].value + percent[para].value)
                << molecule << ", " << reaction;
        }
    EXPECT_EQ(lead_of(step("O=C(c1ccccc1)c1ccccc1", "nitration-strong-acid")),
              canonical_smiles("O=C(c1ccccc1)c1cccc([N+](=O)[O-])c1", ""));
}

TEST(TradeFacts, NitrobenzeneUndergoesNoFriedelCraftsReaction) {
    int asked = 0;
    for (const auto& reaction : tables().reactions) {
        if (reaction.family != "alkylation" && reaction.family != "acylation" &&
            reaction.family != "formylation")
            continue;
        ++asked;
        EXPECT_NE(refused_because("nitrobenzene", reaction.id), "") << reaction.id << " was answered";
    }
    EXPECT_GE(asked, 9);
}

/// One new bromine, with iron: the alkyl group leads to its ortho position and nitro to its meta position,
/// the same.
TEST(TradeFacts, ARingWithAlkylAndNitroParaIsBrominatedNextToTheAlkyl) {
    for (const auto& alkyl : Words{"C", "CC", "CCC", "CC(C)"}) {
        const auto molecule = alkyl + "c1ccc([N+](=O)[O-])cc1";
        const auto answer = step(molecule, "bromination-lewis-acid");
        EXPECT_EQ(lead_of(answer), canonical_smiles(molecule + "Br", ""));
        EXPECT_GT(answer.shares.front().percent.value, 90) << molecule;
    }
}

/// Para and ortho lead on every halobenzene. Slower than benzene: chlorine, bromine and iodine everywhere;
/// fluorine only in nitration (in bromination fluorobenzene is about as fast as benzene, 1.16, Stock & Brown,
/// Adv. Phys. Org. Chem. 1963, 1, 35, a recalled figure).
TEST(TradeFacts, HalogensDeactivateYetDirectOrthoAndPara) {
    for (const auto& halogen : Words{"F", "Cl", "Br", "I"})
        for (const auto& reaction :
             Words{"nitration-mixed-acid", "nitration-strong-acid", "nitration-nitric-acid",
                   "bromination-lewis-acid", "sulfonation-sulfuric-acid", "acetylation-lewis-acid"}) {
            const auto answer = step(halogen + "c1ccccc1", reaction);
            const auto percent = by_relation(answer);
            EXPECT_GT(percent[ortho].value + percent[para].value, 90) << halogen << ", " << reaction;
            EXPECT_GT(percent[para].value, 2 * percent[meta].value) << halogen << ", " << reaction;
            if (halogen == "F" && !reaction.starts_with("nitration"))
                continue;
            EXPECT_LT(answer.relative_rate.value, 1) << halogen << ", " << reaction;
        }
}

}  // namespace
}  // namespace isotally
