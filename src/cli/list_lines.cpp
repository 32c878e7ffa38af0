#include "list_lines.hpp"

#include <string_view>

namespace isotally::cli {
namespace {

constexpr std::string_view byte_order_mark = "\xef\xbb\xbf";
constexpr const char* blanks = " \t";

/// False at the end of the input.
bool read_bounded(std::istream& in, std::string& line, bool& too_long) {
    using Traits = std::istream::traits_type;
    auto& buffer = *in.rdbuf();
    line.clear();
    too_long = false;
    for (bool any = false;; any = true) {
        const auto c = buffer.sbumpc();
        if (Traits::eq_int_type(c, Traits::eof()))
            return any;
        if (Traits::to_char_type(c) == '\n')
            return true;
        if (line.size() < longest_line)
            line += Traits::to_char_type(c);
        else
            too_long = true;
    }
}

}  // namespace

std::optional<ListLine> next_line(std::istream& in, std::size_t& lines_read) {
    std::string text;
    ListLine line;
    while (read_bounded(in, text, line.too_long)) {
        line.number = ++lines_read;
        std::string_view rest = text;
        if (line.number == 1 && rest.starts_with(byte_order_mark))
            rest.remove_prefix(byte_order_mark.size());
        if (rest.ends_with('\r'))
            rest.remove_suffix(1);
        const auto begin = rest.find_first_not_of(blanks);
        if (begin == std::string_view::npos)
            continue;
        rest.remove_prefix(begin);
        rest.remove_suffix(rest.size() - 1 - rest.find_last_not_of(blanks));
        const auto end = std::min(rest.find_first_of(blanks), rest.size());
        line.molecule = rest.substr(0, end);
        rest.remove_prefix(end);
        line.label = rest.substr(std::min(rest.find_first_not_of(blanks), rest.size()));
        return line;
    }
    return std::nullopt;
}

}  // namespace isotally::cli
