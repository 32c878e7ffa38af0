#include "isotally/names.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <map>
#include <random>
#include <set>
#include <stdexcept>
#include <vector>

namespace isotally {
namespace {

Substituent group(std::string id, std::string prefix, std::string principal = "") {
    Substituent out;
    out.id = std::move(id);
    out.name = prefix;
    out.prefix = std::move(prefix);
    out.principal = std::move(principal);
    return out;
}

const Tables& small_tables() {
    static const Tables tables = [] {
        Tables out;
        out.substituents = {group("F", "fluoro"),
                            group("Cl", "chloro"),
                            group("Br", "bromo"),
                            group("Me", "methyl"),
                            group("Et", "ethyl"),
                            group("iPr", "propan-2-yl"),
                            group("tBu", "tert-butyl"),
                            group("nBu", "butyl"),
                            group("CF3", "trifluoromethyl"),
                            group("CHCl2", "dichloromethyl"),
                            group("NO2", "nitro"),
                            group("NO", "nitroso"),
                            group("OMe", "methoxy"),
                            group("SMe", "methylsulfanyl"),
                            group("OH", "hydroxy", "phenol"),
                            group("NH2", "amino", "amine"),
                            group("NHMe", "methylamino", "amine:N-methyl"),
                            group("NMe2", "dimethylamino", "amine:N,N-dimethyl"),
                            group("NEt2", "diethylamino", "amine:N,N-diethyl"),
                            group("CN", "cyano", "nitrile"),
                            group("CHO", "formyl", "aldehyde"),
                            group("COOH", "carboxy", "acid"),
                            group("SO3H", "sulfo", "sulfonic-acid"),
                            group("COOMe", "methoxycarbonyl", "ester:methyl"),
                            group("COOEt", "ethoxycarbonyl", "ester:ethyl"),
                            group("COCl", "carbonochloridoyl", "acid-chloride"),
                            group("SO2Cl", "chlorosulfonyl", "sulfonyl-chloride"),
                            group("CONH2", "carbamoyl", "amide"),
                            group("SO2NH2", "sulfamoyl", "sulfonamide"),
                            group("NHAc", "acetamido", "anilide:acetamide"),
                            group("NHBz", "benzamido", "anilide:benzamide"),
                            group("Ac", "acetyl", "ketone:ethan-1-one"),
                            group("COEt", "propanoyl", "ketone:propan-1-one"),
                            group("Bz", "benzoyl"),
                            group("OAc", "acetyloxy"),
                            group("CH2OH", "hydroxymethyl"),
                            group("SiMe3", "trimethylsilyl"),
                            group("Ph", "phenyl"),
                            group("Bn", "benzyl"),
                            group("OPh", "phenoxy"),
                            group("NNPh", "phenyldiazenyl"),
                            group("N2+", ""),
                            group("CH2COOEt", "2-ethoxy-2-oxoethyl"),
                            group("OCH2COOH", "carboxymethoxy"),
                            group("NMeAc", "N-methylacetamido"),
                            group("NHPh", "anilino"),
                            group("NHMs", "methanesulfonamido"),
                            group("NPhth", "1,3-dioxo-1,3-dihydro-2H-isoindol-2-yl"),
                            group("SO3Me", "methoxysulfonyl"),
                            group("CONMe2", "dimethylcarbamoyl"),
                            group("OiPr", "propan-2-yloxy"),
                            group("odd", "odd", "unheard-of")};
        return out;
    }();
    return tables;
}

// "Me,NO2,,,," as a pattern; missing positions are hydrogen.
RingGroups pattern(const std::string& text) {
    RingGroups out;
    out.fill(-1);
    std::size_t position = 0, from = 0;
    while (from <= text.size()) {
        const auto comma = std::min(text.find(',', from), text.size());
        if (const std::string id = text.substr(from, comma - from); !id.empty()) {
            const auto& all = small_tables().substituents;
            const auto at = std::ranges::find(all, id, &Substituent::id);
            if (at == all.end())
                throw std::invalid_argument(id);
            out.at(position) = static_cast<int>(at - all.begin());
        }
        ++position;
        from = comma + 1;
    }
    return out;
}

RingGroups turned(const RingGroups& groups, int start, bool back) {
    RingGroups out;
    for (int i = 0; i < 6; ++i)
        out[static_cast<std::size_t>(i)] = groups[static_cast<std::size_t>((start + (back ? 6 - i : i)) % 6)];
    return out;
}

bool same_ring(const RingGroups& a, const RingGroups& b) {
    for (int start = 0; start < 6; ++start)
        if (turned(a, start, false) == b || turned(a, start, true) == b)
            return true;
    return false;
}

std::string systematic(const std::string& text) {
    return name_ring(small_tables(), pattern(text)).systematic.value_or("none");
}

std::string general(const std::string& text) {
    return name_ring(small_tables(), pattern(text)).general.value_or("none");
}

// The pattern in order of locants.
RingGroups by_locant(const RingGroups& groups, const std::array<int, 6>& locants) {
    RingGroups out;
    out.fill(-2);
    for (std::size_t i = 0; i < 6; ++i)
        out.at(static_cast<std::size_t>(locants[i] - 1)) = groups[i];
    return out;
}

void expect_one_name_that_reads_back(const RingGroups& groups) {
    const RingName name = name_ring(small_tables(), groups);
    ASSERT_TRUE(name.systematic);
    for (int start = 0; start < 6; ++start)
        for (bool back : {false, true}) {
            const RingGroups other = turned(groups, start, back);
            const RingName again = name_ring(small_tables(), other);
            EXPECT_EQ(again.systematic, name.systematic);
            EXPECT_EQ(again.general, name.general);
            EXPECT_EQ(by_locant(other, again.locants), by_locant(groups, name.locants));
        }
    for (const auto& text : {name.systematic, name.general}) {
        if (!text)
            continue;
        const auto read = read_ring_name(small_tables(), *text);
        ASSERT_TRUE(read) << *text;
        EXPECT_TRUE(same_ring(*read, groups)) << *text;
    }
    EXPECT_EQ(read_ring_name(small_tables(), *name.systematic), by_locant(groups, name.locants))
        << *name.systematic;
}

struct Example {
    const char* name;
    const char* pattern;
    const char* rule;
};

// Names by the rules of IUPAC, Nomenclature of Organic Chemistry, Recommendations 2013, and what decides;
// here and below the numbers of the rules are from memory.
constexpr Example published[] = {
    {"1-chloro-2-nitrobenzene", "NO2,Cl", "P-31.1.4: lowest locants, then c before n"},
    {"1-bromo-3-chlorobenzene", "Cl,,Br", "P-31.1.4: same set, first cited lowest"},
    {"2-chloro-1-fluoro-4-nitrobenzene", "NO2,,Cl,F", "P-31.1.4: the set {1,2,4} before alphabetical order"},
    {"1-bromo-4-chloro-2-nitrobenzene", "NO2,,Cl,,,Br", "P-31.1.4: first cited lowest"},
    {"4-nitrophenol", "NO2,,,OH", "P-31.1.4: principal group is 1"},
    {"3-chloroaniline", "NH2,,Cl", "P-31.1.4: principal group is 1"},
    {"4-aminophenol", "NH2,,,OH", "P-41: OH senior to NH2"},
    {"4-hydroxybenzoic acid", "COOH,,,OH", "P-41: COOH senior to OH"},
    {"3-nitrobenzoic acid", "COOH,,NO2", "P-65.1"},
    {"methyl 3-nitrobenzoate", "COOMe,,NO2", "P-65.6.3: ester of the acid parent"},
    {"4-hydroxybenzaldehyde", "CHO,,,OH", "P-41: CHO senior to OH"},
    {"4-formylbenzoic acid", "CHO,,,COOH", "P-41: COOH senior to CHO"},
    {"4-cyanobenzoic acid", "CN,,,COOH", "P-41: COOH senior to CN"},
    {"4-aminobenzene-1-sulfonic acid", "NH2,,,SO3H", "P-41: SO3H senior to NH2"},
    {"4-sulfobenzoic acid", "COOH,,,SO3H", "P-41: carboxylic senior to sulfonic"},
    {"2-chloro-4-nitroaniline", "NH2,Cl,,NO2", "P-14.5"},
    {"4-bromo-2-methylaniline", "NH2,Me,,Br", "P-14.5"},
    {"2-bromo-4-methylphenol", "Me,,Br,OH", "P-14.5"},
    {"2,6-dichloroaniline", "Cl,NH2,Cl", "P-14.5: multipliers not counted"},
    {"2,4-dimethylaniline", "NH2,Me,,Me", "P-31.1.4"},
    {"N-(4-nitrophenyl)acetamide", "NHAc,,,NO2", "P-66.1: anilide named as amide"},
    {"N-(2-methylphenyl)acetamide", "Me,NHAc", "P-66.1"},
    {"1-(4-methylphenyl)ethan-1-one", "Ac,,,Me", "P-64: the chain with the ketone is the parent"},
    {"benzene-1,3-diamine", "NH2,,NH2", "P-62.2: two suffixes, benzene parent"},
    {"4-methylbenzene-1,3-diamine", "NH2,,NH2,Me", "P-31.1.4: suffixes lowest first"},
    {"benzene-1,4-dicarboxylic acid", "COOH,,,COOH", "P-65.1"},
    {"1,3-dinitrobenzene", "NO2,,NO2", "P-31.1.4"},
    {"1-methyl-2,4-dinitrobenzene", "Me,NO2,,NO2", "P-22.1.3: toluene is not substituted"},
    {"1-methyl-4-nitrobenzene", "NO2,,,Me", "P-22.1.3"},
    {"1-bromo-4-methylbenzene", "Me,,,Br", "P-22.1.3"},
    {"1-bromo-4-methoxybenzene", "OMe,,,Br", "P-63.2: anisole is not substituted"},
    {"2-chlorobenzonitrile", "CN,Cl", "P-66.5"},
    {"1-tert-butyl-4-methylbenzene", "Me,,,tBu", "P-14.5: tert- not counted"},
    {"4-tert-butyl-2-nitrophenol", "OH,NO2,,tBu", "P-14.5: tert- not counted"},
    {"1-methyl-4-(propan-2-yl)benzene", "iPr,,,Me", "P-16.5: brackets"},
    {"(trifluoromethyl)benzene", "CF3", "P-16.5: brackets"},
    {"1-nitro-3-(trifluoromethyl)benzene", "CF3,,NO2", "P-14.5: compound prefix counts from its t"},
    {"2-methoxyphenol", "OMe,OH", "P-63.2: ethers are always prefixes"},
    {"3-methoxybenzaldehyde", "OMe,,CHO", "P-66.6"},
    {"2-hydroxy-5-nitrobenzoic acid", "NO2,,,OH,COOH", "P-14.5"},
};

TEST(Names, published_examples) {
    for (const Example& example : published) {
        EXPECT_EQ(systematic(example.pattern), example.name) << example.rule;
        expect_one_name_that_reads_back(pattern(example.pattern));
    }
    EXPECT_EQ(general("OMe,,,Br"), "4-bromoanisole");         // P-63.2, general nomenclature
    EXPECT_EQ(general("Me,NO2,,NO2"), "2,4-dinitrotoluene");  // P-22.1.3, general nomenclature
}

// P-22.1.3, P-63.2.4.1: retained for the unsubstituted compounds.
TEST(Names, names_of_unsubstituted_compounds) {
    EXPECT_EQ(systematic(""), "benzene");
    EXPECT_EQ(systematic("Me"), "toluene");
    EXPECT_EQ(systematic("OMe"), "anisole");
    EXPECT_EQ(systematic("Me,Me"), "1,2-xylene");
    EXPECT_EQ(systematic("Me,,Me"), "1,3-xylene");
    EXPECT_EQ(systematic("Me,,,Me"), "1,4-xylene");
    EXPECT_EQ(systematic("Me,,Me,,Me"), "1,3,5-trimethylbenzene");
    EXPECT_EQ(systematic("Cl"), "chlorobenzene");
    EXPECT_EQ(systematic("Cl,Cl,Cl,Cl,Cl,Cl"), "hexachlorobenzene");
    for (const char* name : {"OH",
                             "NH2",
                             "COOH",
                             "CHO",
                             "CN",
                             "SO3H",
                             "CONH2",
                             "COCl",
                             "SO2Cl",
                             "SO2NH2",
                             "Bz",
                             "Ph",
                             "Bn",
                             "NHAc",
                             "Ac",
                             "OAc",
                             "SiMe3",
                             "CH2OH",
                             "Cl,Cl,Cl,Cl,Cl,Cl",
                             "OH,OH,OH,OH,OH,OH",
                             "",
                             "Me,Me",
                             "Me,,Me",
                             "Me,,,Me",
                             "OPh",
                             "NNPh"})
        expect_one_name_that_reads_back(pattern(name));
    EXPECT_EQ(systematic("SO3H"), "benzenesulfonic acid");
    EXPECT_EQ(systematic("SO2Cl"), "benzenesulfonyl chloride");
    EXPECT_EQ(systematic("COCl"), "benzoyl chloride");
    EXPECT_EQ(systematic("NHAc"), "N-phenylacetamide");
    EXPECT_EQ(systematic("Ac"), "1-phenylethan-1-one");
    EXPECT_EQ(systematic("Bz"), "diphenylmethanone");
    EXPECT_EQ(general("Me"), "none");
    EXPECT_EQ(general("NHAc"), "acetanilide");
    EXPECT_EQ(general("Ac"), "acetophenone");
    EXPECT_EQ(general("CF3"), "benzotrifluoride");
    EXPECT_EQ(general("Ph"), "biphenyl");
}

// Suffix forms and their multiplied forms as written in P-62 to P-66 of the 2013 recommendations.
TEST(Names, several_characteristic_groups) {
    EXPECT_EQ(systematic("OH,,OH"), "benzene-1,3-diol");
    EXPECT_EQ(systematic("OH,OH,,OH,OH"), "benzene-1,2,4,5-tetrol");
    EXPECT_EQ(systematic("NH2,NH2,,NH2,NH2"), "benzene-1,2,4,5-tetramine");
    EXPECT_EQ(systematic("OH,OH,OH,OH,OH,OH"), "benzenehexol");
    EXPECT_EQ(systematic("CN,CN"), "benzene-1,2-dicarbonitrile");
    EXPECT_EQ(systematic("CHO,,,CHO"), "benzene-1,4-dicarbaldehyde");
    EXPECT_EQ(systematic("COCl,,,COCl"), "benzene-1,4-dicarbonyl dichloride");
    EXPECT_EQ(systematic("COOMe,,,COOMe"), "dimethyl benzene-1,4-dicarboxylate");
    EXPECT_EQ(systematic("COOMe,,,COOEt"), "ethyl methyl benzene-1,4-dicarboxylate");
    EXPECT_EQ(systematic("NO2,COOMe,,,COOEt"), "4-ethyl 1-methyl 2-nitrobenzene-1,4-dicarboxylate");
    EXPECT_EQ(systematic("Me,SO2Cl,,SO2Cl"), "4-methylbenzene-1,3-disulfonyl dichloride");
    EXPECT_EQ(systematic("NHAc,,,NHAc"), "N,N'-(1,4-phenylene)diacetamide");
    EXPECT_EQ(systematic("Ac,,Ac"), "1,1'-(1,3-phenylene)di(ethan-1-one)");
    EXPECT_EQ(systematic("CH2OH,,,CH2OH"), "(1,4-phenylene)dimethanol");
    EXPECT_EQ(systematic("OAc,,,OAc"), "1,4-phenylene diacetate");
    EXPECT_EQ(systematic("Ac,,Ac,,Ac"), "1,1',1''-(benzene-1,3,5-triyl)tri(ethan-1-one)");
    EXPECT_EQ(systematic("NHAc,Me,,NHAc"), "N,N'-(2-methyl-1,4-phenylene)diacetamide");
}

// Seniority of classes, P-41 of the 2013 recommendations: each group outranks the next.
TEST(Names, seniority) {
    EXPECT_EQ(systematic("COOH,,,COOMe"), "4-(methoxycarbonyl)benzoic acid");
    EXPECT_EQ(systematic("SO3H,,,COOMe"), "4-(methoxycarbonyl)benzene-1-sulfonic acid");
    EXPECT_EQ(systematic("COOMe,,,COCl"), "methyl 4-carbonochloridoylbenzoate");
    EXPECT_EQ(systematic("COCl,,,SO2Cl"), "4-(chlorosulfonyl)benzoyl chloride");
    EXPECT_EQ(systematic("SO2Cl,,,CONH2"), "4-carbamoylbenzene-1-sulfonyl chloride");
    EXPECT_EQ(systematic("SO2Cl,,,NHAc"), "4-acetamidobenzene-1-sulfonyl chloride");
    EXPECT_EQ(systematic("CONH2,,,NHAc"), "4-acetamidobenzamide");
    EXPECT_EQ(systematic("SO2NH2,,,NHAc"), "N-(4-sulfamoylphenyl)acetamide");
    EXPECT_EQ(systematic("SO2NH2,,,CN"), "4-cyanobenzene-1-sulfonamide");
    EXPECT_EQ(systematic("CN,,,CHO"), "4-formylbenzonitrile");
    EXPECT_EQ(systematic("CHO,,,Ac"), "4-acetylbenzaldehyde");
    EXPECT_EQ(systematic("Ac,,,OH"), "1-(4-hydroxyphenyl)ethan-1-one");
    EXPECT_EQ(systematic("Ac,,,COEt"), "1-(4-acetylphenyl)propan-1-one");
    EXPECT_EQ(systematic("OH,,,CH2OH"), "4-(hydroxymethyl)phenol");
    EXPECT_EQ(systematic("NMe2,,,COOH"), "4-(dimethylamino)benzoic acid");
    EXPECT_EQ(systematic("Bz,,COOH"), "3-benzoylbenzoic acid");
    EXPECT_EQ(systematic("OAc,COOH"), "2-(acetyloxy)benzoic acid");
}

// P-62.2.1: letters as locants of the groups on nitrogen.
TEST(Names, substituted_amines) {
    EXPECT_EQ(systematic("NMe2"), "N,N-dimethylaniline");
    EXPECT_EQ(systematic("NMe2,,,NO2"), "N,N-dimethyl-4-nitroaniline");
    EXPECT_EQ(systematic("NMe2,,,Br"), "4-bromo-N,N-dimethylaniline");
    EXPECT_EQ(systematic("NHMe,,,Me"), "N,4-dimethylaniline");
    EXPECT_EQ(systematic("NMe2,,,NH2"), "N1,N1-dimethylbenzene-1,4-diamine");
    EXPECT_EQ(systematic("NMe2,,,NMe2"), "N1,N1,N4,N4-tetramethylbenzene-1,4-diamine");
    EXPECT_EQ(systematic("NH2,Me,,NEt2"), "N4,N4-diethyl-2-methylbenzene-1,4-diamine");
    for (const char* text : {"NMe2", "NMe2,,,Br", "NHMe,,,Me", "NMe2,,,NH2", "NMe2,,,NMe2", "NH2,Me,,NEt2"})
        expect_one_name_that_reads_back(pattern(text));
}

// P-16.3 and P-16.5: multipliers and brackets; nested ones (), [].
TEST(Names, compound_prefixes) {
    EXPECT_EQ(systematic("CF3,,CF3"), "1,3-bis(trifluoromethyl)benzene");
    EXPECT_EQ(systematic("iPr,,iPr"), "1,3-di(propan-2-yl)benzene");
    EXPECT_EQ(systematic("OH,tBu,,,,tBu"), "2,6-di-tert-butylphenol");
    EXPECT_EQ(systematic("SMe,,,NO"), "1-(methylsulfanyl)-4-nitrosobenzene");
    EXPECT_EQ(systematic("Cl,,,CHCl2"), "1-chloro-4-(dichloromethyl)benzene");
    EXPECT_EQ(systematic("NHAc,,,CF3"), "N-[4-(trifluoromethyl)phenyl]acetamide");
    EXPECT_EQ(systematic("Bz,,,Me"), "(4-methylphenyl)(phenyl)methanone");
    EXPECT_EQ(systematic("Bz,,,CF3"), "phenyl[4-(trifluoromethyl)phenyl]methanone");
    EXPECT_EQ(systematic("SiMe3,,,NO2"), "trimethyl(4-nitrophenyl)silane");
    EXPECT_EQ(systematic("SiMe3,,,Cl"), "(4-chlorophenyl)trimethylsilane");
    EXPECT_EQ(systematic("nBu,tBu"), "1-butyl-2-tert-butylbenzene");
    EXPECT_EQ(systematic("Ph,,,NO2"), "4-nitro-1,1'-biphenyl");
}

// P-61 to P-68: groups whose chain is the parent, or that are a suffix though listed by prefix alone.
TEST(Names, groups_given_by_prefix_alone) {
    EXPECT_EQ(systematic("CH2COOEt,,,NO2"), "ethyl (4-nitrophenyl)acetate");
    EXPECT_EQ(systematic("OCH2COOH,Cl,,Cl"), "(2,4-dichlorophenoxy)acetic acid");
    EXPECT_EQ(systematic("NMeAc,,,NO2"), "N-methyl-N-(4-nitrophenyl)acetamide");
    EXPECT_EQ(systematic("NMeAc,,,Cl"), "N-(4-chlorophenyl)-N-methylacetamide");
    EXPECT_EQ(systematic("NHPh,,,NO2"), "4-nitro-N-phenylaniline");
    EXPECT_EQ(systematic("NHMs,,,NO2"), "N-(4-nitrophenyl)methanesulfonamide");
    EXPECT_EQ(systematic("NPhth,,,NO2"), "2-(4-nitrophenyl)-1H-isoindole-1,3(2H)-dione");
    EXPECT_EQ(systematic("SO3Me,,,Me"), "methyl 4-methylbenzene-1-sulfonate");
    EXPECT_EQ(systematic("CONMe2,,,NO2"), "N,N-dimethyl-4-nitrobenzamide");
    EXPECT_EQ(systematic("OiPr,,,OiPr"), "1,4-bis(propan-2-yloxy)benzene");
    EXPECT_EQ(systematic("OCH2COOH,,,OCH2COOH"), "none");
}

// Names as printed in catalogues of chemicals.
TEST(Names, names_of_the_trade) {
    EXPECT_EQ(general("Me,NO2"), "2-nitrotoluene");
    EXPECT_EQ(general("Cl,,,Me"), "4-chlorotoluene");
    EXPECT_EQ(general("Me,NO2,,Cl"), "4-chloro-2-nitrotoluene");
    EXPECT_EQ(general("OMe,Me"), "2-methylanisole");
    EXPECT_EQ(general("NHAc,,,NO2"), "4-nitroacetanilide");
    EXPECT_EQ(general("Me,,,Ac"), "4-methylacetophenone");
    EXPECT_EQ(general("CF3,,NO2,Cl"), "4-chloro-3-nitrobenzotrifluoride");
    EXPECT_EQ(general("Me,,,SO3H"), "4-methylbenzenesulfonic acid");
    EXPECT_EQ(general("Me,,,SO2Cl"), "4-methylbenzenesulfonyl chloride");
    EXPECT_EQ(general("Bz,,,Cl"), "4-chlorobenzophenone");
    EXPECT_EQ(general("Ph,,,NO2"), "4-nitrobiphenyl");
    EXPECT_EQ(general("Me,,NO2,Me"), "none");
    EXPECT_EQ(general("Me,OH"), "none");
    EXPECT_EQ(general("NHAc,,,NHAc"), "none");
}

TEST(Names, no_systematic_name) {
    for (const char* text : {"N2+", "N2+,,Me", "odd", "Ph,,,OH", "Ph,,,Ph", "NNPh,,,Me", "Me,odd"}) {
        const RingName name = name_ring(small_tables(), pattern(text));
        EXPECT_FALSE(name.systematic) << text;
        EXPECT_FALSE(name.general) << text;
    }
    // All groups together lowest: {1,2,4}. Where that leaves a choice the id that sorts first is at 1.
    EXPECT_EQ(name_ring(small_tables(), pattern(",,Me,N2+,,Cl")).locants,
              (std::array<int, 6>{5, 6, 1, 2, 3, 4}));
    EXPECT_EQ(name_ring(small_tables(), pattern("N2+,,Cl")).locants, (std::array<int, 6>{3, 2, 1, 6, 5, 4}));
}

TEST(Names, locants_are_those_of_the_systematic_name) {
    // 1-methyl-2,4-dinitrobenzene, written from its second nitro group backwards.
    EXPECT_EQ(name_ring(small_tables(), pattern("NO2,,NO2,Me")).locants,
              (std::array<int, 6>{4, 3, 2, 1, 6, 5}));
    // 2-chloro-1-fluoro-4-nitrobenzene.
    EXPECT_EQ(name_ring(small_tables(), pattern("Cl,F,,,NO2")).locants,
              (std::array<int, 6>{2, 1, 6, 5, 4, 3}));
    // 1-bromo-4-methylbenzene, although the general name 4-bromotoluene counts from the methyl group.
    EXPECT_EQ(name_ring(small_tables(), pattern("Me,,,Br")).locants[3], 1);
    EXPECT_THROW(name_ring(small_tables(), RingGroups{1000, -1, -1, -1, -1, -1}), std::out_of_range);
}

TEST(Names, reads_other_spellings) {
    const auto read = [](const char* name) { return read_ring_name(small_tables(), name); };
    EXPECT_EQ(read("2-NITROTOLUENE"), pattern("Me,NO2"));
    EXPECT_EQ(read("4-chloro-2-nitrotoluene"), pattern("Me,NO2,,Cl"));
    EXPECT_EQ(read("2-nitro-4-chlorotoluene"), pattern("Me,NO2,,Cl"));
    EXPECT_EQ(read("6-chloro-2-nitrotoluene"), pattern("Me,NO2,,,,Cl"));
    EXPECT_EQ(read("1-nitro-2-methylbenzene"), pattern("NO2,Me"));
    EXPECT_EQ(read("1-nitro-3-trifluoromethylbenzene"), pattern("NO2,,CF3"));
    EXPECT_EQ(read("n,n-dimethyl-4-nitroaniline"), pattern("NMe2,,,NO2"));
    EXPECT_EQ(read("4-dimethylaminobenzoic acid"), pattern("COOH,,,NMe2"));
    EXPECT_EQ(read("4-methylbenzenesulfonyl chloride"), pattern("SO2Cl,,,Me"));
    EXPECT_EQ(read("4-methylbenzene-1-sulfonyl chloride"), pattern("SO2Cl,,,Me"));
    EXPECT_EQ(read("phenyl(4-methylphenyl)methanone"), pattern("Bz,,,Me"));
    EXPECT_EQ(read("methylbenzene"), pattern("Me"));
    EXPECT_EQ(read("methyl 4-(carbonochloridoyl)benzoate"), pattern("COOMe,,,COCl"));
}

TEST(Names, refuses_what_is_not_a_name) {
    for (const char* name : {"",
                             "-",
                             "toluen",
                             "1-nitrotoluene",
                             "7-nitrotoluene",
                             "2,2-dinitrotoluene",
                             "2-dinitrotoluene",
                             "2,4-nitrotoluene",
                             "nitrotoluene",
                             "nitrophenol",
                             "2-nitro-toluene-",
                             "2-nitro4-chlorotoluene",
                             "1-chloro-2-chlorobenzene",
                             "1-chloro-1-nitrobenzene",
                             "4-hydroxytoluene",
                             "4-methyltoluene",
                             "di(4-methylphenyl)methanone",
                             "4-aminobenzene-2-sulfonic acid",
                             "benzene-1,1-diamine",
                             "benzene-1,2-triamine",
                             "methyl benzene-1,4-dicarboxylate",
                             "dimethyl benzoate",
                             "ethyl methyl 2-nitrobenzene-1,4-dicarboxylate",
                             "propyl benzoate",
                             "N,N,N-trimethylaniline",
                             "N-methylphenol",
                             "N2,N2-dimethylbenzene-1,4-diamine",
                             "N,N-dimethylbenzene-1,4-diamine",
                             "N-(4-nitrophenyl]acetamide",
                             "N-4-nitrophenylacetamid",
                             "1,5-xylene",
                             "4-nitro-1,2-xylene",
                             "2-nitrobenzene",
                             "1,2,3,4,5,6,6-heptachlorobenzene",
                             "hexachlorotoluene",
                             "4-odd-toluene",
                             "benzenebenzene",
                             "2-nitrotoluene ",
                             "Cc1ccccc1",
                             "tetrachlorobenzene",
                             "(1,4-phenylene)methanol"})
        EXPECT_FALSE(read_ring_name(small_tables(), name)) << name;
    Tables empty;
    EXPECT_FALSE(read_ring_name(empty, "toluene"));
    EXPECT_TRUE(read_ring_name(empty, "benzene"));
}

const std::vector<std::string> usual = {"Me",  "Cl",   "NO2",  "OMe", "OH",   "NH2",   "COOH",
                                        "CF3", "NHAc", "SO3H", "tBu", "NMe2", "COOMe", "SO2Cl",
                                        "Ac",  "iPr",  "CN",   "Bz",  "OAc",  "SiMe3"};

int index_of(const std::string& id) {
    return pattern(id)[0];
}

TEST(Names, round_trip_of_every_ring_with_two_groups) {
    const int count = static_cast<int>(small_tables().substituents.size());
    for (int first = 0; first < count; ++first)
        for (int second = first; second < count; ++second)
            for (std::size_t at : {1U, 2U, 3U}) {
                RingGroups groups{first, -1, -1, -1, -1, -1};
                groups[at] = second;
                if (name_ring(small_tables(), groups).systematic)
                    expect_one_name_that_reads_back(groups);
            }
}

TEST(Names, round_trip_of_a_sample_of_rings_with_three_to_six_groups) {
    std::mt19937 random(1);
    std::set<RingGroups> seen;
    for (int draw = 0; draw < 1500; ++draw) {
        RingGroups groups;
        groups.fill(-1);
        const std::size_t count = draw < 700 ? 3 : draw < 1300 ? 4 : 5 + static_cast<std::size_t>(draw % 2);
        const std::size_t choice = draw % 3 == 0 ? 3 : usual.size();
        const std::size_t offset = random() % usual.size();
        for (std::size_t i = 0; i < count; ++i)
            groups[i] = index_of(usual[(offset + random() % choice) % usual.size()]);
        std::ranges::shuffle(groups, random);
        if (seen.insert(groups).second)
            expect_one_name_that_reads_back(groups);
    }
    EXPECT_GT(seen.size(), 1200U);
}

// Two different rings never share a name.
TEST(Names, different_rings_have_different_names) {
    std::map<std::string, RingGroups> owner;
    const std::vector<std::string> few = {"", "Me", "Cl", "NO2", "OMe", "NH2", "CF3"};
    for (const auto& b : few)
        for (const auto& c : few)
            for (const auto& d : few)
                for (const auto& a : few) {
                    const RingGroups groups = pattern(a + "," + b + "," + c + "," + d);
                    const RingName name = name_ring(small_tables(), groups);
                    for (const auto& text : {name.systematic, name.general})
                        if (text) {
                            const auto [at, added] = owner.emplace(*text, groups);
                            EXPECT_TRUE(added || same_ring(at->second, groups)) << *text;
                        }
                }
    EXPECT_GT(owner.size(), 1000U);
}

}  // namespace
}  // namespace isotally
