#include "isotally/arene.hpp"

#include <GraphMol/SmilesParse/SmilesParse.h>
#include <GraphMol/SmilesParse/SmilesWrite.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <map>
#include <memory>
#include <set>

#include "knowledge.hpp"

namespace isotally {
namespace {

using testing::AllOf;
using testing::ElementsAre;
using testing::HasSubstr;
using testing::IsEmpty;
using testing::Not;
using testing::SizeIs;

constexpr const char* nitro = "*[N+](=O)[O-]";

std::string by_toolkit(const std::string& smiles) {
    const std::unique_ptr<RDKit::ROMol> mol(RDKit::SmilesToMol(smiles));
    return RDKit::MolToSmiles(*mol);
}

/// SMILES of a ring with these branches; "" is hydrogen.
std::string hexagon(const std::array<std::string, 6>& branches) {
    std::string smiles;
    for (std::size_t i = 0; i < 6; ++i)
        smiles += std::string("c") + (i == 0 || i == 5 ? "1" : "") +
                  (branches[i].empty() ? "" : "(" + branches[i] + ")");
    return smiles;
}

std::vector<std::string> groups_of(const Arene& arene, std::size_t ring = 0) {
    std::vector<std::string> ids;
    for (const int group : arene.rings.at(ring).groups)
        ids.push_back(group < 0 ? "" : tables().substituents[static_cast<std::size_t>(group)].id);
    return ids;
}

/// The groups of all rings, hydrogens left out.
std::multiset<std::string> carried(const Arene& arene) {
    std::multiset<std::string> out;
    for (std::size_t r = 0; r < arene.rings.size(); ++r)
        for (const auto& id : groups_of(arene, r))
            if (!id.empty())
                out.insert(id);
    return out;
}

std::multiset<std::string> carried(const std::string& smiles) {
    return carried(arene(smiles));
}

std::vector<int> multiplicities(const std::string& smiles) {
    std::vector<int> out;
    for (const auto& site : sites(arene(smiles), nitro))
        out.push_back(site.multiplicity);
    std::sort(out.begin(), out.end());
    return out;
}

std::string refused(const std::string& smiles) {
    const auto read = read_arene(smiles);
    return refusal(read) ? refusal(read)->reason : "";
}

TEST(Arene, GroupsStandInOrderRoundTheRing) {
    EXPECT_THAT(groups_of(arene("Cc1ccccc1")), testing::UnorderedElementsAre("Me", "", "", "", "", ""));
    const auto ids = groups_of(arene("Cc1c(Cl)cc([N+](=O)[O-])cc1"));
    const auto at = [&](const std::string& id) {
        return std::find(ids.begin(), ids.end(), id) - ids.begin();
    };
    const auto apart = [&](const std::string& a, const std::string& b) {
        const auto way = std::abs(at(a) - at(b));
        return std::min(way, 6 - way);
    };
    EXPECT_EQ(apart("Me", "Cl"), 1);
    EXPECT_EQ(apart("Me", "NO2"), 3);
    EXPECT_EQ(apart("Cl", "NO2"), 2);
}

TEST(Arene, SameAnswerInWhateverOrderTheAtomsStand) {
    for (const std::string smiles :
         {"Cc1c(Cl)cc([N+](=O)[O-])cc1", "CC(=O)Nc1ccc(OC)c(C(F)(F)F)c1", "COC(=O)c1cccc(-c2ccc(Br)cc2)c1",
          "CN(C)c1ccc(S(N)(=O)=O)cc1C#N", "O=C(Oc1ccccc1)c1ccccc1", "Cc1ccccc1Cc1ccc(F)cc1",
          "C[N+](C)(C)c1ccc(C(C)(C)C)cc1", "O=[N+]([O-])/C=C/c1ccc(SC)cc1"}) {
        const Arene first = arene(smiles);
        const auto first_sites = sites(first, nitro);
        const std::unique_ptr<RDKit::ROMol> mol(RDKit::SmilesToMol(smiles));
        std::set<std::string> orders;
        for (const auto& shuffled : RDKit::MolToRandomSmilesVect(*mol, 25, 7)) {
            orders.insert(shuffled);
            const Arene second = arene(shuffled);
            ASSERT_EQ(second.smiles, first.smiles) << shuffled;
            ASSERT_EQ(second.rings.size(), first.rings.size()) << shuffled;
            for (std::size_t r = 0; r < first.rings.size(); ++r) {
                EXPECT_EQ(second.rings[r].groups, first.rings[r].groups) << shuffled;
                EXPECT_EQ(second.rings[r].atoms, first.rings[r].atoms) << shuffled;
            }
            const auto second_sites = sites(second, nitro);
            ASSERT_EQ(second_sites.size(), first_sites.size()) << shuffled;
            for (std::size_t i = 0; i < first_sites.size(); ++i) {
                EXPECT_EQ(second_sites[i].product, first_sites[i].product) << shuffled;
                EXPECT_EQ(second_sites[i].positions, first_sites[i].positions) << shuffled;
                EXPECT_EQ(second_sites[i].multiplicity, first_sites[i].multiplicity) << shuffled;
            }
        }
        EXPECT_GT(orders.size(), 10u) << smiles;
    }
}

TEST(Arene, EveryGroupOfTheTablesIsFoundOnBenzene) {
    std::vector<std::string> lost;
    for (const auto& row : tables().substituents) {
        const bool only_a_state = std::any_of(tables().states.begin(), tables().states.end(),
                                              [&](const State& state) { return state.state == row.id; });
        if (row.smiles.empty() || only_a_state)
            continue;
        const auto read = read_arene("c1ccccc1" + row.smiles.substr(1));
        if (refusal(read) || carried(std::get<Arene>(read)).count(row.id) == 0)
            lost.push_back(row.id);
    }
    // phthalimido has a bridged ring of its own; it lends its constants to the other imides
    EXPECT_THAT(lost, ElementsAre("NPhth"));
}

TEST(Arene, TheWayAGroupIsWrittenMakesNoDifference) {
    EXPECT_EQ(carried("O=N(=O)c1ccccc1"), carried("[O-][N+](=O)c1ccccc1"));
    EXPECT_EQ(carried("[CH3]C1=C([H])C=CC=C1"), std::multiset<std::string>{"Me"});
    EXPECT_EQ(carried("OC(=O)/C=C/c1ccccc1"), std::multiset<std::string>{"CH=CHCO2H"});
    EXPECT_EQ(carried("CC[C@H](C)c1ccccc1"), std::multiset<std::string>{"sBu"});
    EXPECT_EQ(carried("CC[C@@H](C)c1ccccc1"), std::multiset<std::string>{"sBu"});
}

TEST(Arene, SpecificGroupWinsOverItsClass) {
    const std::vector<std::pair<const char*, const char*>> expected = {
        {"CCCCc1ccccc1", "nBu"},       {"CCCCCCc1ccccc1", "g-primary-alkyl"},
        {"CC(C)c1ccccc1", "iPr"},      {"CCC(CC)c1ccccc1", "g-secondary-alkyl"},
        {"COc1ccccc1", "OMe"},         {"CCCCOc1ccccc1", "g-alkoxy"},
        {"CCOC(=O)c1ccccc1", "CO2Et"}, {"CC(C)OC(=O)c1ccccc1", "g-ester"},
        {"CC(=O)c1ccccc1", "COMe"},    {"CC(C)C(=O)c1ccccc1", "g-ketone"},
        {"CC(=O)Nc1ccccc1", "NHAc"},   {"CCC(=O)Nc1ccccc1", "g-acylamino"},
        {"CSc1ccccc1", "SMe"},         {"CCSc1ccccc1", "g-alkylthio"},
        {"CN(C)c1ccccc1", "NMe2"},     {"CCN(C)c1ccccc1", "g-tertiary-amine"},
        {"C=Cc1ccccc1", "CH=CH2"},     {"CC=Cc1ccccc1", "g-alkenyl"},
    };
    for (const auto& [smiles, id] : expected)
        EXPECT_EQ(carried(smiles), std::multiset<std::string>{id}) << smiles;
}

TEST(Arene, LowestRankOfTheClassesThatMatchWins) {
    // A 4-methylbenzoate is an "other acyloxy" (rank 30) as well as an "other aroyloxy" (20).
    EXPECT_EQ(carried("Cc1ccc(C(=O)Oc2ccccc2)cc1"),
              (std::multiset<std::string>{"Me", "g-aroyloxy", "g-ester"}));
    EXPECT_EQ(carried("ClC(C)C(=O)c1ccccc1"), std::multiset<std::string>{"g-haloketone"});
    EXPECT_EQ(carried("FC(F)(F)C(F)(F)c1ccccc1"), std::multiset<std::string>{"g-perfluoroalkyl"});
}

TEST(Arene, IsomersAsKoernerCountedThem) {
    // Koerner 1874: a third equal group gives two isomers from the ortho, three from the meta and one from
    // the para compound; that is how the orientation of the dibromobenzenes was proved.
    const auto count = [](const char* smiles) { return sites(arene(smiles), "*Br").size(); };
    EXPECT_EQ(count("Brc1ccccc1Br"), 2u);
    EXPECT_EQ(count("Brc1cccc(Br)c1"), 3u);
    EXPECT_EQ(count("Brc1ccc(Br)cc1"), 1u);
    EXPECT_EQ(count("c1ccccc1"), 1u);
    EXPECT_EQ(count("Brc1ccccc1"), 3u);
}

TEST(Arene, EveryPatternOfTwoGroupsAgainstTheToolkitAlone) {
    // 92 patterns of three kinds of beads on a turnable, reversible ring of six, 13 of them without
    // hydrogen: OEIS A027671(6) and A000029(6).
    const std::array<std::string, 3> kinds{"", "C", "Cl"};
    std::set<std::string> seen;
    for (int pattern = 0; pattern < 729; ++pattern) {
        std::array<std::string, 6> branches;
        for (int i = 0, rest = pattern; i < 6; ++i, rest /= 3)
            branches[static_cast<std::size_t>(i)] = kinds[static_cast<std::size_t>(rest % 3)];
        if (std::count(branches.begin(), branches.end(), "") == 0)
            continue;
        std::map<std::string, int> expected;
        for (auto& branch : branches)
            if (branch.empty()) {
                branch = "[N+](=O)[O-]";
                ++expected[by_toolkit(hexagon(branches))];
                branch.clear();
            }
        const Arene read = arene(hexagon(branches));
        seen.insert(read.smiles);
        std::map<std::string, int> found;
        for (const auto& site : sites(read, nitro)) {
            EXPECT_EQ(site.positions.size(), static_cast<std::size_t>(site.multiplicity));
            found[site.product] += site.multiplicity;
        }
        ASSERT_EQ(found, expected) << hexagon(branches);
    }
    EXPECT_EQ(seen.size(), 92u - 13u);
}

TEST(Arene, RingsOfOneMoleculeCompete) {
    EXPECT_THAT(multiplicities("c1ccccc1-c1ccccc1"), ElementsAre(2, 4, 4)) << "equal rings are one entry";
    EXPECT_THAT(multiplicities("Cc1ccc(-c2ccccc2)cc1"), ElementsAre(1, 2, 2, 2, 2));
    EXPECT_THAT(multiplicities("c1ccc(-c2cc(-c3ccccc3)cc(-c3ccccc3)c2)cc1"), ElementsAre(3, 3, 6, 6));
    EXPECT_THAT(multiplicities("O=C(c1ccccc1)c1ccccc1"), ElementsAre(2, 4, 4));
    EXPECT_THAT(multiplicities("O=C(Oc1ccccc1)c1ccccc1"), ElementsAre(1, 1, 2, 2, 2, 2));
    EXPECT_EQ(carried("O=C(Oc1ccccc1)c1ccccc1"), (std::multiset<std::string>{"OCOPh", "g-ester"}));
}

TEST(Arene, AHandDoesNotPartEqualPositions) {
    EXPECT_THAT(multiplicities("C[C@H](CC)c1ccccc1"), ElementsAre(1, 2, 2));
}

TEST(Arene, SaltsLoseTheirCounterIon) {
    struct Case {
        const char *salt, *free, *note;
    };
    for (const auto& [salt, free, note] :
         {Case{"[Na+].[O-]S(=O)(=O)c1ccccc1", "O=S(=O)(O)c1ccccc1", "sodium"},
          Case{"[NH3+]c1ccccc1.[Cl-]", "Nc1ccccc1", "chloride"},
          Case{"Nc1ccccc1.Cl", "Nc1ccccc1", "hydrogen chloride"},
          Case{"[K+].[O-]c1ccccc1", "Oc1ccccc1", "potassium"},
          Case{"[NH3+]c1ccccc1.OS(=O)(=O)[O-]", "Nc1ccccc1", "hydrogen sulfate"},
          Case{"[Na+].[Na+].[O-]C(=O)c1cccc(C(=O)[O-])c1", "O=C(O)c1cccc(C(=O)O)c1", "sodium"},
          Case{"[Na+].[O-]C(=O)c1ccc([N+](=O)[O-])cc1", "O=C(O)c1ccc([N+](=O)[O-])cc1", "sodium"},
          Case{"C[N+](C)(C)c1ccccc1.[Cl-]", "C[N+](C)(C)c1ccccc1", "chloride"}}) {
        const Arene read = arene(salt);
        EXPECT_EQ(read.smiles, by_toolkit(free)) << salt;
        EXPECT_THAT(read.notes, testing::Each(AllOf(HasSubstr(note), HasSubstr("counter-ion")))) << salt;
        EXPECT_THAT(read.notes, SizeIs(1)) << salt;
    }
}

TEST(Arene, RefusesWithTheReason) {
    const std::vector<std::pair<const char*, const char*>> expected = {
        {"c1ccc2ccccc2c1", "naphthalene"},
        {"c1ccc2cc3ccccc3cc2c1", "fused"},
        {"c1ccncc1", "hetero ring"},
        {"c1ccc(-c2cccs2)cc1", "hetero ring"},
        {"c1ccc2ncccc2c1", "fused"},
        {"O=Cc1ccc2OCOc2c1", "bridge"},
        {"C1Cc2ccccc2C1", "bridge"},
        {"C1Cc2ccc(cc2)CCc2ccc1cc2", "bridge"},
        {"Cc1ccccc1.CO", "mixture"},
        {"[Li+].[O-]c1ccccc1", "mixture"},
        {"[Na+].[Cl-]", "counter-ions only"},
        {"Cc1ccccc1.[Na+]", "charges of the salt"},
        {"[Na+].[Na+].[O-]c1ccccc1", "charges of the salt"},
        {"[2H]c1ccccc1", "isotope"},
        {"[13CH3]c1ccccc1", "isotope"},
        {"[CH2]c1ccccc1", "radical"},
        {"C[Hg]c1ccccc1", "element Hg"},
        {"Br[Mg]c1ccccc1", "element Mg"},
        {"Clc1c(Cl)c(Cl)c(Cl)c(Cl)c1Cl", "no free position"},
        {"C1CCCCC1", "no benzene ring"},
        {"O=C1C=CC(=O)C=C1", "no benzene ring"},
        {"*c1ccccc1", "without an element"},
        {"C~c1ccccc1", "bond"},
    };
    for (const auto& [smiles, word] : expected)
        EXPECT_THAT(refused(smiles), HasSubstr(word)) << smiles;
    EXPECT_THAT(refused("C1Cc2ccccc2C1"), Not(HasSubstr("naphthalene")));
}

TEST(Arene, UnknownGroupIsShownWithItsNearest) {
    EXPECT_THAT(refused("O=C=Nc1ccccc1"), AllOf(HasSubstr("*N=C=O"), HasSubstr("nitroso (*N=O)")));
}

TEST(Arene, WhatIsNoSmilesNamesThePlace) {
    const auto where = [](const std::string& text) {
        try {
            const auto read = parse_arene(tables(), knowledge().groups, text);
        } catch (const Error& error) {
            EXPECT_EQ(error.kind, ErrorKind::input) << text;
            EXPECT_STRNE(error.what(), "");
            return error.where;
        }
        return std::string("no error");
    };
    EXPECT_EQ(where(""), "SMILES");
    EXPECT_EQ(where("Cc1ccccc1 toluene"), "SMILES character 10");
    EXPECT_EQ(where("C\xe2\x80\x93"
                    "c1ccccc1"),
              "SMILES character 2")
        << "a long dash";
    EXPECT_EQ(where("Cc1ccc(Clcc1"), "SMILES character 7") << "parenthesis left open";
    EXPECT_EQ(where("Cc1ccccc"), "SMILES character 3") << "ring left open";
    EXPECT_EQ(where("C[N+(=O)c1ccccc1"), "SMILES character 2") << "bracket left open";
    EXPECT_EQ(where("Cc1ccccc1)"), "SMILES character 10");
    EXPECT_EQ(where("C(C)(C)(C)(C)(C)c1ccccc1"), "SMILES") << "valence";
    EXPECT_EQ(where(std::string(1001, 'C')), "SMILES");
    EXPECT_EQ(where(std::string(100000, '(')), "SMILES");
}

// 4-nitrotoluene, written by RDKit 2022.09.3.
constexpr const char* v2000 = R"(
     RDKit          2D

 10 10  0  0  0  0  0  0  0  0999 V2000
    3.7500    0.0000    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
    2.2500   -0.0000    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
    1.5000   -1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -0.0000   -1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -0.7500    0.0000    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -2.2500    0.0000    0.0000 N   0  0  0  0  0  4  0  0  0  0  0  0
   -3.0000   -1.2990    0.0000 O   0  0  0  0  0  0  0  0  0  0  0  0
   -3.0000    1.2990    0.0000 O   0  0  0  0  0  1  0  0  0  0  0  0
    0.0000    1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
    1.5000    1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
  1  2  1  0
  2  3  2  0
  3  4  1  0
  4  5  2  0
  5  6  1  0
  6  7  2  0
  6  8  1  0
  5  9  1  0
  9 10  2  0
 10  2  1  0
M  CHG  2   6   1   8  -1
M  END
)";

constexpr const char* v3000 = R"(
     RDKit          2D

  0  0  0  0  0  0  0  0  0  0999 V3000
M  V30 BEGIN CTAB
M  V30 COUNTS 8 7 0 0 0
M  V30 BEGIN ATOM
M  V30 1 N -2.250000 0.000000 0.000000 0 CHG=1
M  V30 2 C -0.750000 0.000000 0.000000 0
M  V30 3 C 0.000000 1.299038 0.000000 0
M  V30 4 C 1.500000 1.299038 0.000000 0
M  V30 5 C 2.250000 0.000000 0.000000 0
M  V30 6 C 1.500000 -1.299038 0.000000 0
M  V30 7 C 0.000000 -1.299038 0.000000 0
M  V30 8 Cl 4.500000 0.000000 0.000000 0 CHG=-1
M  V30 END ATOM
M  V30 BEGIN BOND
M  V30 1 1 1 2
M  V30 2 2 2 3
M  V30 3 1 3 4
M  V30 4 2 4 5
M  V30 5 1 5 6
M  V30 6 2 6 7
M  V30 7 1 7 2
M  V30 END BOND
M  V30 END CTAB
M  END
)";

TEST(AreneMolfile, BothVersions) {
    const auto read = [](const std::string& text) {
        return answered(parse_molfile(tables(), knowledge().groups, text), "molfile");
    };
    EXPECT_EQ(read(v2000).smiles, by_toolkit("Cc1ccc(N(=O)=O)cc1"));
    EXPECT_EQ(read(v3000).smiles, "Nc1ccccc1") << "anilinium chloride";
    std::string dos;
    for (const char c : std::string(v2000))
        dos += c == '\n' ? std::string("\r\n") : std::string(1, c);
    EXPECT_EQ(read(dos).smiles, read(v2000).smiles);
}

TEST(AreneMolfile, CutOrLyingFilesNameTheLine) {
    const auto where = [](const std::string& text) {
        try {
            const auto read = parse_molfile(tables(), knowledge().groups, text);
        } catch (const Error& error) {
            EXPECT_EQ(error.kind, ErrorKind::input);
            return error.where;
        }
        return std::string("no error");
    };
    const auto changed = [](std::string text, const std::string& from, const std::string& to) {
        return text.replace(text.find(from), from.size(), to);
    };
    EXPECT_EQ(where(""), "molfile");
    EXPECT_EQ(where("just\na\nfew\nlines\n"), "molfile line 4");
    EXPECT_EQ(where(std::string(v2000).substr(0, 500)), "molfile line 4");
    EXPECT_EQ(where(changed(v2000, " 10 10", "999999")), "molfile line 4");
    EXPECT_EQ(where(changed(v2000, " 10 10", "  x 10")), "molfile line 4");
    EXPECT_EQ(where(changed(v2000, " 10 10", "  0  0")), "molfile line 4");
    EXPECT_EQ(where(changed(v3000, "COUNTS 8 7", "COUNTS 4000000000 8")), "molfile line 6");
    EXPECT_EQ(where(changed(v3000, "COUNTS 8 7", "COUNTS 30 30")), "molfile line 6");
    EXPECT_EQ(where(changed(v3000, "COUNTS 8 7", "NOTHING")), "molfile line 4");
    EXPECT_EQ(where(changed(v2000, "  1  2  1  0", "  1 77  1  0")), "molfile line 15");
}

TEST(AreneMolfile, QueriesAreNoMolecules) {
    std::string text = v2000;
    text.replace(text.find("M  END"), 6, "M  ALS   1  2 F Cl  Br  \nM  END");
    try {
        const auto read = parse_molfile(tables(), knowledge().groups, text);
        FAIL() << "a list of atoms was read";
    } catch (const Error& error) {
        EXPECT_THAT(error.what(), HasSubstr("query"));
    }
}

}  // namespace
}  // namespace isotally
