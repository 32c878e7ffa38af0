// Text and numbers as they stand in files, whatever the locale.
#pragma once

#include <string>
#include <string_view>
#include <variant>
#include <vector>

namespace isotally {

/// Position of the first byte that is not part of valid UTF-8, or npos.
std::size_t first_invalid_utf8(std::string_view text);

/// Without blanks and tabs at both ends.
std::string_view trimmed(std::string_view text);

/// The parts between blanks.
std::vector<std::string> split_at_blanks(std::string_view text);

/// A file's text without its byte order mark.
std::string_view without_byte_order_mark(std::string_view text);

struct NotANumber {
    std::string reason;  // "has a decimal comma (write 1.5)"
};

/// A finite decimal number; anything else (hex, inf, nan, units, decimal comma) gives the reason.
std::variant<double, NotANumber> parse_number(std::string_view text);

/// 12 significant digits at most.
std::string number_text(double value);

}  // namespace isotally
