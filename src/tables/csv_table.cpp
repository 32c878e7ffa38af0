// The packaged reader (libfccp) wants its columns at compile time, ends a record at every newline, quoted
// or not, and does not say where a fault is.
#include "tables/csv_table.hpp"

#include <algorithm>
#include <utility>

#include "tables/plain_text.hpp"

namespace isotally {

namespace {

struct Position {
    std::size_t at = 0;
    std::size_t line = 1;
};

bool at_line_end(std::string_view text, std::size_t at) {
    return at >= text.size() || text[at] == '\n' || text[at] == '\r';
}

void pass_line_end(std::string_view text, Position& position) {
    if (position.at >= text.size())
        return;
    if (text[position.at] == '\r' && position.at + 1 < text.size() && text[position.at + 1] == '\n')
        ++position.at;
    ++position.at;
    ++position.line;
}

/// Empty: read; else what is wrong with the field.
std::string read_quoted(std::string_view text, Position& position, std::string& field) {
    ++position.at;
    while (true) {
        if (position.at >= text.size())
            return "a quote is opened and never closed";
        if (field.size() > max_field_bytes)
            return "a field in quotes is longer than 64 KiB (is its last quote missing?)";
        const char c = text[position.at];
        if (c == '"') {
            if (position.at + 1 < text.size() && text[position.at + 1] == '"') {
                field += '"';
                position.at += 2;
                continue;
            }
            ++position.at;
            while (position.at < text.size() && (text[position.at] == ' ' || text[position.at] == '\t'))
                ++position.at;
            if (at_line_end(text, position.at) || text[position.at] == ',')
                return {};
            return "text after a closing quote, expected a comma (quotes inside a field are doubled)";
        }
        if (c == '\r' || c == '\n') {
            field += '\n';
            pass_line_end(text, position);
        } else {
            field += c;
            ++position.at;
        }
    }
}

std::string read_plain(std::string_view text, Position& position, std::string& field) {
    const std::size_t begin = position.at;
    while (!at_line_end(text, position.at) && text[position.at] != ',')
        ++position.at;
    const std::string_view raw = text.substr(begin, position.at - begin);
    if (raw.find('"') != std::string_view::npos)
        return "a quote inside a field, expected the whole field in quotes and this quote doubled";
    if (raw.size() > max_field_bytes)
        return "a field is longer than 64 KiB";
    field = trimmed(raw);
    return {};
}

std::string read_row(std::string_view text, Position& position, std::vector<std::string>& fields) {
    while (true) {
        while (position.at < text.size() && (text[position.at] == ' ' || text[position.at] == '\t'))
            ++position.at;
        std::string field;
        const bool opens = position.at < text.size() && text[position.at] == '"';
        std::string wrong = opens ? read_quoted(text, position, field) : read_plain(text, position, field);
        if (!wrong.empty())
            return wrong;
        fields.push_back(std::move(field));
        if (position.at < text.size() && text[position.at] == ',') {
            ++position.at;
            continue;
        }
        pass_line_end(text, position);
        return {};
    }
}

Position next_line(std::string_view text, Position position) {
    while (!at_line_end(text, position.at))
        ++position.at;
    pass_line_end(text, position);
    return position;
}

std::string wrong_separator(const std::vector<std::string>& header) {
    if (header.size() != 1)
        return {};
    for (const auto& [separator, name] : {std::pair{';', "semicolons"}, std::pair{'\t', "tabs"}})
        if (header[0].find(separator) != std::string::npos)
            return std::string("the columns are separated by ") + name + ", expected commas";
    return {};
}

std::string wrong_count(const CsvRow& row, std::size_t expected) {
    const std::string counted = std::to_string(row.fields.size()) +
                                (row.fields.size() == 1 ? " field" : " fields") + ", expected " +
                                std::to_string(expected);
    if (row.fields.size() > expected)
        return counted + " (a decimal comma, or a comma in a text that is not in quotes?)";
    if (std::any_of(row.fields.begin(), row.fields.end(),
                    [](const std::string& field) { return field.find(';') != std::string::npos; }))
        return counted + " (semicolons where commas are meant?)";
    return counted;
}

}  // namespace

CsvTable read_csv(const std::string& file, std::string_view text, FaultList& faults) {
    CsvTable table;
    if (!readable_text(file, text, faults)) {
        table.complete = false;
        return table;
    }
    text = without_byte_order_mark(text);
    Position position;
    while (position.at < text.size()) {
        const Position begin = position;
        CsvRow row{begin.line, {}};
        std::string wrong = read_row(text, position, row.fields);
        if (wrong.empty() && std::all_of(row.fields.begin(), row.fields.end(),
                                         [](const std::string& field) { return field.empty(); }))
            continue;
        if (wrong.empty() && table.header.empty()) {
            table.header_line = begin.line;
            wrong = wrong_separator(row.fields);
            if (!wrong.empty()) {
                faults.add(file, begin.line, "", wrong);
                table.complete = false;
                return table;
            }
            table.header = std::move(row.fields);
            continue;
        }
        if (wrong.empty() && row.fields.size() != table.header.size())
            wrong = wrong_count(row, table.header.size());
        else if (!wrong.empty())
            position = next_line(text, begin);
        if (!wrong.empty()) {
            faults.add(file, begin.line, "", wrong);
            table.complete = false;
            if (table.header.empty())
                return table;
            continue;
        }
        table.rows.push_back(std::move(row));
    }
    if (table.header.empty()) {
        faults.add(file, 1, "", "the file is empty, expected a line of column names");
        table.complete = false;
    }
    return table;
}

bool readable_text(const std::string& file, std::string_view text, FaultList& faults) {
    if (text.size() > max_file_bytes) {
        faults.add(file, 0, "", "the file is larger than 16 MiB");
        return false;
    }
    const auto line_of = [&](std::size_t at) {
        return 1 + static_cast<std::size_t>(
                       std::count(text.begin(), text.begin() + static_cast<std::ptrdiff_t>(at), '\n'));
    };
    if (text.substr(0, 2) == "\xFF\xFE" || text.substr(0, 2) == "\xFE\xFF") {
        faults.add(file, 1, "", "the file is in UTF-16, expected UTF-8");
        return false;
    }
    if (const std::size_t bad = first_invalid_utf8(text); bad != std::string_view::npos) {
        faults.add(file, line_of(bad), "", "bytes that are not UTF-8");
        return false;
    }
    const auto is_control = [](char c) {
        const auto byte = static_cast<unsigned char>(c);
        return (byte < 0x20 && c != '\n' && c != '\r' && c != '\t') || byte == 0x7f;
    };
    const auto control = std::find_if(text.begin(), text.end(), is_control);
    if (control != text.end()) {
        faults.add(file, line_of(static_cast<std::size_t>(control - text.begin())), "",
                   "a control character (byte " + std::to_string(static_cast<unsigned char>(*control)) +
                       ") in a text file");
        return false;
    }
    return true;
}

std::string csv_field(std::string_view text) {
    const bool plain = text.find_first_of(",\"\r\n") == std::string_view::npos &&
                       (text.empty() || trimmed(text).size() == text.size());
    if (plain)
        return std::string(text);
    std::string result = "\"";
    for (const char c : text)
        result += c == '"' ? std::string("\"\"") : std::string(1, c);
    return result + "\"";
}

}  // namespace isotally
