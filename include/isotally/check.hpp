// How right the predictions are: every compound predicted with its own measurements left out.
#pragma once

#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

#include "isotally/factors.hpp"
#include "isotally/shares.hpp"

namespace isotally {

struct CheckedIsomer {
    std::string product;
    double observed_percent = 0, predicted_percent = 0, low = 0, high = 0;
};

struct CheckedRecord {
    std::string id, reaction, family, substrate, use, source, status;
    Conditions conditions;
    int groups = 0;         // on the ring before the step
    bool complete = false;  // all isomers are given: counts for the mean error
    bool leading_right = false;
    bool has_ratios = false;  // at least two isomers were measured
    double log_score = 0;     // ln of the predictive density of the observed log10-ratios, per ratio
    int limits = 0;           // isomers known only as "not more than"
    double limits_log_probability = 0;  // ln of the predicted probability that a limit holds, per limit
    std::vector<CheckedIsomer> isomers;
};

/// A score with the range that resampling the compounds gives it, nine times in ten.
using Score = Range;

/// Scores over records: contract.md names them.
struct Scores {
    std::string name;
    int records = 0, compounds = 0;
    Score mean_absolute_error_points, leading_isomer_right, coverage_90, mean_width_points, log_score;
};

/// What is left out to predict a record: all on its compound, or the record alone (its compound in other
/// conditions stays, so that what conditions do is put to the test).
enum class LeftOut { compound, record };

/// All literature records of a family with use other than no (rows of practice teach but are not scored),
/// each predicted without any measurement on its compound. The bounds and the shares behind rates stay as the
/// whole of the tables made them.
std::vector<CheckedRecord> check_family(const Knowledge& knowledge, std::string_view family,
                                        const Draws& draws, LeftOut left_out = LeftOut::compound);

/// The same with one knowledge to learn from and another whose records are scored (for trying what a part of
/// the model brings).
std::vector<CheckedRecord> check_family(const Knowledge& taught, const Knowledge& scored,
                                        std::string_view family, const Draws& draws,
                                        LeftOut left_out = LeftOut::compound);

/// A relative rate of a ring with two or more groups, predicted without any measurement on its compound.
struct CheckedRate {
    std::string id, substrate;
    double log10_observed = 0, log10_predicted = 0;
    double log_score = 0;  // ln of the predictive density of the logarithm
};
std::vector<CheckedRate> check_rates(const Knowledge& taught, const Knowledge& scored,
                                     std::string_view family);

/// Errors, coverage and width are over the isomers observed or predicted above 1 % in complete records, the
/// log score over complete records, the leading isomer over all.
Scores score(std::string_view name, const std::vector<CheckedRecord>& records);

/// The sets of one family: FAMILY-mono, FAMILY-poly (use yes or weak, one or more groups), FAMILY-poly-yes,
/// FAMILY-partial (records that count for the leading isomer only) and, where there are any, the records that
/// form a series: FAMILY-temperature, FAMILY-acid, FAMILY-repeats. Conditions of nitronium salts stay out.
struct CheckSet {
    std::string name;
    std::vector<CheckedRecord> records;
};
std::vector<CheckSet> check_sets(const Tables& tables, const std::vector<CheckedRecord>& records);

/// Mean absolute error of one record, in points.
double record_error(const CheckedRecord& record);

/// Why additivity is known to fail on this compound (rows "additivity-..." of cautions.csv); may be empty.
std::string likely_reason(const Tables& tables, const CheckedRecord& record);

}  // namespace isotally
