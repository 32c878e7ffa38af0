#include "numbers.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <string_view>

namespace isotally::report {

std::string number(double value) {
    if (value == 0)
        return "0";
    return fmt::format("{:.12g}", value);
}

namespace {

constexpr char mark = '\x01';
constexpr std::string_view open_mark = "\"\\u0001", close_mark = "\\u0001\"";

}  // namespace

std::string json_number(double value) {
    return mark + number(value) + mark;
}

std::string plain_numbers(std::string dumped) {
    std::string out;
    std::size_t from = 0;
    for (auto at = dumped.find(open_mark); at != std::string::npos; at = dumped.find(open_mark, from)) {
        const auto begin = at + open_mark.size(), end = dumped.find(close_mark, begin);
        out.append(dumped, from, at - from).append(dumped, begin, end - begin);
        from = end + close_mark.size();
    }
    return out.append(dumped, from);
}

std::string locants_text(const IsomerShare& share, bool several_rings) {
    std::string text = several_rings ? fmt::format("ring {}: ", share.site.ring + 1) : "";
    for (std::size_t i = 0; i < share.locants.size(); ++i)
        text += (i ? "," : "") + std::to_string(share.locants[i]);
    return text;
}

std::string weakest_evidence(const IsomerShare& share) {
    static constexpr std::array<const char*, 4> order{"measured", "inferred", "correlated", "assumed"};
    std::size_t weakest = 0;
    for (const auto& contribution : share.contributions) {
        const auto at = std::find(order.begin(), order.end(), contribution.evidence);
        weakest = std::max(weakest, static_cast<std::size_t>(at - order.begin()));
    }
    return order[weakest];
}

std::vector<std::string> wrapped(const std::string& text, std::size_t width) {
    std::vector<std::string> lines(1);
    std::size_t begin = 0;
    while (begin <= text.size()) {
        const auto end = std::min(text.find(' ', begin), text.size());
        const auto word = text.substr(begin, end - begin);
        if (!lines.back().empty() && lines.back().size() + 1 + word.size() > width)
            lines.emplace_back();
        lines.back() += (lines.back().empty() ? "" : " ") + word;
        begin = end + 1;
    }
    return lines;
}

std::string csv_field(const std::string& text) {
    if (text.find_first_of(",\"\n\r") == std::string::npos)
        return text;
    std::string quoted = "\"";
    for (const char c : text)
        quoted += c == '"' ? std::string("\"\"") : std::string(1, c);
    return quoted + "\"";
}

}  // namespace isotally::report
