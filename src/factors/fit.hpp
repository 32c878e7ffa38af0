// Inside of the family model.
#pragma once

#include <map>
#include <memory>
#include <string_view>
#include <vector>

#include "terms.hpp"

namespace isotally::factors {

/// Fits a family to the observations marked for use.
std::shared_ptr<const FamilyModel> fit_rows(const Knowledge& knowledge, std::string_view family,
                                            const std::vector<bool>& use);

/// Posterior mean and variance of what a row observes, without its noise.
struct RowMarginal {
    double mean = 0, variance = 0;
};
RowMarginal row_marginal(const FamilyModel& model, const Observation& observation, const ObservedRow& row);

}  // namespace isotally::factors
