#include "isotally/reactivity.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <limits>

#include "knowledge.hpp"

namespace isotally {
namespace {

using testing::AllOf;
using testing::Contains;
using testing::ElementsAre;
using testing::HasSubstr;
using testing::IsEmpty;
using testing::Not;
using testing::SizeIs;

Answer<Conditions> choose(const std::string& id, std::optional<double> temperature_C = {},
                          std::optional<double> acid_percent = {}) {
    return choose_conditions(tables(), reaction(id), temperature_C, acid_percent);
}

std::string reason(const Answer<Conditions>& answer) {
    return refusal(answer) ? refusal(answer)->reason : "";
}

std::string declined(const std::string& molecule) {
    const auto found = decline_molecule(tables(), smiles_of(molecule));
    return found ? found->reason : "";
}

std::vector<std::string> codes(const StepAnswer& answer) {
    std::vector<std::string> out;
    for (const auto& caution : answer.cautions)
        out.push_back(caution.code);
    return out;
}

TEST(Reactivity, DefaultsAreTheReactionsOwn) {
    const auto mixed = answered(choose("nitration-mixed-acid"), "defaults");
    EXPECT_EQ(mixed.reaction, reaction("nitration-mixed-acid"));
    EXPECT_DOUBLE_EQ(mixed.temperature_C, 30) << "contract of the step";
    EXPECT_DOUBLE_EQ(mixed.acid_percent, 80);
    const auto given = answered(choose("nitration-mixed-acid", 45, 84.5), "given");
    EXPECT_DOUBLE_EQ(given.temperature_C, 45);
    EXPECT_DOUBLE_EQ(given.acid_percent, 84.5);
    EXPECT_DOUBLE_EQ(answered(choose("acetylation-lewis-acid"), "no acid").acid_percent, 0);
    for (const auto& row : tables().reactions)
        EXPECT_EQ(reason(choose(row.id)), "") << row.id;
}

TEST(Reactivity, AcidOutsideTheRangeNamesTheReactionThatHasIt) {
    EXPECT_THAT(
        reason(choose("nitration-mixed-acid", {}, 95)),
        AllOf(HasSubstr("95 % sulfuric acid"), HasSubstr("75 to 90 %"), HasSubstr("nitration-strong-acid")));
    EXPECT_THAT(reason(choose("nitration-mixed-acid", {}, 60)), HasSubstr("nitration-dilute-acid"));
    EXPECT_THAT(reason(choose("sulfonation-sulfuric-acid", {}, 115)),
                HasSubstr("sulfonation-sulfur-trioxide"));
    EXPECT_THAT(reason(choose("nitration-strong-acid", {}, 200)), Not(HasSubstr("that is")));
    EXPECT_EQ(reason(choose("nitration-mixed-acid", {}, 75)), "");
    EXPECT_EQ(reason(choose("nitration-mixed-acid", {}, 90)), "");
}

TEST(Reactivity, AcidWhereThereIsNoneIsWrongUse) {
    try {
        choose("acetylation-lewis-acid", {}, 80);
        FAIL();
    } catch (const Error& error) {
        EXPECT_EQ(error.kind, ErrorKind::usage);
        EXPECT_EQ(error.where, "option --acid-percent");
        EXPECT_THAT(error.what(), HasSubstr("acetylation-lewis-acid"));
    }
}

TEST(Reactivity, TemperatureOutsideTheRangeIsRefused) {
    EXPECT_THAT(reason(choose("nitration-mixed-acid", 200)),
                AllOf(HasSubstr("200 C"), HasSubstr("0 to 90 C")));
    EXPECT_NE(reason(choose("nitration-mixed-acid", -80)), "");
    // The measured series of toluene ends at 100 C (Holleman and Caland, Ber. 1911, 44, 2504).
    EXPECT_EQ(reason(choose("sulfonation-sulfuric-acid", 100)), "");
    EXPECT_THAT(reason(choose("sulfonation-sulfuric-acid", 141)), HasSubstr("0 to 100 C"));
    for (const double none :
         {std::numeric_limits<double>::quiet_NaN(), std::numeric_limits<double>::infinity(), -300.0}) {
        EXPECT_NE(reason(choose("nitration-mixed-acid", none)), "") << none;
        EXPECT_NE(reason(choose("nitration-mixed-acid", {}, none)), "") << none;
    }
}

TEST(Reactivity, FloorIsThatOfTheTables) {
    const auto conditions = answered(choose("acetylation-lewis-acid"), "acetylation");
    const double floor = std::log10(reaction_row("acetylation-lewis-acid").figures.at("floor").value);
    EXPECT_FALSE(refuse_below_floor(tables(), conditions, {floor + 1e-9, -20}));
    const auto refused = refuse_below_floor(tables(), conditions, {floor - 1e-9, -20});
    ASSERT_TRUE(refused);
    EXPECT_EQ(refused->where, "acetylation-lewis-acid");
    EXPECT_THAT(refused->reason, HasSubstr(reaction_row("acetylation-lewis-acid").instead));
}

TEST(Reactivity, WhatDoesNotGoAndWhatPeopleDoInstead) {
    // Common practice, no source; the last two also Carey and Sundberg, part B, chapter on aromatic
    // substitution.
    for (const auto& [molecule, id] :
         {std::pair{"nitrobenzene", "acetylation-lewis-acid"},
          std::pair{"nitrobenzene", "ethylation-lewis-acid"},
          std::pair{"acetophenone", "acetylation-lewis-acid"}, std::pair{"aniline", "acetylation-lewis-acid"},
          std::pair{"anisole", "formylation-carbon-monoxide"},
          std::pair{"chlorobenzene", "formylation-carbon-monoxide"},
          std::pair{"phenol", "acetylation-lewis-acid"}, std::pair{"aniline", "bromination-acetic-acid"},
          std::pair{"styrene", "nitration-mixed-acid"},
          std::pair{"Clc1cccc(Cl)c1Cl", "acetylation-lewis-acid"},
          std::pair{"nitrobenzene", "chlorination-acetic-acid"},
          std::pair{"benzotrifluoride", "ethylation-lewis-acid"}})
        EXPECT_THAT(refused_because(molecule, id), HasSubstr("people")) << molecule << ", " << id;
}

TEST(Reactivity, WhatGoesAllTheSame) {
    // Common practice, no source: not banned for a group they carry, and 1,2-dichlorobenzene acylates.
    for (const auto& [molecule, id] :
         {std::pair{"Clc1ccccc1Cl", "acetylation-lewis-acid"},
          std::pair{"O=C(Nc1ccccc1)c1ccccc1", "bromination-acetic-acid"},
          std::pair{"O=[N+]([O-])c1ccc(-c2ccccc2)cc1", "bromination-lewis-acid"},
          std::pair{"COc1ccccc1[N+](=O)[O-]", "acetylation-lewis-acid"},
          std::pair{"acetanilide", "acetylation-lewis-acid"}, std::pair{"aniline", "nitration-strong-acid"},
          std::pair{"nitrobenzene", "nitration-strong-acid"},
          std::pair{"acetophenone", "bromination-excess-lewis-acid"},
          std::pair{"phenol", "tert-butylation-lewis-acid"},
          std::pair{"toluene", "formylation-carbon-monoxide"},
          std::pair{"nitrobenzene", "sulfonation-sulfur-trioxide"},
          std::pair{"O=C(O)/C=C/c1ccccc1", "nitration-mixed-acid"}})
        EXPECT_EQ(refused_because(molecule, id), "") << molecule << ", " << id;
}

TEST(Reactivity, AtMostTwoNitroGroups) {
    EXPECT_EQ(declined("O=[N+]([O-])c1cccc([N+](=O)[O-])c1"), "");
    EXPECT_THAT(declined("Cc1c([N+](=O)[O-])cc([N+](=O)[O-])cc1[N+](=O)[O-]"), HasSubstr("3 nitro groups"));
    EXPECT_THAT(declined("O=N(=O)c1cc(N(=O)=O)cc(N(=O)=O)c1"), HasSubstr("3 nitro groups"));
    for (const auto& row : tables().reactions)
        EXPECT_THAT(refused_because("CC1=C([N+](=O)[O-])C=C([N+](=O)[O-])C=C1[N+](=O)[O-]", row.id),
                    HasSubstr("declines"))
            << row.id;
    for (const auto* id : {"nitration-mixed-acid", "nitration-strong-acid", "nitration-acetyl-nitrate"})
        EXPECT_THAT(refused_because("Cc1ccc([N+](=O)[O-])cc1[N+](=O)[O-]", id),
                    HasSubstr("third nitro group"))
            << id;
    EXPECT_EQ(
        refused_because("Cc1ccc([N+](=O)[O-])cc1[N+](=O)[O-]", "chlorination-lewis-acid").find("declines"),
        std::string::npos);
    EXPECT_THAT(refused_because("O=[N+]([O-])c1ccc(-c2ccc([N+](=O)[O-])cc2)cc1", "nitration-strong-acid"),
                HasSubstr("third nitro group"))
        << "counted over the molecule, not the ring";
}

TEST(Reactivity, NitroBesideAnotherEnergeticGroup) {
    EXPECT_THAT(declined("O=[N+]([O-])c1ccc(N=[N+]=[N-])cc1"), HasSubstr("azide"));
    EXPECT_THAT(declined("O=[N+]([O-])c1ccc([N+]#N)cc1"), HasSubstr("diazonium"));
    EXPECT_THAT(declined("O=[N+]([O-])c1ccc(CO[N+](=O)[O-])cc1"), HasSubstr("nitrate ester"));
    EXPECT_THAT(declined("O=[N+]([O-])c1ccc(N(C)[N+](=O)[O-])cc1"), HasSubstr("nitramine"));
    EXPECT_THAT(declined("O=[N+]([O-])c1ccc(C(=O)OO)cc1"), HasSubstr("peroxide"));
    EXPECT_THAT(declined("O=[N+]([O-])c1ccc(N=NN(C)C)cc1"), HasSubstr("triazene"));
    EXPECT_EQ(declined("[N-]=[N+]=Nc1ccccc1"), "") << "an azide alone is unknown, not declined";
    EXPECT_EQ(declined("nitrobenzene"), "");
    EXPECT_EQ(declined("toluene"), "");
}

// Common practice, no source: nitrating acid makes nitrate esters of alcohols, takes up alkenes and thiols.
TEST(Reactivity, SideChainsThatTheReagentTakesFirst) {
    EXPECT_THAT(refused_because("OCCc1ccccc1", "nitration-mixed-acid"), HasSubstr("nitrate ester"));
    EXPECT_THAT(refused_because("OCCc1ccccc1", "acetylation-lewis-acid"), HasSubstr("alcohol"));
    EXPECT_THAT(refused_because("C=CCc1ccccc1", "nitration-mixed-acid"), HasSubstr("double"));
    EXPECT_THAT(refused_because("SCc1ccccc1", "nitration-mixed-acid"), HasSubstr("thiol"));
    EXPECT_THAT(refused_because("NCCc1ccccc1", "nitration-acetyl-nitrate"), HasSubstr("on nitrogen"));
    EXPECT_EQ(refused_because("NCCc1ccccc1", "nitration-mixed-acid"), "") << "goes as the ammonium ion";
    EXPECT_EQ(refused_because("OC(=O)Cc1ccccc1", "nitration-mixed-acid"), "") << "an acid is no alcohol";
}

TEST(Reactivity, NitroHoweverItIsWritten) {
    auto other = tables();
    other.reactions[static_cast<std::size_t>(reaction("nitration-mixed-acid"))].new_group = "*N(=O)=O";
    const auto arene =
        answered(parse_arene(other, knowledge().groups, "O=[N+]([O-])c1cccc([N+](=O)[O-])c1"), "arene");
    const auto conditions = answered(choose("nitration-mixed-acid"), "defaults");
    const auto refused = refuse_by_name(rules_for(other, conditions.reaction), *new_workspace(), arene, {});
    ASSERT_TRUE(refused);
    EXPECT_THAT(refused->reason, HasSubstr("third nitro group"));
}

TEST(Reactivity, SulfoOnAPhenolCountsAsNitroWhenNitrated) {
    // practice: the sulfo group is displaced and highly nitrated phenols form.
    const auto* strong = "nitration-strong-acid";
    const std::string disulfonic = "Oc1ccc(S(=O)(=O)O)cc1S(=O)(=O)O";
    EXPECT_THAT(refused_because(disulfonic, strong), HasSubstr("declines")) << "phenol-2,4-disulfonic acid";
    EXPECT_THAT(refused_because("Oc1ccc(S(=O)(=O)O)cc1[N+](=O)[O-]", strong), HasSubstr("declines"))
        << "sulfo at para";
    EXPECT_THAT(refused_because("Oc1ccc([N+](=O)[O-])cc1S(=O)(=O)O", strong), HasSubstr("declines"))
        << "sulfo at ortho";
    EXPECT_THAT(refused_because("COc1ccc(S(=O)(=O)O)cc1S(=O)(=O)O", strong), HasSubstr("declines"))
        << "an ether as well";
    EXPECT_THAT(refused_because("Nc1ccc(S(=O)(=O)O)cc1[N+](=O)[O-]", strong), HasSubstr("declines"))
        << "an aniline";
    EXPECT_THAT(refused_because("Oc1ccc(S(=O)(=O)O)cc1", "nitration-dilute-acid"),
                Not(HasSubstr("declines")));
    EXPECT_THAT(refused_because("Cc1ccc(S(=O)(=O)O)cc1[N+](=O)[O-]", strong), Not(HasSubstr("declines")))
        << "no donor";
    EXPECT_THAT(refused_because("Oc1cccc(S(=O)(=O)O)c1[N+](=O)[O-]", strong), Not(HasSubstr("declines")))
        << "sulfo at meta";
}

TEST(Reactivity, WorstCautionFirst) {
    for (const auto* molecule : {"toluene", "chlorobenzene", "phenol", "Cc1ccc([N+](=O)[O-])cc1"}) {
        const auto answer = step(molecule, "nitration-mixed-acid");
        std::vector<int> severities;
        for (const auto& code : codes(answer))
            for (const auto& row : tables().cautions)
                if (row.code == code)
                    severities.push_back(row.severity);
        ASSERT_THAT(severities, SizeIs(testing::Ge(2))) << molecule;
        EXPECT_TRUE(std::is_sorted(severities.rbegin(), severities.rend())) << molecule;
        EXPECT_EQ(answer.cautions.back().code, "standing");
    }
}

TEST(Reactivity, CautionsBelongToTheProductTheyAreAbout) {
    const auto nitrated = step("Cc1ccc([N+](=O)[O-])cc1", "nitration-mixed-acid");
    EXPECT_THAT(codes(nitrated), AllOf(Contains("dinitro"), Not(Contains("chloronitrobenzene"))));
    const auto chloro = step("chlorobenzene", "nitration-mixed-acid");
    EXPECT_THAT(codes(chloro), AllOf(Contains("chloronitrobenzene"), Not(Contains("dinitro"))));
    EXPECT_THAT(codes(step("toluene", "nitration-acetyl-nitrate")), Contains("acetyl-nitrate"));
    EXPECT_THAT(codes(step("toluene", "nitration-mixed-acid")), Not(Contains("acetyl-nitrate")));
    // 2-nitrophenol gives 2,4- and 2,6-dinitrophenol, each with a caution of its own.
    const auto phenol = step("Oc1ccccc1[N+](=O)[O-]", "nitration-mixed-acid");
    const auto about = [&](const std::string& code) {
        for (const auto& caution : phenol.cautions)
            if (caution.code == code)
                return caution.products;
        return std::vector<std::string>{"no such caution"};
    };
    EXPECT_THAT(about("dinitrophenol"), ElementsAre(canonical_smiles("Oc1ccc(N(=O)=O)cc1N(=O)=O", "test")));
    EXPECT_THAT(about("dinitrophenol-other"),
                ElementsAre(canonical_smiles("Oc1c(N(=O)=O)cccc1N(=O)=O", "test")));
    EXPECT_THAT(about("standing"), IsEmpty()) << "about the step as a whole";
}

TEST(Reactivity, NotesSayWhatTheMediumDoes) {
    EXPECT_THAT(step("aniline", "nitration-strong-acid").notes,
                Contains(HasSubstr("amino reacts as ammonio")));
    EXPECT_THAT(step("acetophenone", "bromination-excess-lewis-acid").notes,
                Contains(HasSubstr("acetyl reacts as acetyl complexed")));
    EXPECT_THAT(step("toluene", "sulfonation-sulfuric-acid").notes, Contains(HasSubstr("Reversible")));
    EXPECT_THAT(step("toluene", "nitration-mixed-acid").notes, Not(Contains(HasSubstr("reacts as"))));
    EXPECT_THAT(step("Cc1cc(C)cc(C)c1", "nitration-mixed-acid").notes, Contains(HasSubstr("encounter")));
    EXPECT_THAT(step("[Na+].[O-]S(=O)(=O)c1ccccc1", "nitration-strong-acid").notes,
                Contains(HasSubstr("sodium")));
}

}  // namespace
}  // namespace isotally
