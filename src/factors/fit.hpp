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

}  // namespace isotally::factors
