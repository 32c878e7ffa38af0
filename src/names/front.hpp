// The front of a name: prefixes with their locants, read in every way that leaves nothing over.
#pragma once

#include <functional>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace isotally::name_parts {

/// One cited prefix as read: its locants on the ring and on nitrogen (0: "N" without a number).
struct Item {
    std::string word;
    std::vector<int> ring, nitrogen;
    bool located = false;
};
using Items = std::vector<Item>;

std::string lower(std::string_view text);

/// "(4-methylphenyl)" as "4-methylphenyl"; anything that isn't enclosed as a whole stays.
std::string_view disclose(std::string_view text);

/// "1,2-" or "n,n4-" at the start of the text, which is shortened; none where there is no such list.
std::optional<Item> take_locants(std::string_view& text);

/// "1,4" as its numbers.
std::optional<std::vector<int>> read_locants(std::string_view list);

/// Hands every way to read the text as prefixes out of `words` to `take`, until that says yes.
/// A prefix without locants is read as one on position 1, with a multiplier on 1 and the next ones.
bool read_front(const std::vector<std::string>& words, std::string_view text,
                const std::function<bool(const Items&)>& take);

}  // namespace isotally::name_parts
