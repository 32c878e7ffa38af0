#include "isotally/tables.hpp"

#include <algorithm>
#include <utility>

#include "tables/faults.hpp"

namespace isotally {

namespace {

constexpr std::size_t max_word = 80;

template <class Entry>
int index_of(const std::vector<Entry>& entries, std::string_view id) {
    const auto found =
        std::find_if(entries.begin(), entries.end(), [&](const Entry& entry) { return entry.id == id; });
    return found == entries.end() ? -1 : static_cast<int>(found - entries.begin());
}

std::string lower(std::string_view text) {
    std::string result(text);
    for (char& c : result)
        if (c >= 'A' && c <= 'Z')
            c = static_cast<char>(c - 'A' + 'a');
    return result;
}

/// Insertions, deletions, changes and swaps of neighbours (optimal string alignment).
std::size_t edit_distance(const std::string& a, const std::string& b) {
    std::vector<std::size_t> before(b.size() + 1), last(b.size() + 1), now(b.size() + 1);
    for (std::size_t j = 0; j <= b.size(); ++j)
        last[j] = j;
    for (std::size_t i = 1; i <= a.size(); ++i) {
        now[0] = i;
        for (std::size_t j = 1; j <= b.size(); ++j) {
            now[j] = std::min({last[j] + 1, now[j - 1] + 1, last[j - 1] + (a[i - 1] == b[j - 1] ? 0u : 1u)});
            if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1])
                now[j] = std::min(now[j], before[j - 2] + 1);
        }
        before = std::exchange(last, now);
    }
    return last[b.size()];
}

}  // namespace

int find_substituent(const Tables& tables, std::string_view id) {
    return index_of(tables.substituents, id);
}

int find_reaction(const Tables& tables, std::string_view id) {
    return index_of(tables.reactions, id);
}

std::vector<std::string> families_of(const Tables& tables) {
    std::vector<std::string> families;
    for (const auto& reaction : tables.reactions)
        if (std::find(families.begin(), families.end(), reaction.family) == families.end())
            families.push_back(reaction.family);
    return families;
}

bool applies_to(const std::vector<std::string>& reactions, std::string_view id, std::string_view family) {
    return std::any_of(reactions.begin(), reactions.end(),
                       [&](const std::string& word) { return word == "*" || word == id || word == family; });
}

bool applies_to(const std::vector<std::string>& reactions, const Reaction& reaction) {
    return applies_to(reactions, reaction.id, reaction.family);
}

const Figure& model_figure(const Tables& tables, std::string_view family, std::string_view quantity) {
    const Figure* general = nullptr;
    for (const ModelFigure& figure : tables.model) {
        if (figure.quantity != quantity)
            continue;
        if (figure.family == family)
            return figure.figure;
        if (figure.family == "all")
            general = &figure.figure;
    }
    if (general)
        return *general;
    std::vector<std::string> quantities;
    for (const ModelFigure& figure : tables.model)
        quantities.push_back(figure.quantity);
    throw Error(ErrorKind::tables, "model.csv",
                "no row for the quantity " + in_quotes(quantity) + " of the family " + in_quotes(family) +
                    " or of all" + did_you_mean(quantity, quantities));
}

std::string nearest_word(std::string_view word, const std::vector<std::string>& known) {
    if (word.empty() || word.size() > max_word)
        return {};
    const std::string wanted = lower(word);
    std::size_t best = 1 + std::max<std::size_t>(1, wanted.size() / 3);
    std::string nearest;
    for (const std::string& candidate : known) {
        if (candidate.size() > wanted.size() + best || candidate.size() + best < wanted.size())
            continue;
        const std::size_t distance = edit_distance(wanted, lower(candidate));
        if (distance >= best || distance >= candidate.size())
            continue;
        best = distance;
        nearest = candidate;
    }
    if (!nearest.empty() || wanted.size() < 3)
        return nearest;
    for (const std::string& candidate : known)
        if (lower(candidate).starts_with(wanted))
            return candidate;
    return {};
}

}  // namespace isotally
