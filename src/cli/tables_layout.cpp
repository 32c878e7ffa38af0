#include "cli/tables_layout.hpp"

#include <algorithm>
#include <utility>

#include "tables/csv_table.hpp"

namespace isotally {

namespace {

constexpr std::size_t gap = 2;
constexpr std::size_t narrowest = 8;

bool starts_character(char c) {
    return (static_cast<unsigned char>(c) & 0xC0u) != 0x80u;
}

std::size_t bytes_of(std::string_view text, std::size_t characters) {
    std::size_t at = 0;
    while (at < text.size()) {
        if (starts_character(text[at]) && characters-- == 0)
            break;
        ++at;
    }
    return at;
}

std::string cut(std::string_view text, std::size_t width) {
    if (text_width(text) <= width)
        return std::string(text);
    return std::string(text.substr(0, bytes_of(text, width - 3))) + "...";
}

std::string flat(std::string_view text) {
    std::string result(text);
    std::replace_if(
        result.begin(), result.end(), [](char c) { return c == '\n' || c == '\r' || c == '\t'; }, ' ');
    return result;
}

std::vector<std::size_t> column_widths(const TextTable& table, std::size_t width) {
    std::vector<std::size_t> widths(table.columns.size(), 0);
    for (const auto& row : table.rows)
        for (std::size_t i = 0; i < widths.size(); ++i)
            widths[i] = std::max(widths[i], text_width(row[i]));
    std::size_t total = 0;
    for (std::size_t i = 0; i < widths.size(); ++i) {
        if (widths[i] == 0)
            continue;
        widths[i] = std::max(widths[i], text_width(table.columns[i].title));
        total += widths[i] + gap;
    }
    for (const bool fixed_as_well : {false, true})
        while (total > width + gap) {
            std::size_t widest = widths.size();
            for (std::size_t i = 0; i < widths.size(); ++i)
                if ((fixed_as_well || !table.columns[i].fixed) && widths[i] > narrowest &&
                    (widest == widths.size() || widths[i] >= widths[widest]))
                    widest = i;
            if (widest == widths.size())
                break;
            --widths[widest];
            --total;
        }
    return widths;
}

std::string padded(const std::string& text, std::size_t width, bool right) {
    const std::string blanks(width - std::min(width, text_width(text)), ' ');
    return right ? blanks + text : text + blanks;
}

std::string without_trailing_blanks(std::string line) {
    line.erase(line.find_last_not_of(' ') + 1);
    return line;
}

std::string row_lines(const TextTable& table, const std::vector<std::size_t>& widths,
                      const std::vector<std::string>& cells, Overflow overflow, std::size_t indent) {
    std::vector<std::vector<std::string>> lines;
    std::size_t height = 1;
    for (std::size_t i = 0; i < cells.size(); ++i) {
        const std::string cell = flat(cells[i]);
        const std::size_t width = std::max(widths[i], std::size_t{1});
        if (overflow == Overflow::wrap)
            lines.push_back(wrapped(cell, width));
        else
            lines.push_back({cut(cell, width)});
        height = std::max(height, lines.back().size());
    }
    std::string result;
    for (std::size_t line = 0; line < height; ++line) {
        std::string text(indent, ' ');
        for (std::size_t i = 0; i < cells.size(); ++i) {
            if (widths[i] == 0)
                continue;
            const std::string part = line < lines[i].size() ? lines[i][line] : "";
            text += padded(part, widths[i], table.columns[i].right) + std::string(gap, ' ');
        }
        result += without_trailing_blanks(std::move(text)) + "\n";
    }
    return result;
}

}  // namespace

std::size_t text_width(std::string_view text) {
    return static_cast<std::size_t>(std::count_if(text.begin(), text.end(), starts_character));
}

std::vector<std::string> wrapped(std::string_view text, std::size_t width) {
    std::vector<std::string> lines;
    while (true) {
        text.remove_prefix(std::min(text.find_first_not_of(' '), text.size()));
        if (text_width(text) <= width)
            break;
        std::size_t end = bytes_of(text, width + 1);
        const std::size_t blank = text.substr(0, end).find_last_of(' ');
        end = blank == std::string_view::npos ? bytes_of(text, width) : blank;
        lines.push_back(without_trailing_blanks(std::string(text.substr(0, end))));
        text.remove_prefix(end);
    }
    lines.emplace_back(text);
    return lines;
}

std::string aligned(const TextTable& table, Overflow overflow, std::size_t indent, std::size_t width) {
    const std::vector<std::size_t> widths = column_widths(table, width - indent);
    std::vector<std::string> titles;
    for (const TextColumn& column : table.columns)
        titles.push_back(column.title);
    std::string result = row_lines(table, widths, titles, Overflow::cut, indent);
    for (std::size_t i = 0; i < table.rows.size(); ++i) {
        result += row_lines(table, widths, table.rows[i], overflow, indent);
        if (table.remarks.empty() || table.remarks[i].empty())
            continue;
        for (const std::string& line : wrapped(flat(table.remarks[i]), width - indent - 4))
            result += std::string(indent + 4, ' ') + line + "\n";
    }
    return result;
}

std::string as_csv(const TextTable& table) {
    std::string result;
    const auto add = [&](const std::string& cell, bool last) {
        result += csv_field(cell) + (last ? "\n" : ",");
    };
    for (std::size_t i = 0; i < table.columns.size(); ++i)
        add(table.columns[i].title, i + 1 == table.columns.size());
    for (const auto& row : table.rows)
        for (std::size_t i = 0; i < row.size(); ++i)
            add(row[i], i + 1 == row.size());
    return result;
}

}  // namespace isotally
