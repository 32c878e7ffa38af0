// Partial rate factors, relative rates and isomer shares of the same papers, one from the other:
// share k = 100 n_k f_k / sum n_j f_j, k(rel) = sum n_j f_j / 6, f_k = 6 k(rel) (share_k / 100) / n_k.
// All figures are recalled ones (status memory), most of them as tabulated in Stock & Brown,
// Adv. Phys. Org. Chem. 1963, 1, 35.
#include <gtest/gtest.h>

#include <array>
#include <cmath>
#include <string>
#include <vector>

#include "named.hpp"

namespace isotally {
namespace {

using Triple = std::array<double, 3>;  // ortho, meta, para

struct Paper {
    const char* substrate;
    const char* reaction;
    double temperature_C;
    double relative_rate;
    Triple percent, factor;
    const char* source;
};

const std::vector<Paper>& papers() {
    static const std::vector<Paper> all = {
        {"toluene",
         "nitration-acetyl-nitrate",
         0,
         27,
         {61.4, 1.6, 37.0},
         {49.7, 1.3, 60.0},
         "Knowles, Norman & Radda, J. Chem. Soc. 1960, 4885"},
        {"ethylbenzene",
         "nitration-acetyl-nitrate",
         0,
         22.8,
         {45.9, 3.3, 50.8},
         {31.4, 2.3, 69.5},
         "Knowles, Norman & Radda, J. Chem. Soc. 1960, 4885"},
        {"cumene",
         "nitration-acetyl-nitrate",
         0,
         17.7,
         {28.0, 4.5, 67.5},
         {14.8, 2.4, 71.6},
         "Knowles, Norman & Radda, J. Chem. Soc. 1960, 4885"},
        {"tert-butylbenzene",
         "nitration-acetyl-nitrate",
         0,
         15.1,
         {10.0, 6.8, 83.2},
         {4.5, 3.0, 75.5},
         "Knowles, Norman & Radda, J. Chem. Soc. 1960, 4885"},
        {"toluene",
         "nitration-nitric-acid",
         45,
         24.5,
         {56.5, 3.5, 40.0},
         {42, 2.5, 58},
         "Cohn, Hughes, Jones & Peeling, Nature 1952, 169, 291"},
        {"tert-butylbenzene",
         "nitration-nitric-acid",
         45,
         15.7,
         {12.0, 8.5, 79.5},
         {5.5, 4.0, 75},
         "Cohn, Hughes, Jones & Peeling, Nature 1952, 169, 291"},
        {"toluene",
         "nitration-acetyl-nitrate",
         30,
         23,
         {58.4, 4.4, 37.2},
         {40, 3, 51},
         "Ingold, Lapworth, Rothstein & Ward, J. Chem. Soc. 1931, 1959"},
        {"toluene",
         "nitration-nitric-acid",
         25,
         28,
         {61.6, 2.6, 35.8},
         {51.6, 2.2, 60.1},
         "Brown & Wirkkala, J. Am. Chem. Soc. 1966, 88, 1447 (in trifluoroacetic acid)"},
        {"chlorobenzene",
         "nitration-acetyl-nitrate",
         25,
         0.033,
         {29.6, 0.9, 69.5},
         {0.0293, 0.0009, 0.137},
         "Bird & Ingold, J. Chem. Soc. 1938, 918; Roberts et al., J. Am. Chem. Soc. 1954, 76, 4525"},
        {"benzyl chloride",
         "nitration-acetyl-nitrate",
         25,
         0.302,
         {32, 15.5, 52.5},
         {0.29, 0.14, 0.951},
         "Ingold & Shaw, J. Chem. Soc. 1949, 575"},
        {"toluene",
         "chlorination-acetic-acid",
         25,
         344,
         {59.8, 0.48, 39.7},
         {617, 4.95, 820},
         "Brown & Stock, J. Am. Chem. Soc. 1957, 79, 5175"},
        {"toluene",
         "chlorination-hypochlorous-acid",
         25,
         60,
         {74.6, 2.2, 23.2},
         {134, 4.0, 82},
         "de la Mare, Harvey, Hassan & Varma, J. Chem. Soc. 1958, 2756"},
        {"toluene",
         "bromination-acetic-acid",
         25,
         605,
         {32.9, 0.3, 66.8},
         {600, 5.5, 2420},
         "Brown & Stock, J. Am. Chem. Soc. 1957, 79, 1421"},
        {"tert-butylbenzene",
         "bromination-acetic-acid",
         25,
         138,
         {1.2, 1.47, 97.3},
         {4.97, 6.09, 806},
         "Stock & Brown, J. Am. Chem. Soc. 1959, 81, 5621"},
        {"toluene",
         "bromination-hypobromous-acid",
         25,
         36.2,
         {70.3, 2.3, 27.4},
         {76, 2.5, 59},
         "de la Mare & Harvey, J. Chem. Soc. 1956, 36"},
        {"toluene",
         "acetylation-lewis-acid",
         25,
         128,
         {1.17, 1.25, 97.6},
         {4.5, 4.8, 749},
         "Brown, Marino & Stock, J. Am. Chem. Soc. 1959, 81, 3310"},
        {"toluene",
         "benzoylation-lewis-acid",
         25,
         110,
         {9.3, 1.45, 89.3},
         {30.7, 4.8, 589},
         "Brown & Jensen, J. Am. Chem. Soc. 1958, 80, 2296"},
        {"toluene",
         "mercuration",
         25,
         7.9,
         {21.0, 9.5, 69.5},
         {4.98, 2.25, 32.9},
         "Brown & McGary, J. Am. Chem. Soc. 1955, 77, 2306"},
    };
    return all;
}

std::string label(const Paper& paper) {
    return std::string(paper.substrate) + ", " + paper.reaction + ", " + paper.source;
}

/// The free positions of the ring as the library finds them, in the order ortho, meta, para.
std::vector<PlacedSite> positions_of(const Paper& paper) {
    const auto ring = arene(named(paper.substrate));
    const auto placed = placed_sites(ring, sites(ring, reaction_row(paper.reaction).new_group));
    std::vector<PlacedSite> ordered(3);
    const auto& groups = ring.rings.at(0).groups;
    const auto group =
        std::find_if(groups.begin(), groups.end(), [](int g) { return g >= 0; }) - groups.begin();
    for (const auto& site : placed) {
        const auto apart = std::abs(group - site.position);
        ordered.at(static_cast<std::size_t>(std::min<std::ptrdiff_t>(apart, 6 - apart) - 1)) = site;
    }
    return ordered;
}

std::vector<double> log10_of(const Triple& factors) {
    std::vector<double> out;
    for (const double f : factors)
        out.push_back(std::log10(f));
    return out;
}

/// Half a unit in the last digit that papers print is up to 3 % of a factor.
constexpr double rounding = 0.03;

TEST(PublishedFactors, GiveThePercentagesOfTheSamePaper) {
    for (const auto& paper : papers()) {
        const auto percent = isomer_percents(positions_of(paper), log10_of(paper.factor));
        for (std::size_t i = 0; i < 3; ++i)
            EXPECT_NEAR(percent[i], paper.percent[i],
                        0.06 + rounding * std::min(percent[i], 100 - percent[i]))
                << label(paper) << ", " << relation_names[i];
    }
}

TEST(PublishedFactors, GiveTheRelativeRateOfTheSamePaper) {
    for (const auto& paper : papers()) {
        SiteFactors factors;
        factors.mean = log10_of(paper.factor);
        factors.covariance.assign(9, 0);
        const auto& family = reaction_row(paper.reaction).family;
        const auto drawn = draw_shares(tables(), family, positions_of(paper), factors, {.count = 10});
        EXPECT_NEAR(drawn.relative_rate.value / paper.relative_rate, 1, rounding) << label(paper);
        EXPECT_NEAR(drawn.ortho_para_ratio.value().value, paper.percent[0] / paper.percent[2],
                    2 * rounding * paper.percent[0] / paper.percent[2])
            << label(paper);
    }
}

TEST(PublishedPercentages, GiveTheFactorsOfTheSamePaper) {
    for (const auto& paper : papers()) {
        const auto positions = positions_of(paper);
        for (std::size_t i = 0; i < 3; ++i) {
            const double factor =
                6 * paper.relative_rate * paper.percent[i] / 100 / positions[i].multiplicity;
            EXPECT_NEAR(factor / paper.factor[i], 1, rounding) << label(paper) << ", " << relation_names[i];
        }
    }
}

/// The model has seen these papers beside all others of the family and must still hold their factors.
/// Laboratories differ by 2-6 points on the larger isomers and by a factor of 2-3 on one below 5 %; for the
/// rate of benzyl chloride 0.30 and 0.71 stand side by side, a factor of 1.6 to either side of their middle.
TEST(PublishedFactors, AreHeldByTheModel) {
    for (const auto& paper : papers()) {
        const auto answer = step(named(paper.substrate), paper.reaction, at(paper.temperature_C));
        for (const auto& share : answer.shares) {
            const int locant = share.locants.front();
            const auto i = static_cast<std::size_t>(std::min(locant, 8 - locant) - 2);
            const double allowed = std::log10(paper.percent[i] < 5 ? 3 : 1.6);
            EXPECT_NEAR(share.log10_factor, std::log10(paper.factor[i]), allowed)
                << label(paper) << ", " << relation_names[i] << ": factor "
                << std::pow(10, share.log10_factor) << ", published " << paper.factor[i];
        }
        const auto percent = by_relation(answer);
        for (std::size_t i = 0; i < 3; ++i)
            EXPECT_NEAR(percent[i].value, paper.percent[i], 6) << label(paper) << ", " << relation_names[i];
    }
}

}  // namespace
}  // namespace isotally
