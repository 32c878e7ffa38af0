#include "tables/plain_text.hpp"

#include <algorithm>
#include <charconv>
#include <cmath>
#include <system_error>

namespace isotally {

std::size_t first_invalid_utf8(std::string_view text) {
    std::size_t i = 0;
    const auto byte = [&](std::size_t k) { return static_cast<unsigned char>(text[k]); };
    while (i < text.size()) {
        const unsigned lead = byte(i);
        std::size_t length = 1;
        unsigned low = 0x80, high = 0xBF;
        if (lead < 0x80) {
            ++i;
            continue;
        }
        if (lead >= 0xC2 && lead <= 0xDF)
            length = 2;
        else if (lead >= 0xE0 && lead <= 0xEF)
            length = 3;
        else if (lead >= 0xF0 && lead <= 0xF4)
            length = 4;
        else
            return i;
        if (lead == 0xE0)
            low = 0xA0;
        if (lead == 0xED)
            high = 0x9F;
        if (lead == 0xF0)
            low = 0x90;
        if (lead == 0xF4)
            high = 0x8F;
        if (i + length > text.size())
            return i;
        for (std::size_t k = 1; k < length; ++k) {
            if (byte(i + k) < low || byte(i + k) > high)
                return i;
            low = 0x80, high = 0xBF;
        }
        i += length;
    }
    return std::string_view::npos;
}

std::string_view trimmed(std::string_view text) {
    const std::size_t first = text.find_first_not_of(" \t");
    if (first == std::string_view::npos)
        return {};
    return text.substr(first, text.find_last_not_of(" \t") - first + 1);
}

std::vector<std::string> split_at_blanks(std::string_view text) {
    std::vector<std::string> parts;
    std::size_t begin = text.find_first_not_of(" \t");
    while (begin != std::string_view::npos) {
        const std::size_t end = std::min(text.find_first_of(" \t", begin), text.size());
        parts.emplace_back(text.substr(begin, end - begin));
        begin = text.find_first_not_of(" \t", end);
    }
    return parts;
}

std::string_view without_byte_order_mark(std::string_view text) {
    return text.substr(0, 3) == "\xEF\xBB\xBF" ? text.substr(3) : text;
}

namespace {

bool is_digit(char c) {
    return c >= '0' && c <= '9';
}

std::string decimal_comma_as_point(std::string_view text) {
    const std::size_t comma = text.find(',');
    if (comma == std::string_view::npos || text.find(',', comma + 1) != std::string_view::npos)
        return {};
    std::string changed(text);
    changed[comma] = '.';
    return std::holds_alternative<double>(parse_number(changed)) ? changed : std::string{};
}

}  // namespace

std::variant<double, NotANumber> parse_number(std::string_view text) {
    std::string_view digits = text;
    if (digits.size() > 1 && digits[0] == '+')
        digits.remove_prefix(1);
    if (text.size() > 1 && text[0] == '+' && !is_digit(digits[0]) && digits[0] != '.')
        return NotANumber{"is not a number"};
    double value = 0;
    const auto [end, code] = std::from_chars(digits.data(), digits.data() + digits.size(), value);
    if (code == std::errc::result_out_of_range)
        return NotANumber{"is out of the range of a number"};
    if (code != std::errc{} || end != digits.data() + digits.size()) {
        const std::string with_point = decimal_comma_as_point(text);
        if (!with_point.empty())
            return NotANumber{"has a decimal comma (write " + with_point + ")"};
        for (const std::string_view sign : {"\xE2\x88\x92", "\xE2\x80\x93"})
            if (text.substr(0, sign.size()) == sign)
                return NotANumber{"has a typographic minus sign (write -)"};
        return NotANumber{"is not a number"};
    }
    if (!std::isfinite(value))
        return NotANumber{"is not a finite number"};
    return value;
}

std::string number_text(double value) {
    if (!std::isfinite(value))
        return {};
    char buffer[40];
    const auto [end, code] =
        std::to_chars(buffer, buffer + sizeof buffer, value, std::chars_format::general, 12);
    return code == std::errc{} ? std::string(buffer, end) : std::string{};
}

}  // namespace isotally
