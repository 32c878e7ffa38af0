#include "states.hpp"

#include <algorithm>
#include <tuple>

namespace isotally {
namespace {

/// "NH2", "kind:acceptor" or "principal:ketone" (the text before a further colon).
bool is_group(const Substituent& group, const std::string& pattern) {
    if (pattern == group.id)
        return true;
    const std::string principal = group.principal.substr(0, group.principal.find(':'));
    return pattern == "kind:" + group.kind || (!principal.empty() && pattern == "principal:" + principal);
}

}  // namespace

namespace factors {

std::vector<GroupState> resolve_states(const Tables& tables) {
    std::vector<GroupState> states;
    for (std::size_t r = 0; r < tables.reactions.size(); ++r)
        for (const auto& row : tables.states) {
            if (!applies_to(row.reactions, tables.reactions[r]))
                continue;
            for (std::size_t g = 0; g < tables.substituents.size(); ++g)
                if (is_group(tables.substituents[g], row.group))
                    states.push_back({static_cast<int>(r), static_cast<int>(g),
                                      find_substituent(tables, row.state), row.acid_from, row.acid_to,
                                      row.both_forms != "no"});
        }
    std::stable_sort(states.begin(), states.end(), [](const GroupState& a, const GroupState& b) {
        return std::tie(a.reaction, a.group) < std::tie(b.reaction, b.group);
    });
    return states;
}

}  // namespace factors

const GroupState* state_of(const Knowledge& knowledge, const Conditions& conditions, int group) {
    const auto key = std::pair(conditions.reaction, group);
    auto at = std::lower_bound(knowledge.states.begin(), knowledge.states.end(), key,
                               [](const GroupState& state, const auto& wanted) {
                                   return std::pair(state.reaction, state.group) < wanted;
                               });
    for (; at != knowledge.states.end() && std::pair(at->reaction, at->group) == key; ++at) {
        const bool any_acid = at->acid_from == 0 && at->acid_to == 0;
        if (any_acid || (conditions.acid_percent >= at->acid_from && conditions.acid_percent <= at->acid_to))
            return &*at;
    }
    return nullptr;
}

RingGroups in_state(const Knowledge& knowledge, const Conditions& conditions, const RingGroups& groups) {
    RingGroups changed = groups;
    for (auto& group : changed)
        if (group >= 0)
            if (const auto* state = state_of(knowledge, conditions, group))
                group = state->state;
    return changed;
}

}  // namespace isotally
