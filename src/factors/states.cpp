#include <algorithm>

#include "isotally/factors.hpp"

namespace isotally {
namespace {

/// "NH2", "kind:acceptor" or "principal:ketone" (the text before a further colon).
bool is_group(const Substituent& group, const std::string& pattern) {
    if (pattern == group.id) return true;
    const std::string principal = group.principal.substr(0, group.principal.find(':'));
    return pattern == "kind:" + group.kind || (!principal.empty() && pattern == "principal:" + principal);
}

}  // namespace

RingGroups in_state(const Tables& tables, const Conditions& conditions, const RingGroups& groups) {
    RingGroups changed = groups;
    const auto& reaction = tables.reactions[static_cast<std::size_t>(conditions.reaction)];
    for (auto& group : changed) {
        if (group < 0) continue;
        const auto& fed = tables.substituents[static_cast<std::size_t>(group)];
        for (const auto& state : tables.states) {
            if ((state.reaction != reaction.id && state.reaction != reaction.family) || !is_group(fed, state.group)) continue;
            const bool any_acid = state.acid_from == 0 && state.acid_to == 0;
            if (!any_acid && (conditions.acid_percent < state.acid_from || conditions.acid_percent > state.acid_to))
                continue;
            const int found = find_substituent(tables, state.state);
            if (found >= 0) group = found;
            break;
        }
    }
    return changed;
}

}  // namespace isotally
