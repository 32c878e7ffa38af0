// Observations that are not linear and Gaussian, made so with the family's own predictions.
#pragma once

#include "isotally/factors.hpp"

namespace isotally::factors {

/// Rates: log10 k = c + sum of share * log10 F with the predicted shares. Bounds: x <= c becomes the Gaussian
/// observation that gives x the mean and variance of its marginal cut off (softly) at c, by expectation
/// propagation; a bound far above what is expected anyway becomes one that says nothing.
void make_linear(Knowledge& knowledge);

}  // namespace isotally::factors
