// States of groups, resolved once.
#pragma once

#include <vector>

#include "isotally/factors.hpp"

namespace isotally::factors {

std::vector<GroupState> resolve_states(const Tables& tables);

}  // namespace isotally::factors
