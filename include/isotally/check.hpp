// How right the predictions are: every compound predicted with its own measurements left out.
#pragma once

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
    std::string id, reaction, substrate, use, source, status;
    int groups = 0;         // on the ring before the step
    bool complete = false;  // all isomers are given: counts for the mean error
    bool leading_right = false;
    double log_score = 0;  // ln of the predictive density of the observed log10-ratios, per ratio
    std::vector<CheckedIsomer> isomers;
};

/// Scores over records: contract.md names them.
struct Scores {
    std::string name;
    int records = 0;
    double mean_absolute_error_points = 0, leading_isomer_right = 0, coverage_90 = 0, mean_width_points = 0,
           log_score = 0;
};

/// All literature records of a family with use other than no (rows of practice teach but are not scored),
/// each predicted without any measurement on its compound.
std::vector<CheckedRecord> check_family(const Knowledge& knowledge, std::string_view family,
                                        const Draws& draws);

/// Errors, coverage and width are over the isomers observed or predicted above 1 % in complete records; the
/// leading isomer counts over all records.
Scores score(std::string_view name, const std::vector<CheckedRecord>& records);

}  // namespace isotally
