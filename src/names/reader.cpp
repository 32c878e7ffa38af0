#include <algorithm>
#include <utility>

#include "names/front.hpp"
#include "names/parts.hpp"

namespace isotally {
namespace name_parts {
namespace {

struct Reader {
    const Tables& tables;
    std::vector<std::string> words;  // every prefix that may be cited, lower case
    std::string name;                // lower case

    int by_prefix(std::string_view word) const {
        for (std::size_t i = 0; i < tables.substituents.size(); ++i)
            if (!word.empty() && lower(tables.substituents[i].prefix) == word)
                return static_cast<int>(i);
        return -1;
    }

    int by_family(int family, std::vector<std::string> nitrogen, std::string_view ester) const {
        std::ranges::sort(nitrogen);
        for (std::size_t i = 0; i < tables.substituents.size(); ++i) {
            const Substituent& group = tables.substituents[i];
            if (family_of(group) != family || lower(ester_word(group)) != ester)
                continue;
            std::vector<std::string> own = nitrogen_words(group);
            for (std::string& word : own)
                word = lower(word);
            if (own == nitrogen)
                return static_cast<int>(i);
        }
        return -1;
    }

    // The letters, digits and locants of a name, whatever their order and the brackets round them.
    static std::string content(std::string text) {
        text = lower(text);
        constexpr std::pair<std::string_view, std::string_view> plain[] = {
            {"bis", "di"}, {"tris", "tri"}, {"kis", ""}};
        for (auto [from, to] : plain)
            for (auto at = text.find(from); at != std::string::npos; at = text.find(from, at))
                text.replace(at, from.size(), to);
        std::erase_if(text,
                      [](char c) { return std::string_view("()[]{}- ").find(c) != std::string_view::npos; });
        std::ranges::sort(text);
        return text;
    }

    // The name is right if this pattern, named with the numbering it was read with, gives it again.
    bool same_again(const RingGroups& groups) const {
        constexpr Locants as_read{1, 2, 3, 4, 5, 6};
        const auto plan = systematic_plan(tables, groups);
        if (!plan)
            return false;
        const std::string wanted = content(name);
        if (content(compose(*plan, as_read)) == wanted)
            return true;
        const auto trade = general_plan(tables, groups, *plan);
        return trade && trade->principal == std::vector<int>{0} &&
               content(compose(*trade, as_read)) == wanted;
    }

    std::optional<RingGroups> place(const Items& items, int family, const std::vector<int>& principal,
                                    int stem_group, const std::vector<std::string>& esters) const {
        RingGroups groups;
        groups.fill(-1);
        std::array<bool, 7> taken{};
        std::array<std::vector<std::string>, 7> nitrogen;
        for (int locant : principal)
            if (std::exchange(taken[static_cast<std::size_t>(locant)], true))
                return {};
        for (const Item& item : items) {
            for (int locant : item.ring) {
                if (std::exchange(taken[static_cast<std::size_t>(locant)], true))
                    return {};
                groups[static_cast<std::size_t>(locant - 1)] = by_prefix(item.word);
            }
            for (int locant : item.nitrogen) {
                if (family < 0 || (locant == 0 && principal.size() != 1))
                    return {};
                const int at = locant ? locant : principal[0];
                if (std::ranges::find(principal, at) == principal.end())
                    return {};
                nitrogen[static_cast<std::size_t>(at)].push_back(item.word);
            }
        }
        for (std::size_t i = 0; i < principal.size(); ++i) {
            const auto at = static_cast<std::size_t>(principal[i]);
            const std::string ester = esters.empty() ? "" : esters[at];
            const int group = stem_group >= 0 ? stem_group : by_family(family, nitrogen[at], ester);
            if (group < 0)
                return {};
            groups[at - 1] = group;
        }
        if (!same_again(groups))
            return {};
        return groups;
    }

    std::optional<RingGroups> front(std::string_view text, int family, const std::vector<int>& principal,
                                    int stem_group = -1, const std::vector<std::string>& esters = {}) const {
        std::optional<RingGroups> out;
        read_front(words, text, [&](const Items& found) {
            out = place(found, family, principal, stem_group, esters);
            return out.has_value();
        });
        return out;
    }

    // "methyl ", "dimethyl ", "1-ethyl 4-methyl " in front of an ester: the alcohol part by locant (1..6).
    std::optional<std::vector<std::string>> alcohols(std::string_view text, int family,
                                                     const std::vector<int>& principal) const {
        std::vector<std::string> known;
        for (const Substituent& group : tables.substituents)
            if (family_of(group) == family)
                known.push_back(lower(ester_word(group)));
        std::vector<std::string> out(7);
        std::vector<int> open = principal;
        std::ranges::sort(open);
        while (!text.empty()) {
            const auto space = text.find(' ');
            if (space == std::string_view::npos)
                return {};
            std::string_view word = text.substr(0, space);
            text.remove_prefix(space + 1);
            const std::optional<Item> locants = take_locants(word);
            bool found = false;
            for (std::size_t count = 1; count <= open.size() && !found; ++count)
                for (const std::string& alcohol : known) {
                    if (!word.starts_with(multiplier(count)) ||
                        disclose(word.substr(multiplier(count).size())) != alcohol)
                        continue;
                    std::vector<int> at =
                        locants
                            ? locants->ring
                            : std::vector(open.begin(), open.begin() + static_cast<std::ptrdiff_t>(count));
                    if (at.size() != count)
                        return {};
                    for (int locant : at) {
                        if (std::erase(open, locant) != 1)
                            return {};
                        out[static_cast<std::size_t>(locant)] = alcohol;
                    }
                    found = true;
                    break;
                }
            if (!found)
                return {};
        }
        if (!open.empty())
            return {};
        return out;
    }

    std::optional<RingGroups> ring_body(std::string_view body, int family,
                                        const std::vector<int>& principal) const {
        if (families()[static_cast<std::size_t>(family)].principal != "ester" &&
            families()[static_cast<std::size_t>(family)].principal != "sulfonic-ester")
            return front(body, family, principal);
        const auto space = body.rfind(' ');
        if (space == std::string_view::npos)
            return {};
        const auto esters = alcohols(body.substr(0, space + 1), family, principal);
        return esters ? front(body.substr(space + 1), family, principal, -1, *esters) : std::nullopt;
    }

    std::optional<RingGroups> suffixed(int index) const {
        const Family& family = families()[static_cast<std::size_t>(index)];
        for (std::size_t count = 1; count <= 6; ++count) {
            const std::string tail = multiplied_suffix(family, count);
            for (const std::string& parent :
                 {std::string(family.retained), "benzene-1-" + tail, "benzene" + tail}) {
                if (parent.empty() || !name.ends_with(parent))
                    continue;
                if (count > 1 && (count < 6 || parent != "benzene" + tail))
                    continue;
                std::vector<int> principal;
                for (std::size_t i = 0; i < count; ++i)
                    principal.push_back(static_cast<int>(i) + 1);
                const auto body = std::string_view(name).substr(0, name.size() - parent.size());
                if (auto out = ring_body(body, index, principal))
                    return out;
            }
            const auto at = name.rfind("benzene-");
            if (count == 1 || !name.ends_with("-" + tail) || at == std::string::npos)
                continue;
            const auto start = at + std::string_view("benzene-").size(), end = name.size() - tail.size() - 1;
            if (start >= end)
                continue;
            const auto principal = read_locants(std::string_view(name).substr(start, end - start));
            if (!principal || principal->size() != count)
                continue;
            if (auto out = ring_body(std::string_view(name).substr(0, at), index, *principal))
                return out;
        }
        return {};
    }

    // "2-methylphenyl", "2-methyl-1,4-phenylene", "2-methylbenzene-1,3,5-triyl".
    std::optional<RingGroups> aryl(std::string_view text, int family, std::size_t count) const {
        if (count == 1) {
            const std::string_view ring = families()[static_cast<std::size_t>(family)].ring;
            if (!text.ends_with(ring))
                return {};
            return front(text.substr(0, text.size() - ring.size()), family, {1});
        }
        const std::string tail = count == 2 ? "-phenylene" : "-" + std::string(multiplier(count)) + "yl";
        if (!text.ends_with(tail))
            return {};
        text.remove_suffix(tail.size());
        const auto start = text.find_last_not_of("123456,");
        const auto from = start == std::string_view::npos ? 0 : start + 1;
        const auto principal = read_locants(text.substr(from));
        if (!principal || principal->size() != count)
            return {};
        text = text.substr(0, from);
        const std::string_view stem = count == 2 ? "-" : "benzene-";
        if (!text.empty() || count > 2) {
            if (!text.ends_with(stem))
                return {};
            text.remove_suffix(stem.size());
        }
        return front(text, family, *principal);
    }

    std::optional<RingGroups> chained(int index) const {
        const Family& family = families()[static_cast<std::size_t>(index)];
        for (std::size_t count = 1; count <= 6; ++count)
            for (const auto& [before, after] : frames(family, count)) {
                const std::string head = lower(before), tail = lower(after);
                if (name.size() <= head.size() + tail.size() || !name.starts_with(head) ||
                    !name.ends_with(tail))
                    continue;
                const auto ring =
                    std::string_view(name).substr(head.size(), name.size() - head.size() - tail.size());
                if (auto out = aryl(disclose(ring), index, count))
                    return out;
            }
        return {};
    }

    std::optional<RingGroups> stemmed(std::string_view stem, int family, int group) const {
        if (!name.ends_with(stem))
            return {};
        std::string_view body = std::string_view(name).substr(0, name.size() - stem.size());
        if (stem == "1,1'-biphenyl" && body.ends_with("-"))
            body.remove_suffix(1);
        return front(body, family, {1}, group);
    }

    std::optional<RingGroups> whole() const {
        RingGroups groups;
        groups.fill(-1);
        if (name == "benzene")
            return groups;
        for (const Stem& known : whole_names())
            if (known.stem == name && (groups[0] = by_prefix(known.prefix)) >= 0)
                return groups;
        if (name.size() == std::string_view("1,2-xylene").size() && name.starts_with("1,") &&
            name.ends_with("-xylene"))
            if (const char other = name[2]; other >= '2' && other <= '4' && by_prefix("methyl") >= 0) {
                groups[0] = groups[static_cast<std::size_t>(other - '1')] = by_prefix("methyl");
                return groups;
            }
        return {};
    }

    std::optional<RingGroups> read() const {
        if (auto out = whole())
            return out;
        for (std::size_t i = 0; i < families().size(); ++i) {
            const int index = static_cast<int>(i);
            const Family& family = families()[i];
            if (auto out = family.aryl ? chained(index) : suffixed(index))
                return out;
            if (!family.general.empty())
                if (auto out = stemmed(family.general, index, -1))
                    return out;
        }
        for (const Stem& parent : general_stems())
            if (const int group = by_prefix(parent.prefix); group >= 0)
                if (auto out = stemmed(parent.stem, -1, group))
                    return out;
        if (const int group = by_prefix("phenyl"); group >= 0)
            if (auto out = stemmed("1,1'-biphenyl", -1, group))
                return out;
        if (!name.ends_with("benzene"))
            return {};
        return front(std::string_view(name).substr(0, name.size() - std::string_view("benzene").size()), -1,
                     {});
    }
};

}  // namespace
}  // namespace name_parts

std::optional<RingGroups> read_ring_name(const Tables& tables, std::string_view name) {
    using namespace name_parts;
    std::vector<std::string> words;
    const auto add = [&](const std::string& word) {
        if (!word.empty() && std::ranges::find(words, lower(word)) == words.end())
            words.push_back(lower(word));
    };
    for (const Substituent& group : tables.substituents) {
        add(group.prefix);
        for (const std::string& word : nitrogen_words(group))
            add(word);
    }
    return Reader{tables, std::move(words), lower(name)}.read();
}

}  // namespace isotally
