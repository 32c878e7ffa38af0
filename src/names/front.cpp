#include "names/front.hpp"

#include <algorithm>

#include "names/parts.hpp"

namespace isotally::name_parts {
namespace {

char closing(char opening) {
    return opening == '(' ? ')' : opening == '[' ? ']' : opening == '{' ? '}' : '\0';
}

// The text behind `word`, bare or in brackets, at the start of the text.
std::vector<std::string_view> behind(std::string_view text, std::string_view word) {
    std::vector<std::string_view> out;
    if (text.starts_with(word))
        out.push_back(text.substr(word.size()));
    if (!text.empty() && closing(text[0]) && text.substr(1).starts_with(word) &&
        text.size() > word.size() + 1 && text[word.size() + 1] == closing(text[0]))
        out.push_back(text.substr(word.size() + 2));
    return out;
}

bool read_on(const std::vector<std::string>& words, std::string_view text, Items& items,
             const std::function<bool(const Items&)>& take) {
    if (text.empty())
        return take(items);
    if (items.size() == 6)
        return false;
    std::string_view rest = text;
    std::optional<Item> item = take_locants(rest);
    if (!item) {
        if (!items.empty())
            return false;
        rest = text;
        item = Item{};
    }
    for (std::size_t count = 1; count <= 6; ++count) {
        if (item->located && count != item->ring.size() + item->nitrogen.size())
            continue;
        for (std::string_view many : {multiplier(count), compound_multiplier(count)}) {
            if (!rest.starts_with(many))
                continue;
            std::string_view body = rest.substr(many.size());
            if (count > 1 && body.starts_with("-"))
                body.remove_prefix(1);
            for (const std::string& word : words)
                for (std::string_view left : behind(body, word)) {
                    if (!left.empty()) {
                        if (!item->located || left.size() < 2 || left[0] != '-')
                            continue;
                        left.remove_prefix(1);
                    }
                    Item found = *item;
                    found.word = word;
                    if (!item->located)
                        for (std::size_t i = 0; i < count; ++i)
                            found.ring.push_back(static_cast<int>(i) + 1);
                    items.push_back(std::move(found));
                    if (read_on(words, left, items, take))
                        return true;
                    items.pop_back();
                }
            if (count == 1)
                break;
        }
    }
    return false;
}

}  // namespace

std::string lower(std::string_view text) {
    std::string out(text);
    for (char& c : out)
        if (c >= 'A' && c <= 'Z')
            c = static_cast<char>(c - 'A' + 'a');
    return out;
}

std::string_view disclose(std::string_view text) {
    if (text.size() < 2 || !closing(text.front()) || text.back() != closing(text.front()))
        return text;
    int depth = 0;
    for (std::size_t i = 0; i < text.size(); ++i) {
        if (closing(text[i]))
            ++depth;
        if (text[i] == ')' || text[i] == ']' || text[i] == '}')
            --depth;
        if (depth == 0 && i + 1 < text.size())
            return text;
    }
    return text.substr(1, text.size() - 2);
}

std::optional<Item> take_locants(std::string_view& text) {
    const auto dash = text.find('-');
    if (dash == std::string_view::npos || dash == 0)
        return {};
    Item item;
    item.located = true;
    std::string_view list = text.substr(0, dash);
    while (true) {
        const auto comma = std::min(list.find(','), list.size());
        std::string_view one = list.substr(0, comma);
        const bool nitrogen = one.starts_with("n");
        if (nitrogen)
            one.remove_prefix(1);
        if (one.size() > 1 || (one.empty() && !nitrogen) ||
            (one.size() == 1 && (one[0] < '1' || one[0] > '6')))
            return {};
        (nitrogen ? item.nitrogen : item.ring).push_back(one.empty() ? 0 : one[0] - '0');
        if (comma == list.size())
            break;
        list.remove_prefix(comma + 1);
    }
    text.remove_prefix(dash + 1);
    return item;
}

std::optional<std::vector<int>> read_locants(std::string_view list) {
    std::string text = std::string(list) + "-";
    std::string_view rest = text;
    auto item = take_locants(rest);
    if (!item || !rest.empty() || !item->nitrogen.empty())
        return {};
    return item->ring;
}

bool read_front(const std::vector<std::string>& words, std::string_view text,
                const std::function<bool(const Items&)>& take) {
    Items items;
    return read_on(words, text, items, take);
}

}  // namespace isotally::name_parts
