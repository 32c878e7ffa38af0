#include "isotally/names.hpp"

#include <algorithm>

#include "names/parts.hpp"

namespace isotally {
namespace name_parts {
namespace {

void cite(std::vector<Cited>& list, const std::string& word, int position, bool on_nitrogen = false) {
    auto at = std::ranges::find(list, word, &Cited::word);
    if (at == list.end())
        at = list.insert(at, Cited{word, {}, {}});
    (on_nitrogen ? at->nitrogen : at->ring).push_back(position);
}

void alphabetise(std::vector<Cited>& list) {
    std::ranges::sort(list, {}, [](const Cited& c) { return std::pair(alphabet_key(c.word), c.word); });
}

const Substituent* group_at(const Tables& tables, const RingGroups& groups, int position) {
    const int index = groups[static_cast<std::size_t>(position)];
    return index < 0 ? nullptr : &tables.substituents.at(static_cast<std::size_t>(index));
}

std::vector<int> positions_of(const Tables& tables, const RingGroups& groups, std::string_view prefix) {
    std::vector<int> out;
    for (int position = 0; position < 6; ++position)
        if (const Substituent* group = group_at(tables, groups, position); group && group->prefix == prefix)
            out.push_back(position);
    return out;
}

// Every group but the principal ones is cited as a prefix; false where one has none.
bool cite_prefixes(const Tables& tables, const RingGroups& groups, Plan& plan) {
    for (int position = 0; position < 6; ++position) {
        const Substituent* group = group_at(tables, groups, position);
        if (!group || std::ranges::find(plan.principal, position) != plan.principal.end())
            continue;
        if (group->prefix.empty())
            return false;
        cite(plan.cited, group->prefix, position);
    }
    alphabetise(plan.cited);
    return true;
}

/// Numberings that are still in the running.
class Numberings {
public:
    Numberings() {
        for (std::size_t start = 0; start < 6; ++start)
            for (const std::size_t step : {1u, 5u}) {
                Locants locants{};
                for (std::size_t i = 0; i < 6; ++i)
                    locants[(start + step * i) % 6] = static_cast<int>(i) + 1;
                left_[count_++] = locants;
            }
    }

    /// Those that give these positions the lowest locants go on. A set of locants is a number whose digit for
    /// locant 1 comes first: the lower set has the larger number, as all sets hold equally many.
    void lowest(const std::vector<int>& positions) {
        if (count_ == 1 || positions.empty())
            return;
        std::array<unsigned, 12> set{};
        unsigned best = 0;
        for (std::size_t i = 0; i < count_; ++i) {
            for (const int position : positions)
                set[i] += 1u << (4 * (6 - left_[i][static_cast<std::size_t>(position)]));
            best = std::max(best, set[i]);
        }
        std::size_t kept = 0;
        for (std::size_t i = 0; i < count_; ++i)
            if (set[i] == best)
                left_[kept++] = left_[i];
        count_ = kept;
    }

    const Locants& first() const { return left_[0]; }

private:
    std::array<Locants, 12> left_{};
    std::size_t count_ = 0;
};

std::vector<Cited> by_id(const Tables& tables, const RingGroups& groups) {
    std::vector<Cited> out;
    for (int position = 0; position < 6; ++position)
        if (const Substituent* group = group_at(tables, groups, position))
            cite(out, group->id, position);
    std::ranges::sort(out, {}, &Cited::word);
    return out;
}

std::vector<int> together(const std::vector<Cited>& list, std::vector<int> Cited::*where) {
    std::vector<int> all;
    for (const Cited& cited : list)
        all.insert(all.end(), (cited.*where).begin(), (cited.*where).end());
    return all;
}

Locants number_ring(const Tables& tables, const RingGroups& groups, const Plan& plan) {
    const std::vector<Cited> ids = by_id(tables, groups);
    Numberings numberings;
    const auto lowest_each = [&](const std::vector<Cited>& list, std::vector<int> Cited::*where) {
        for (const Cited& cited : list)
            numberings.lowest(cited.*where);
    };
    numberings.lowest(plan.principal);
    numberings.lowest(together(plan.cited, &Cited::ring));
    numberings.lowest(together(plan.cited, &Cited::nitrogen));
    lowest_each(plan.cited, &Cited::ring);
    lowest_each(plan.cited, &Cited::nitrogen);
    lowest_each(plan.esters, &Cited::ring);
    numberings.lowest(together(ids, &Cited::ring));
    lowest_each(ids, &Cited::ring);
    return numberings.first();
}

// A ring on a ring and an azo group are parents of their own, which only senior suffixes overrule.
bool beyond_the_rules(const Plan& plan, std::size_t count) {
    if (plan.family >= 0 && families()[static_cast<std::size_t>(plan.family)].single &&
        plan.principal.size() > 1)
        return true;
    for (const Cited& cited : plan.cited) {
        if (cited.word == "phenyl" && !cited.ring.empty())
            return true;
        if (cited.word.ends_with("diazenyl") && plan.family < 0 && count > 1)
            return true;
    }
    return false;
}

std::string principal_of(const Substituent& group) {
    if (!group.principal.empty() || group.prefix.empty())
        return group.principal;
    for (const Stem& alias : aliases())
        if (alias.prefix == group.prefix)
            return std::string(alias.stem);
    return "";
}

}  // namespace

int family_of(const Substituent& group) {
    const std::string principal = principal_of(group);
    const std::string_view whole = principal, head = whole.substr(0, whole.find(':'));
    std::string prefix = group.prefix;
    std::erase_if(prefix, [](char c) { return c == '(' || c == ')'; });
    const auto all = families();
    for (std::string_view wanted : {whole, head})
        for (std::size_t i = 0; i < all.size(); ++i)
            if (!wanted.empty() && all[i].principal == wanted)
                return static_cast<int>(i);
    for (std::size_t i = 0; i < all.size(); ++i)
        if (!prefix.empty() && all[i].prefix == prefix)
            return static_cast<int>(i);
    return whole.empty() ? -1 : -2;
}

std::string ester_word(const Substituent& group) {
    const std::string principal = principal_of(group);
    const auto colon = principal.find("ester:");
    return colon == std::string::npos ? "" : principal.substr(colon + std::string_view("ester:").size());
}

std::vector<std::string> nitrogen_words(const Substituent& group) {
    std::vector<std::string> out;
    const std::string principal = principal_of(group);
    const auto colon = principal.find(':');
    if (colon == std::string::npos || !principal.substr(colon + 1).starts_with("N"))
        return out;
    std::string rest = "-" + principal.substr(colon + 1);
    while (rest.starts_with("-N")) {
        const auto dash = rest.find('-', 1);
        if (dash == std::string::npos)
            break;
        const auto count = static_cast<std::size_t>(std::ranges::count(rest.substr(0, dash), 'N'));
        const auto end = std::min(rest.find("-N", dash), rest.size());
        std::string word = rest.substr(dash + 1, end - dash - 1);
        if (count > 1 && word.starts_with(multiplier(count)))
            word.erase(0, multiplier(count).size());
        out.insert(out.end(), count, word);
        rest.erase(0, end);
    }
    std::ranges::sort(out);
    return out;
}

std::optional<Plan> systematic_plan(const Tables& tables, const RingGroups& groups) {
    Plan plan;
    std::size_t count = 0;
    std::array<int, 6> family{-1, -1, -1, -1, -1, -1};
    for (int position = 0; position < 6; ++position) {
        const Substituent* group = group_at(tables, groups, position);
        if (!group)
            continue;
        const int found = family[static_cast<std::size_t>(position)] = family_of(*group);
        if (found == -2)
            return {};
        if (found >= 0 && (plan.family < 0 || found < plan.family))
            plan.family = found;
        ++count;
    }
    const std::vector<int> phenyls = positions_of(tables, groups, "phenyl");
    if (plan.family < 0 && phenyls.size() == 1) {
        plan.stem = "-1,1'-biphenyl";
        plan.principal = phenyls;
    }
    for (int position = 0; plan.family >= 0 && position < 6; ++position)
        if (family[static_cast<std::size_t>(position)] == plan.family) {
            const Substituent& group = *group_at(tables, groups, position);
            plan.principal.push_back(position);
            for (const std::string& word : nitrogen_words(group))
                cite(plan.cited, word, position, true);
            if (const std::string word = ester_word(group); !word.empty())
                cite(plan.esters, word, position);
        }
    alphabetise(plan.esters);
    if (!cite_prefixes(tables, groups, plan) || beyond_the_rules(plan, count))
        return {};
    return plan;
}

std::optional<Plan> general_plan(const Tables& tables, const RingGroups& groups, const Plan& systematic) {
    if (systematic.family >= 0) {
        const Family& family = families()[static_cast<std::size_t>(systematic.family)];
        if (systematic.principal.size() != 1)
            return {};
        Plan plan = systematic;
        if (!family.general.empty())
            plan.stem = family.general;
        else if (!family.aryl && family.retained.empty())
            plan.stem = "benzene" + multiplied_suffix(family, 1);
        else
            return {};
        return plan;
    }
    for (const Stem& parent : general_stems())
        if (const std::vector<int> at = positions_of(tables, groups, parent.prefix); at.size() == 1) {
            Plan plan;
            plan.stem = parent.stem;
            plan.principal = at;
            if (cite_prefixes(tables, groups, plan))
                return plan;
        }
    return {};
}

}  // namespace name_parts

using namespace name_parts;

RingName name_ring(const Tables& tables, const RingGroups& groups) {
    RingName out;
    const auto plan = systematic_plan(tables, groups);
    out.locants = number_ring(tables, groups, plan.value_or(Plan{}));
    if (!plan)
        return out;
    std::string systematic = compose(*plan, out.locants);
    const std::vector<Cited> ids = by_id(tables, groups);
    if (ids.size() == 1) {
        const std::string& prefix = group_at(tables, groups, ids[0].ring[0])->prefix;
        if (ids[0].ring.size() == 1) {
            for (const Stem& whole : whole_names())
                if (whole.prefix == prefix)
                    systematic = whole.stem;
        } else if (ids[0].ring.size() == 2 && prefix == "methyl") {
            const auto at = sorted_locants(ids[0].ring, out.locants);
            systematic = "1," + std::to_string(at[1]) + "-xylene";
        }
    }
    if (const auto trade = general_plan(tables, groups, *plan))
        if (std::string name = compose(*trade, number_ring(tables, groups, *trade)); name != systematic)
            out.general = std::move(name);
    out.systematic = std::move(systematic);
    return out;
}

}  // namespace isotally
