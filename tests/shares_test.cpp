#include "isotally/shares.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <numeric>

#include "knowledge.hpp"

namespace isotally {
namespace {

using testing::DoubleNear;
using testing::ElementsAre;

const std::vector<std::pair<const char*, const char*>>& questions() {
    static const std::vector<std::pair<const char*, const char*>> asked{
        {"toluene", "nitration-mixed-acid"},       {"chlorobenzene", "sulfonation-sulfuric-acid"},
        {"anisole", "bromination-acetic-acid"},    {"Cc1cccc(C)c1", "nitration-mixed-acid"},
        {"nitrobenzene", "nitration-strong-acid"}, {"tert-butylbenzene", "acetylation-lewis-acid"},
        {"biphenyl", "nitration-nitric-acid"},     {"Cc1ccc(-c2ccccc2)cc1", "bromination-lewis-acid"},
        {"acetanilide", "nitration-mixed-acid"},   {"Cc1ccc([N+](=O)[O-])cc1", "nitration-mixed-acid"}};
    return asked;
}

double width(const Range& range) {
    return range.high - range.low;
}

PlacedSite place(int position, int multiplicity) {
    PlacedSite site;
    site.groups = {group("Me"), -1, -1, -1, -1, -1};
    site.position = position;
    site.multiplicity = multiplicity;
    site.tag = position;
    return site;
}

/// Tables whose laboratories scatter only as told.
Tables with_scatter(double points, double log10) {
    Tables changed = tables();
    for (auto& row : changed.model) {
        if (row.quantity == "laboratory_sd_points")
            row.figure.value = points;
        if (row.quantity == "laboratory_sd_log10")
            row.figure.value = log10;
    }
    return changed;
}

constexpr double normal_95 = 1.6448536269514722;  // upper 5 % point of the normal distribution

TEST(Shares, PercentFromPublishedPartialRateFactors) {
    // Toluene in nitric acid, 45 C: f = 42, 2.5, 58; 56.5 / 3.5 / 40 % and 24.5 times benzene. Cohn, Hughes,
    // Jones and Peeling, Nature 1952, 169, 291, as tabulated by Stock and Brown, Adv. Phys. Org. Chem. 1963,
    // 1, 35.
    const std::vector<PlacedSite> sites{place(1, 2), place(2, 2), place(3, 1)};
    const std::vector<double> log10_f{std::log10(42), std::log10(2.5), std::log10(58)};
    EXPECT_THAT(isomer_percents(sites, log10_f),
                ElementsAre(DoubleNear(56.5, 1), DoubleNear(3.5, 0.2), DoubleNear(40, 1)));
    SiteFactors factors;
    factors.mean = log10_f;
    factors.covariance.assign(9, 0);
    const auto drawn = draw_shares(with_scatter(0, 0), "nitration", sites, factors, {});
    EXPECT_NEAR(drawn.relative_rate.value, 24.5, 1e-9);
    ASSERT_TRUE(drawn.ortho_para_ratio);
    EXPECT_NEAR(drawn.ortho_para_ratio->value, 84.0 / 58, 1e-9);
}

TEST(Shares, FarFactorsNeitherOverflowNorVanish) {
    const std::vector<PlacedSite> sites{place(1, 2), place(2, 2), place(3, 1)};
    for (const double shift : {-400.0, 0.0, 400.0}) {
        const auto percent = isomer_percents(sites, {shift, shift, shift});
        EXPECT_THAT(percent, ElementsAre(DoubleNear(40, 1e-9), DoubleNear(40, 1e-9), DoubleNear(20, 1e-9)));
    }
    const auto alone = isomer_percents(sites, {0, -400, -400});
    EXPECT_THAT(alone, ElementsAre(DoubleNear(100, 1e-9), DoubleNear(0, 1e-9), DoubleNear(0, 1e-9)));
}

TEST(Shares, IntervalOfTwoIsomersIsThatOfTheLogisticNormal) {
    // log10 of the ratio is normal with mean 0.3 and variance 0.04 + 0.09 - 2 * 0.02.
    const std::vector<PlacedSite> sites{place(1, 2), place(2, 2)};
    SiteFactors factors;
    factors.mean = {0.3, 0.0};
    factors.covariance = {0.04, 0.02, 0.02, 0.09};
    const auto percent_at = [](double ratio) { return 100 / (1 + std::pow(10, -ratio)); };
    const Draws many{0.90, 40000, 3};
    const auto drawn = draw_shares(with_scatter(0, 0), "nitration", sites, factors, many);
    const double sd = std::sqrt(0.09);
    EXPECT_NEAR(drawn.percent[0].value, percent_at(0.3), 1e-9);
    EXPECT_NEAR(drawn.percent[0].low, percent_at(0.3 - normal_95 * sd), 1);
    EXPECT_NEAR(drawn.percent[0].high, percent_at(0.3 + normal_95 * sd), 1);

    // A laboratory's own scatter, 0.05 in log10 of each share, on a posterior that is certain.
    factors.covariance.assign(4, 0);
    const auto scattered = draw_shares(with_scatter(0, 0.05), "nitration", sites, factors, many);
    EXPECT_NEAR(scattered.percent[0].low, percent_at(0.3 - normal_95 * 0.05 * std::sqrt(2)), 0.3);
    EXPECT_NEAR(scattered.percent[0].high, percent_at(0.3 + normal_95 * 0.05 * std::sqrt(2)), 0.3);
}

TEST(Shares, IntervalOfTheRateIsThatOfTheLogNormal) {
    SiteFactors factors;
    factors.mean = {1.0};
    factors.covariance = {0.04};
    const auto drawn = draw_shares(tables(), "nitration", {place(1, 3)}, factors, {0.90, 40000, 5});
    EXPECT_NEAR(drawn.relative_rate.value, 5, 1e-9);
    EXPECT_NEAR(std::log10(drawn.relative_rate.low), std::log10(5) - normal_95 * 0.2, 0.01);
    EXPECT_NEAR(std::log10(drawn.relative_rate.high), std::log10(5) + normal_95 * 0.2, 0.01);
    EXPECT_NEAR(drawn.percent[0].low, 100, 1e-9);
    EXPECT_NEAR(drawn.percent[0].high, 100, 1e-9);
}

TEST(Shares, SumToHundredInOrderInsideTheirIntervals) {
    for (const auto& [molecule, id] : questions()) {
        const auto answer = step(molecule, id);
        double sum = 0, before = 100;
        for (const auto& share : answer.shares) {
            sum += share.percent.value;
            EXPECT_LE(share.percent.value, before) << molecule;
            before = share.percent.value;
            EXPECT_LE(share.percent.low, share.percent.value) << molecule;
            EXPECT_GE(share.percent.high, share.percent.value) << molecule;
            EXPECT_GE(share.percent.low, 0) << molecule;
            EXPECT_LE(share.percent.high, 100 + 1e-9) << molecule;
            EXPECT_GT(share.log10_factor_sd, 0) << molecule;
        }
        EXPECT_NEAR(sum, 100, 1e-9) << molecule;
        EXPECT_LE(answer.relative_rate.low, answer.relative_rate.value);
        EXPECT_GE(answer.relative_rate.high, answer.relative_rate.value);
    }
}

TEST(Shares, SharesAndRateFollowFromTheFactors) {
    for (const auto& [molecule, id] : questions()) {
        const auto answer = step(molecule, id);
        double total = 0;
        for (const auto& share : answer.shares)
            total += share.site.multiplicity * std::pow(10, share.log10_factor);
        for (const auto& share : answer.shares)
            EXPECT_NEAR(share.percent.value,
                        100 * share.site.multiplicity * std::pow(10, share.log10_factor) / total, 1e-9)
                << molecule;
        EXPECT_NEAR(answer.relative_rate.value / (total / 6), 1, 1e-9) << molecule;
    }
}

TEST(Shares, SameSeedSameNumbersOtherSeedNearlySo) {
    for (const auto& [molecule, id] : questions()) {
        const auto one = step(molecule, id), again = step(molecule, id);
        const auto other = step(molecule, id, {{}, {}, {0.90, 1000, 2}});
        bool differs = false;
        for (std::size_t i = 0; i < one.shares.size(); ++i) {
            const auto &a = one.shares[i].percent, &b = again.shares[i].percent, &c = other.shares[i].percent;
            EXPECT_EQ(a.low, b.low);
            EXPECT_EQ(a.high, b.high);
            EXPECT_EQ(a.value, c.value) << "the value itself is not drawn";
            EXPECT_NEAR(a.low, c.low, 0.15 * width(a) + 0.1) << molecule;
            EXPECT_NEAR(a.high, c.high, 0.15 * width(a) + 0.1) << molecule;
            differs |= a.low != c.low;
        }
        EXPECT_TRUE(differs) << molecule;
    }
}

TEST(Shares, HigherLevelWidensEveryInterval) {
    for (const auto& [molecule, id] : questions()) {
        const auto half = step(molecule, id, {{}, {}, {0.50, 1000, 1}});
        const auto most = step(molecule, id, {{}, {}, {0.90, 1000, 1}});
        const auto nearly_all = step(molecule, id, {{}, {}, {0.99, 1000, 1}});
        for (std::size_t i = 0; i < half.shares.size(); ++i) {
            EXPECT_LT(width(half.shares[i].percent), width(most.shares[i].percent)) << molecule;
            EXPECT_LT(width(most.shares[i].percent), width(nearly_all.shares[i].percent)) << molecule;
        }
        EXPECT_LT(width(half.relative_rate), width(nearly_all.relative_rate)) << molecule;
    }
}

TEST(Shares, OneDrawIsEnoughForAnAnswer) {
    const auto answer = step("toluene", "nitration-mixed-acid", {{}, {}, {0.90, 1, 1}});
    for (const auto& share : answer.shares)
        EXPECT_TRUE(std::isfinite(share.percent.low) && std::isfinite(share.percent.high));
}

TEST(Shares, BenzeneIsOne) {
    int answers = 0;
    for (const auto& row : tables().reactions) {
        const auto floor = row.figures.find("floor");
        if (floor != row.figures.end() && floor->second.value > 1)
            continue;  // for rings richer than benzene only
        const auto answer = step("benzene", row.id);
        ++answers;
        ASSERT_EQ(answer.shares.size(), 1u) << row.id;
        EXPECT_EQ(answer.shares[0].site.multiplicity, 6);
        EXPECT_NEAR(answer.shares[0].percent.value, 100, 1e-9);
        EXPECT_NEAR(answer.relative_rate.value, 1, 1e-12) << row.id;
        EXPECT_NEAR(answer.relative_rate.low, 1, 1e-4) << row.id;
        EXPECT_NEAR(answer.relative_rate.high, 1, 1e-4) << row.id;
        EXPECT_FALSE(answer.ortho_para_ratio) << "no group to be ortho to";
    }
    EXPECT_GE(answers, 25);
}

TEST(Shares, OrthoParaRatioOfRingsWithOneGroup) {
    const auto toluene = step("toluene", "nitration-mixed-acid");
    ASSERT_TRUE(toluene.ortho_para_ratio);
    EXPECT_NEAR(toluene.ortho_para_ratio->value,
                share_of(toluene, "Cc1ccccc1[N+](=O)[O-]").value /
                    share_of(toluene, "Cc1ccc([N+](=O)[O-])cc1").value,
                1e-9);
    EXPECT_LT(toluene.ortho_para_ratio->low, toluene.ortho_para_ratio->value);
    EXPECT_GT(toluene.ortho_para_ratio->high, toluene.ortho_para_ratio->value);
    EXPECT_TRUE(step("biphenyl", "nitration-nitric-acid").ortho_para_ratio)
        << "two equal rings, one group each";
    EXPECT_FALSE(step("Cc1cccc(C)c1", "nitration-mixed-acid").ortho_para_ratio);
    EXPECT_FALSE(step("Cc1ccc(-c2ccccc2)cc1", "nitration-mixed-acid").ortho_para_ratio);
    EXPECT_FALSE(step("O=C(Oc1ccccc1)c1ccccc1", "nitration-mixed-acid").ortho_para_ratio)
        << "two unequal rings";
}

TEST(Shares, LocantsAndNamesAreThoseOfTheNomenclature) {
    // The example of the outside description of "step": toluene, 2-nitrotoluene at 2 and 6.
    const auto answer = step("toluene", "nitration-mixed-acid");
    EXPECT_EQ(answer.name, "toluene");
    const auto& first = answer.shares.front();
    EXPECT_EQ(first.site.product, canonical_smiles("Cc1ccccc1[N+](=O)[O-]", "test"));
    EXPECT_THAT(first.locants, ElementsAre(2, 6));
    EXPECT_EQ(first.product_name, "2-nitrotoluene");
    EXPECT_EQ(first.product_systematic_name, "1-methyl-2-nitrobenzene");
    std::vector<int> all;
    for (const auto& share : step("Clc1ccc(Cl)c(C)c1", "nitration-mixed-acid").shares)
        all.insert(all.end(), share.locants.begin(), share.locants.end());
    EXPECT_THAT(all, testing::UnorderedElementsAre(3, 5, 6)) << "1,4-dichloro-2-methylbenzene";
    EXPECT_EQ(name_molecule(tables(), arene("aniline")).name, "aniline");
    EXPECT_EQ(name_molecule(tables(), arene("Cc1ccc([N+](=O)[O-])cc1")).systematic,
              "1-methyl-4-nitrobenzene");
}

TEST(Shares, ProductsAreWrittenAsFed) {
    for (const auto& share : step("aniline", "nitration-strong-acid").shares)
        EXPECT_EQ(share.site.product.find("[NH3+]"), std::string::npos);
    for (const auto& share : step("acetophenone", "bromination-excess-lewis-acid").shares)
        EXPECT_EQ(share.site.product.find("Al"), std::string::npos);
}

TEST(Shares, OwnMeasurementRulesTheAnswerAndIsNamed) {
    const auto toluene = step("toluene", "nitration-mixed-acid");
    EXPECT_FALSE(toluene.measured_by.empty());
    EXPECT_TRUE(step("CCCCCCCCc1ccccc1", "nitration-mixed-acid").measured_by.empty());
    // Against the same laboratories' figures left out, the interval is wider.
    const Arene read = arene("toluene");
    const auto conditions =
        answered(choose_conditions(tables(), reaction("nitration-mixed-acid"), {}, {}), "toluene");
    const auto without = leave_out(model("nitration"), read.smiles);
    const auto predicted = answered(answer_step(knowledge(), *without, read, conditions, {}), "toluene");
    EXPECT_TRUE(predicted.measured_by.empty());
    EXPECT_LT(width(toluene.shares[0].percent), width(predicted.shares[0].percent));
}

}  // namespace
}  // namespace isotally
