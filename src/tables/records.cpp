#include "tables/records.hpp"

#include <algorithm>
#include <cmath>
#include <set>
#include <utility>

#include "tables/csv_table.hpp"
#include "tables/json_records.hpp"
#include "tables/plain_text.hpp"

namespace isotally {

namespace {

using Json = nlohmann::ordered_json;

struct Place {
    const std::string& file;
    std::size_t line;
    std::string prefix;   // "products." in front of the field's name
    std::string context;  // "product 2: " in front of the message
    FaultList& faults;

    void fault(const Column& column, const std::string& message) const {
        faults.add(file, line, prefix + column.name, context + message);
    }
};

bool printable_ascii(std::string_view text) {
    return std::all_of(text.begin(), text.end(), [](char c) { return c >= 0x20 && c <= 0x7e; });
}

/// What is wrong with a text in this column, or empty.
std::string wrong_text(const Column& column, std::string_view text) {
    const std::string found = "found " + in_quotes(text);
    switch (column.type) {
    case FieldType::word:
        if (std::find(column.words.begin(), column.words.end(), text) == column.words.end())
            return found + ", expected " + expected_text(column) + did_you_mean(text, column.words);
        break;
    case FieldType::id:
    case FieldType::reference:
    case FieldType::group:
    case FieldType::smiles:
    case FieldType::smarts:
        if (!printable_ascii(text) || text.find(' ') != std::string_view::npos)
            return found + ", expected " + expected_text(column) + " (printable ASCII without blanks)";
        break;
    default:
        break;
    }
    return {};
}

std::string wrong_number(const Column& column, double value) {
    const bool outside = column.positive ? value <= 0 : value < column.minimum || value > column.maximum;
    const bool broken = column.type == FieldType::integer && value != std::floor(value);
    return outside || broken ? "found " + number_text(value) + ", expected " + expected_text(column) : "";
}

bool is_number(const Column& column) {
    return column.type == FieldType::number || column.type == FieldType::integer;
}

Cell faulty(const Place& place, const Column& column, std::string text, const std::string& message) {
    place.fault(column, message);
    return {.kind = Cell::Kind::faulty, .text = std::move(text)};
}

Cell number_cell(const Place& place, const Column& column, double value, std::string text) {
    if (const std::string wrong = wrong_number(column, value); !wrong.empty())
        return faulty(place, column, std::move(text), wrong);
    return {.kind = Cell::Kind::number, .text = std::move(text), .number = value};
}

Cell text_cell(const Place& place, const Column& column, std::string text) {
    if (const std::string wrong = wrong_text(column, text); !wrong.empty())
        return faulty(place, column, std::move(text), wrong);
    return {.kind = Cell::Kind::text, .text = std::move(text)};
}

Cell missing_cell(const Place& place, const Column& column) {
    if (column.required)
        return faulty(place, column, "", "empty, expected " + expected_text(column));
    return {};
}

Cell csv_cell(const Place& place, const Column& column, const std::string& text) {
    if (text.empty())
        return missing_cell(place, column);
    if (is_number(column)) {
        const auto number = parse_number(text);
        if (const auto* reason = std::get_if<NotANumber>(&number))
            return faulty(place, column, text,
                          in_quotes(text) + " " + reason->reason + ", expected " + expected_text(column));
        return number_cell(place, column, std::get<double>(number), text);
    }
    if (column.type == FieldType::flag) {
        if (text != "yes" && text != "no")
            return faulty(place, column, text, "found " + in_quotes(text) + ", expected yes or no");
        return {.kind = Cell::Kind::flag, .text = text, .flag = text == "yes"};
    }
    return text_cell(place, column, text);
}

Cell json_cell(const Place& place, const Column& column, const Json& value) {
    if (value.is_null())
        return missing_cell(place, column);
    const auto expected = [&] {
        return column.type == FieldType::flag ? "true or false" : expected_text(column);
    };
    const auto found = [&] { return "found " + in_quotes(value.dump()) + ", expected " + expected(); };
    if (is_number(column)) {
        if (!value.is_number())
            return faulty(place, column, "", found() + (value.is_string() ? " without quotes" : ""));
        const double number = value.get<double>();
        return number_cell(place, column, number, number_text(number));
    }
    if (column.type == FieldType::flag) {
        if (!value.is_boolean())
            return faulty(place, column, "", found());
        return {
            .kind = Cell::Kind::flag, .text = value.get<bool>() ? "yes" : "no", .flag = value.get<bool>()};
    }
    if (!value.is_string())
        return faulty(place, column, "", found());
    std::string text(trimmed(value.get_ref<const std::string&>()));
    if (text.empty())
        return missing_cell(place, column);
    return text_cell(place, column, std::move(text));
}

FileRecords records_of_csv(const FileSchema& schema, const TableFile& file, FaultList& faults) {
    const CsvTable table = read_csv(file.name, file.text, faults);
    FileRecords result{{}, table.complete};
    if (table.header.empty())
        return result;
    const std::vector<std::string> known = column_names(schema.columns);
    std::vector<const Column*> columns;
    std::set<std::string> seen;
    for (const std::string& name : table.header) {
        const Column* column = find_column(schema.columns, name);
        const bool again = !seen.insert(name).second;
        if (!column)
            faults.add(file.name, table.header_line, name,
                       "unknown column " + in_quotes(name) + ", expected " + joined(known) +
                           did_you_mean(name, known));
        else if (again)
            faults.add(file.name, table.header_line, name, "the column " + in_quotes(name) + " stands twice");
        columns.push_back(again ? nullptr : column);
    }
    for (const Column& column : schema.columns)
        if (!seen.count(column.name) && !column.may_be_missing) {
            faults.add(file.name, table.header_line, column.name,
                       "the column " + in_quotes(column.name) + " is missing, expected " + joined(known));
            if (column.name == schema.keys[0][0])
                result.complete = false;
        }
    for (const CsvRow& row : table.rows) {
        Record record{.line = row.line, .cells = {}, .parts = {}, .json = {}};
        const Place place{file.name, row.line, "", "", faults};
        for (std::size_t i = 0; i < columns.size(); ++i)
            if (columns[i])
                record.cells[columns[i]->name] = csv_cell(place, *columns[i], row.fields[i]);
        result.records.push_back(std::move(record));
    }
    return result;
}

void read_object(const std::vector<Column>& columns, const std::vector<Column>& parts, bool open,
                 const Json& object, const Place& place, Record& record);

std::vector<Record> read_parts(const Column& column, const std::vector<Column>& columns, const Json& list,
                               const Place& place) {
    std::vector<Record> result;
    if (!list.is_array() || list.empty()) {
        place.fault(column, "expected " + expected_text(column));
        return result;
    }
    for (const Json& object : list) {
        const std::string context = "entry " + std::to_string(result.size() + 1) + ": ";
        Record part{.line = place.line, .cells = {}, .parts = {}, .json = {}};
        const Place inside{place.file, place.line, column.name + ".", context, place.faults};
        if (object.is_object())
            read_object(columns, {}, false, object, inside, part);
        else
            place.fault(column, context + "expected an object, { ... }");
        result.push_back(std::move(part));
    }
    return result;
}

void read_object(const std::vector<Column>& columns, const std::vector<Column>& parts, bool open,
                 const Json& object, const Place& place, Record& record) {
    const std::vector<std::string> known = column_names(columns);
    for (const auto& [name, value] : object.items())
        if (!open && !find_column(columns, name))
            place.faults.add(place.file, place.line, place.prefix + name,
                             place.context + "unknown field " + in_quotes(name) + ", expected " +
                                 joined(known) + did_you_mean(name, known));
    for (const Column& column : columns) {
        const auto found = object.find(column.name);
        if (found == object.end()) {
            record.cells[column.name] = missing_cell(place, column);
        } else if (column.type == FieldType::parts) {
            record.parts = read_parts(column, parts, *found, place);
        } else if (open && column.type == FieldType::text && found->is_number()) {
            record.cells[column.name] = {.kind = Cell::Kind::text, .text = found->dump()};
        } else {
            record.cells[column.name] = json_cell(place, column, *found);
        }
    }
}

FileRecords records_of_json(const FileSchema& schema, const TableFile& file, FaultList& faults) {
    JsonRecords read = read_json_records(file.name, file.text, faults);
    FileRecords result{{}, read.complete};
    for (const JsonRecord& found : read.records) {
        Record record{.line = found.line, .cells = {}, .parts = {}, .json = {}};
        const Place place{file.name, found.line, "", "", faults};
        read_object(schema.columns, schema.part, schema.open, found.object, place, record);
        if (schema.open)
            record.json = found.object.dump();
        result.records.push_back(std::move(record));
    }
    return result;
}

/// Every resource that datapackage.json describes has the columns that are expected here.
void check_datapackage(const TableFile& file, const Json& package, FaultList& faults) {
    const Json resources = package.value("resources", Json::array());
    if (!resources.is_array())
        return faults.add(file.name, 1, "resources", "expected a list of resources");
    std::set<std::string> described_files;
    for (const Json& resource : resources) {
        const auto path = resource.is_object() ? resource.find("path") : resource.end();
        if (!resource.is_object() || path == resource.end() || !path->is_string()) {
            faults.add(file.name, 1, "resources", "a resource without a path");
            continue;
        }
        const FileSchema* schema = schema_of_file(path->get_ref<const std::string&>());
        if (!schema) {
            faults.add(file.name, 1, "resources",
                       "describes the unknown file " + in_quotes(path->get<std::string>()));
            continue;
        }
        described_files.insert(schema->file);
        const Json::json_pointer pointer("/schema/fields");
        if (schema->file.ends_with(".json") && !resource.contains(pointer))
            continue;
        std::vector<std::string> described;
        if (resource.contains(pointer) && resource[pointer].is_array())
            for (const Json& field : resource[pointer])
                if (field.is_object() && field.contains("name") && field["name"].is_string())
                    described.push_back(field["name"].get<std::string>());
        const std::vector<std::string> known = column_names(schema->columns);
        for (const std::string& name : known)
            if (!find_column(schema->columns, name)->may_be_missing &&
                std::find(described.begin(), described.end(), name) == described.end())
                faults.add(file.name, 1, schema->file, "does not describe the column " + in_quotes(name));
        for (const std::string& name : described)
            if (!find_column(schema->columns, name) && !schema->open)
                faults.add(file.name, 1, schema->file,
                           "describes the unknown column " + in_quotes(name) + did_you_mean(name, known));
    }
    for (const FileSchema& schema : file_schemas())
        if (!described_files.count(schema.file))
            faults.add(file.name, 1, "resources", "does not describe the file " + schema.file);
}

std::vector<std::string> expected_files() {
    std::vector<std::string> names{"README.md", "datapackage.json"};
    for (const FileSchema& schema : file_schemas())
        names.push_back(schema.file);
    std::sort(names.begin(), names.end());
    return names;
}

}  // namespace

const Cell& Record::at(std::string_view column) const {
    static const Cell absent;
    const auto found = cells.find(column);
    return found == cells.end() ? absent : found->second;
}

double Record::number(std::string_view column) const {
    const Cell& cell = at(column);
    return cell.kind == Cell::Kind::number ? cell.number : std::numeric_limits<double>::quiet_NaN();
}

const FileRecords& FolderRecords::of(std::string_view file) const {
    static const FileRecords none;
    const auto found = files.find(file);
    return found == files.end() ? none : found->second;
}

FolderRecords read_records(const std::vector<TableFile>& files, FaultList& faults) {
    FolderRecords folder;
    std::set<std::string> seen;
    for (const TableFile& file : files) {
        if (!seen.insert(file.name).second) {
            faults.add(file.name, 0, "", "the file is given twice");
        } else if (file.name == "README.md") {
            readable_text(file.name, file.text, faults);
        } else if (file.name == "datapackage.json") {
            const Json package = read_json_object(file.name, file.text, faults);
            if (!package.is_object())
                continue;
            const auto version = package.find("version");
            if (version == package.end() || !version->is_string())
                faults.add(file.name, 1, "version", "the version is missing, expected a text");
            else
                folder.version = version->get<std::string>();
            check_datapackage(file, package, faults);
        } else if (const FileSchema* schema = schema_of_file(file.name)) {
            folder.files[file.name] = file.name.ends_with(".json") ? records_of_json(*schema, file, faults)
                                                                   : records_of_csv(*schema, file, faults);
        } else {
            const std::vector<std::string> known = expected_files();
            faults.add(file.name, 0, "",
                       "unknown file, expected one of " + joined(known) + did_you_mean(file.name, known));
        }
    }
    for (const FileSchema& schema : file_schemas())
        if (!seen.count(schema.file))
            faults.add(schema.file, 0, "", "the file is missing: " + schema.holds);
    return folder;
}

}  // namespace isotally
