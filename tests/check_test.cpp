#include "isotally/check.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <map>
#include <numbers>

#include "knowledge.hpp"
#include "small_family.hpp"

namespace isotally {
namespace {

using testing::ElementsAre;

CheckedRecord record(bool complete, bool leading, double log_score,
                     const std::vector<CheckedIsomer>& isomers) {
    CheckedRecord out;
    out.complete = out.has_ratios = complete;
    out.leading_right = leading;
    out.log_score = log_score;
    out.isomers = isomers;
    return out;
}

TEST(Check, ScoresWorkedByHand) {
    std::vector<CheckedRecord> records{
        record(true, true, 1.0, {{"a", 60, 55, 50, 65}, {"b", 38, 44, 39, 48}, {"c", 2, 1, 0.5, 1.5}}),
        record(true, true, 0.5, {{"a", 99.5, 99.3, 98, 100}, {"b", 0.5, 0.7, 0.1, 3}}),
        record(false, false, -7.0, {{"a", 90, 10, 5, 15}})};
    records[1].substrate = records[2].substrate = "another";
    const auto s = score("by-hand", records);
    EXPECT_EQ(s.name, "by-hand");
    EXPECT_EQ(s.records, 3);
    EXPECT_DOUBLE_EQ(s.mean_absolute_error_points.value, (5 + 6 + 1 + 0.2) / 4)
        << "isomers above 1 % of complete records";
    EXPECT_DOUBLE_EQ(s.coverage_90.value, 2.0 / 4);
    EXPECT_DOUBLE_EQ(s.mean_width_points.value, (15 + 9 + 1 + 2) / 4.0);
    EXPECT_DOUBLE_EQ(s.leading_isomer_right.value, 2.0 / 3) << "over all records";
    EXPECT_DOUBLE_EQ(s.log_score.value, 0.75);
    EXPECT_EQ(s.compounds, 2);
    for (const auto& one :
         {s.mean_absolute_error_points, s.coverage_90, s.mean_width_points, s.leading_isomer_right}) {
        EXPECT_LE(one.low, one.value);
        EXPECT_GE(one.high, one.value);
    }
}

TEST(Check, IsomerCountsIfEitherFigureIsAboveOnePercent) {
    const auto s = score(
        "edge",
        {record(
            true, true, 0,
            {{"a", 0.5, 1.5, 0.5, 2}, {"b", 1.5, 0.5, 0.1, 1}, {"c", 1, 1, 0, 2}, {"d", 97, 97, 90, 99}})});
    EXPECT_DOUBLE_EQ(s.mean_absolute_error_points.value, 2.0 / 3);
    EXPECT_DOUBLE_EQ(s.coverage_90.value, 2.0 / 3);
}

TEST(Check, NothingToScoreIsNotANumber) {
    const auto none = score("none", {});
    EXPECT_EQ(none.records, 0);
    EXPECT_TRUE(std::isfinite(none.mean_absolute_error_points.value));
    EXPECT_TRUE(std::isfinite(none.log_score.value));
    const auto partial = score("partial", {record(false, true, 0, {{"a", 100, 60, 50, 70}})});
    EXPECT_DOUBLE_EQ(partial.leading_isomer_right.value, 1);
    EXPECT_TRUE(std::isfinite(partial.coverage_90.value));
}

const CheckedRecord& find(const std::vector<CheckedRecord>& records, const std::string& id) {
    return *std::find_if(records.begin(), records.end(), [&](const auto& one) { return one.id == id; });
}

TEST(Check, CompoundIsPredictedWithoutItsOwnFigures) {
    Tables small = small_tables(), other = small_tables();
    other.measurements[0].products[0].percent = 20;
    other.measurements[0].products[2].percent = 77;
    other.rates[0].value = 500;  // the factor of the same compound
    const auto one = check_family(prepare(small), "nitration", {});
    const auto two = check_family(prepare(other), "nitration", {});
    const auto &first = find(one, "toluene"), &second = find(two, "toluene");
    ASSERT_EQ(first.isomers.size(), 3u);
    for (std::size_t i = 0; i < 3; ++i) {
        EXPECT_NEAR(first.isomers[i].predicted_percent, second.isomers[i].predicted_percent, 1e-9);
        EXPECT_NEAR(first.isomers[i].low, second.isomers[i].low, 1e-6);
        EXPECT_NEAR(first.isomers[i].high, second.isomers[i].high, 1e-6);
    }
    EXPECT_NE(find(one, "nitrotoluene").isomers[0].predicted_percent,
              find(two, "nitrotoluene").isomers[0].predicted_percent)
        << "the others are predicted with it";
}

TEST(Check, RecordsAreTakenOver) {
    Tables small = small_tables();
    small.measurements[3].from.status = "practice";
    small.measurements.push_back(
        small_record("unused", "one", "Cc1ccccc1", {{ortho_nitrotoluene, 100, {}}}, false, "no"));
    const auto checked = check_family(prepare(small), "nitration", {});
    std::vector<std::string> ids;
    for (const auto& one : checked)
        ids.push_back(one.id);
    EXPECT_THAT(ids, ElementsAre("toluene", "nitrobenzene", "nitrotoluene")) << "neither practice nor use no";
    const auto& toluene = find(checked, "toluene");
    EXPECT_EQ(toluene.groups, 1);
    EXPECT_TRUE(toluene.complete);
    EXPECT_EQ(toluene.substrate, "Cc1ccccc1");
    EXPECT_EQ(toluene.source, "paper of toluene");
    EXPECT_EQ(toluene.status, "invented");
    double observed = 0, predicted = 0;
    for (const auto& isomer : toluene.isomers) {
        observed += isomer.observed_percent;
        predicted += isomer.predicted_percent;
        EXPECT_LE(isomer.low, isomer.predicted_percent);
        EXPECT_GE(isomer.high, isomer.predicted_percent);
        if (isomer.product == canonical_smiles(ortho_nitrotoluene, "test")) {
            EXPECT_DOUBLE_EQ(isomer.observed_percent, 57);
        }
    }
    EXPECT_NEAR(observed, 100, 1e-9);
    EXPECT_NEAR(predicted, 100, 1e-9);
    EXPECT_EQ(find(checked, "nitrotoluene").groups, 2);
    EXPECT_FALSE(find(checked, "nitrotoluene").complete);
}

TEST(Check, LogScoreIsTheNormalDensityOfTheLogRatio) {
    // One log-ratio (34 against 65 %): density of the normal distribution written out.
    const Knowledge known = prepare(small_tables());
    const auto checked = check_family(known, "nitration", {});
    const auto& record = find(checked, "nitrotoluene");
    const auto observed = std::find_if(known.observations.begin(), known.observations.end(),
                                       [](const auto& one) { return one.id == "nitrotoluene"; });
    const auto without = fit_family(known, "nitration", observed->compound);
    const auto at = site_factors(*without, observed->conditions, observed->compound, observed->sites, false);
    const auto n = at.mean.size();
    const auto place = [&](const char* product) {
        const auto read = answered(parse_arene(known.tables, known.groups, observed->compound), "compound");
        const auto found = sites(read, "*[N+](=O)[O-]");
        return static_cast<std::size_t>(std::find_if(found.begin(), found.end(),
                                                     [&](const Site& site) {
                                                         return site.product ==
                                                                canonical_smiles(product, "test");
                                                     }) -
                                        found.begin());
    };
    const auto six = place("Cc1c(N(=O)=O)cccc1N(=O)=O"), four = place("Cc1ccc(N(=O)=O)cc1N(=O)=O");
    const auto sd_of_share = [](double percent) { return std::hypot(1.2 / (percent * std::log(10)), 0.03); };
    const double variance = at.covariance[six * n + six] + at.covariance[four * n + four] -
                            2 * at.covariance[six * n + four] + std::pow(sd_of_share(34), 2) +
                            std::pow(sd_of_share(65), 2);
    const double off = std::log10(34.0 / 65) - (at.mean[six] - at.mean[four]);
    const double expected = -0.5 * (off * off / variance + std::log(2 * std::numbers::pi * variance));
    EXPECT_NEAR(record.log_score, expected, 1e-9);
    EXPECT_EQ(record.leading_right, at.mean[six] < at.mean[four]);
}

CheckedRecord in_set(const std::string& id, const std::string& reaction, const std::string& use, int groups,
                     double temperature_C = 25, double acid_percent = 80,
                     const std::string& substrate = "X") {
    CheckedRecord out;
    out.id = id;
    out.reaction = reaction;
    out.family = reaction_row(reaction).family;
    out.use = use;
    out.groups = groups;
    out.substrate = substrate;
    out.conditions = {isotally::reaction(reaction), temperature_C, acid_percent};
    return out;
}

TEST(Check, SetsOfAFamily) {
    const std::vector<CheckedRecord> records{
        in_set("a", "nitration-mixed-acid", "yes", 1),
        in_set("again", "nitration-mixed-acid", "yes", 1),
        in_set("hot", "nitration-mixed-acid", "yes", 1, 45),
        in_set("strong", "nitration-strong-acid", "yes", 1, 25, 95),
        in_set("weak", "nitration-mixed-acid", "weak", 2, 25, 80, "Y"),
        in_set("two", "nitration-nitric-acid", "yes", 2, 25, 0, "Z"),
        in_set("part", "nitration-mixed-acid", "partial", 2, 25, 80, "U"),
        in_set("bound", "nitration-mixed-acid", "bound", 1, 25, 80, "V"),
        in_set("salt", "nitration-nitronium-salt", "yes", 1, 25, 0, "W")};
    std::map<std::string, std::vector<std::string>> found;
    for (const auto& set : check_sets(tables(), records))
        for (const auto& one : set.records)
            found[set.name].push_back(one.id);
    const std::map<std::string, std::vector<std::string>> expected{
        {"nitration-mono", {"a", "again", "hot", "strong"}},
        {"nitration-poly", {"weak", "two"}},
        {"nitration-poly-yes", {"two"}},
        {"nitration-partial", {"part", "bound"}},
        {"nitration-temperature", {"a", "again", "hot"}},
        {"nitration-acid", {"a", "again", "hot", "strong"}},
        {"nitration-repeats", {"a", "again"}}};
    EXPECT_EQ(found, expected);
}

TEST(Check, ErrorAndReasonOfOneRecord) {
    EXPECT_DOUBLE_EQ(record_error(record(
                         true, true, 0, {{"a", 60, 55, 50, 65}, {"b", 40, 43, 39, 48}, {"c", 0, 0.9, 0, 2}})),
                     4);
    EXPECT_DOUBLE_EQ(record_error(record(false, true, 0, {{"a", 60, 55, 50, 65}})), 0)
        << "not all isomers are known";
    Tables told = tables();
    std::erase_if(told.cautions, [](const Caution& row) { return row.code.starts_with("additivity-"); });
    Caution row;
    row.code = "additivity-test";
    row.reactions = {"nitration"};
    row.substrate_smarts = "c-Cl";
    row.text = "chlorine's own";
    told.cautions.push_back(row);
    EXPECT_EQ(likely_reason(told, in_set("a", "nitration-mixed-acid", "yes", 1, 25, 80, "Clc1ccccc1")),
              "chlorine's own");
    EXPECT_EQ(likely_reason(told, in_set("a", "nitration-mixed-acid", "yes", 1, 25, 80, "Cc1ccccc1")), "");
    EXPECT_EQ(likely_reason(told, in_set("a", "acetylation-lewis-acid", "yes", 1, 25, 0, "Clc1ccccc1")), "");
}

TEST(Check, BetterThanTheFirstTrial) {
    // Nitration of di- and polysubstituted rings in nitric or sulfuric acid, each compound left out: a first
    // trial gave 8.8 points, leaders right in 29 of 36, and a coverage of 0.80 (design of the model, section
    // 5).
    auto checked = check_family(knowledge(), "nitration", {});
    std::erase_if(checked, [](const CheckedRecord& one) {
        return one.groups < 2 || one.reaction == "nitration-acetyl-nitrate" ||
               one.reaction == "nitration-nitronium-salt";
    });
    const auto s = score("nitration-poly", checked);
    ASSERT_GE(s.records, 36);
    EXPECT_LT(s.mean_absolute_error_points.value, 8.8);
    EXPECT_GT(s.leading_isomer_right.value, 29.0 / 36);
    EXPECT_GT(s.coverage_90.value, 0.80);
    EXPECT_LT(s.coverage_90.value, 0.98);
}

TEST(Check, AWrongMeasurementLowersTheScore) {
    // toluene's distribution turned upside down misleads every alkylbenzene that has to be predicted from it
    auto tables = parse_tables(read_table_folder(ISOTALLY_SOURCE_DIR "/tables"));
    for (auto& record : tables.measurements)
        if (record.substrate == "Cc1ccccc1" && record.products.size() == 3)
            std::swap(record.products.front().percent, record.products[1].percent);
    const auto misled = prepare(std::move(tables));
    const auto log_score = [](const std::vector<CheckedRecord>& records) {
        return score("nitration", records).log_score.value;
    };
    const auto right = check_family(knowledge(), "nitration", {.count = 50});
    const auto wrong = check_family(misled, knowledge(), "nitration", {.count = 50});
    EXPECT_LT(log_score(wrong), log_score(right) - 0.1);
}

}  // namespace
}  // namespace isotally
