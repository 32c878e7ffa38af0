#include "cli/tables_command.hpp"

#include <algorithm>
#include <nlohmann/json.hpp>
#include <ostream>

#include "cli/tables_view.hpp"
#include "tables/folder.hpp"

namespace isotally {

namespace {

using Json = nlohmann::ordered_json;
using Counts = std::vector<std::pair<std::string, std::size_t>>;

constexpr int exit_tables = 4;

Json document(const Tables& tables) {
    return {{"format", "isotally.tables.1"},
            {"tables", {{"version", tables.version}, {"digest", tables.digest}}}};
}

void print(std::ostream& out, const Json& json) {
    out << json.dump(2) << "\n";
}

void print(std::ostream& out, const TablesRequest& request, const TextTable& table) {
    out << (request.csv ? as_csv(table) : aligned(table, Overflow::cut));
}

std::vector<std::string> listed_kinds() {
    std::vector<std::string> kinds;
    for (const FileSchema& schema : file_schemas())
        if (schema.listed)
            kinds.push_back(schema.kind);
    return kinds;
}

const FileSchema& wanted_kind(const std::string& kind) {
    const FileSchema* schema = schema_of_kind(kind);
    if (schema && schema->listed)
        return *schema;
    const std::vector<std::string> kinds = listed_kinds();
    throw Error(ErrorKind::usage, "argument KIND",
                "unknown kind " + in_quotes(kind) + ", expected one of " + joined(kinds) +
                    did_you_mean(kind, kinds));
}

void check_request(const TablesRequest& request) {
    if (request.json && request.csv)
        throw Error(ErrorKind::usage, "option --csv", "--json and --csv exclude each other");
    const int others = request.lint + request.summary + !request.export_folder.empty();
    if (others + !request.kind.empty() > 1)
        throw Error(ErrorKind::usage, "command tables",
                    "expected only one of KIND, --lint, --summary and --export");
}

int lint(const TablesRequest& request, const std::vector<TableFile>& files, std::ostream& out,
         std::ostream& err) {
    std::vector<Fault> faults = lint_tables(files);
    if (faults.empty() && request.chemistry_faults)
        faults = request.chemistry_faults(parse_tables(files));
    if (request.json) {
        Json list = Json::array();
        for (const Fault& fault : faults)
            list.push_back({{"where", fault.where}, {"message", fault.message}});
        print(out, {{"format", "isotally.tables.1"}, {"faults", std::move(list)}});
    } else if (request.csv) {
        TextTable table{{{"where"}, {"message"}}, {}};
        for (const Fault& fault : faults)
            table.rows.push_back({fault.where, fault.message});
        out << as_csv(table);
    } else {
        for (const Fault& fault : faults)
            out << fault.where << ": " << fault.message << "\n";
        if (faults.empty())
            out << "no faults in " << files.size() << " files\n";
    }
    if (faults.empty())
        return 0;
    err << faults.size() << (faults.size() == 1 ? " fault" : " faults") << " in the tables\n";
    return exit_tables;
}

void list_kinds(const TablesRequest& request, const TablesView& view, std::ostream& out) {
    TextTable table{{{"kind", false, true}, {"entries", true, true}, {"holds"}}, {}};
    Json entries = Json::array();
    for (const FileSchema& schema : file_schemas()) {
        if (!schema.listed)
            continue;
        const std::size_t count = view.folder.of(schema.file).records.size();
        table.rows.push_back({schema.kind, std::to_string(count), schema.holds});
        entries.push_back({{"kind", schema.kind}, {"entries", count}, {"holds", schema.holds}});
    }
    if (!request.json)
        return print(out, request, table);
    Json json = document(view.tables);
    json["kinds"] = std::move(entries);
    print(out, json);
}

Counts counts_of(const FolderRecords& folder, const FileSchema& schema, const std::string& column) {
    Counts counts;
    const Column* description = find_column(schema.columns, column);
    if (!description || description->words.empty())
        return counts;
    for (const std::string& word : description->words) {
        std::size_t count = 0;
        for (const Record& record : folder.of(schema.file).records)
            count += record.text(column) == word;
        counts.emplace_back(word, count);
    }
    return counts;
}

TextTable summary_table(const FolderRecords& folder, const std::string& column) {
    TextTable table{{{column == "use" ? "use" : "kind", false, true}, {"entries", true, true}}, {}};
    for (const FileSchema& schema : file_schemas()) {
        const Counts counts = counts_of(folder, schema, column);
        if (counts.empty() && column != "status")
            continue;
        std::vector<std::string> row{schema.kind, std::to_string(folder.of(schema.file).records.size())};
        for (const auto& [word, count] : counts) {
            const auto same = [&name = word](const TextColumn& known) { return known.title == name; };
            if (std::none_of(table.columns.begin(), table.columns.end(), same))
                table.columns.push_back({word, true, true});
            row.push_back(std::to_string(count));
        }
        table.rows.push_back(std::move(row));
    }
    for (auto& row : table.rows)
        row.resize(table.columns.size(), "-");
    return table;
}

Json summary_json(const TablesView& view, const Counts& evidence) {
    Json kinds = Json::object();
    for (const FileSchema& schema : file_schemas()) {
        Json kind{{"entries", view.folder.of(schema.file).records.size()}};
        for (const char* column : {"status", "use"})
            for (const auto& [word, count] : counts_of(view.folder, schema, column))
                kind[column][word] = count;
        kinds[schema.kind] = std::move(kind);
    }
    Json json = document(view.tables);
    json["summary"] = std::move(kinds);
    if (!evidence.empty())
        json["evidence"] = Json::object();
    for (const auto& [what, count] : evidence)
        json["evidence"][what] = count;
    return json;
}

void summary(const TablesRequest& request, const TablesView& view, std::ostream& out) {
    const Counts evidence = request.evidence_counts ? request.evidence_counts(view.tables) : Counts{};
    if (request.json)
        return print(out, summary_json(view, evidence));
    print(out, request, summary_table(view.folder, "status"));
    out << "\n";
    print(out, request, summary_table(view.folder, "use"));
    if (evidence.empty())
        return;
    TextTable table{{{"evidence", false, true}, {"entries", true, true}}, {}};
    for (const auto& [what, count] : evidence)
        table.rows.push_back({what, std::to_string(count)});
    out << "\n";
    print(out, request, table);
}

void list_entries(const TablesRequest& request, const TablesView& view, const FileSchema& schema,
                  const std::vector<TableFile>& files, std::ostream& out) {
    std::vector<const Record*> records;
    for (const Record& record : view.folder.of(schema.file).records)
        records.push_back(&record);
    if (request.json) {
        Json json = document(view.tables), entries = Json::array();
        for (const Record* record : records)
            entries.push_back(record_json(view, schema, *record));
        json["kind"] = schema.kind;
        json["entries"] = std::move(entries);
        return print(out, json);
    }
    if (!request.csv)
        return print(out, request, listing(view, schema));
    for (const TableFile& file : files)
        if (file.name == schema.file && file.name.ends_with(".csv")) {
            out << file.text;
            return;
        }
    out << as_csv(full_listing(view, schema, records));
}

void show_entry(const TablesRequest& request, const TablesView& view, const FileSchema& schema,
                std::ostream& out) {
    const std::vector<const Record*> records = find_entries(view, schema, request.id);
    if (request.csv) {
        out << as_csv(full_listing(view, schema, records));
    } else if (!request.json) {
        out << entry_text(view, schema, records);
    } else {
        Json json = document(view.tables), entries = Json::array(), sources = Json::array();
        for (const Record* record : records)
            entries.push_back(entry_json(view, schema, *record));
        for (const Source* source : sources_of(view, schema, records))
            sources.push_back(
                {{"id", source->id}, {"citation", source->citation}, {"csl", Json::parse(source->json)}});
        json["kind"] = schema.kind;
        json["id"] = request.id;
        json["entries"] = std::move(entries);
        json["sources"] = std::move(sources);
        print(out, json);
    }
}

}  // namespace

int tables_command(const TablesRequest& request, const Tables& tables, const std::vector<TableFile>& files,
                   std::ostream& out, std::ostream& err) {
    check_request(request);
    if (request.lint)
        return lint(request, files, out, err);
    if (!request.export_folder.empty()) {
        write_table_folder(files, request.export_folder);
        return 0;
    }
    if (request.kind == "datapackage") {
        out << datapackage_text(tables.version);
        return 0;
    }
    const FileSchema* schema = request.kind.empty() ? nullptr : &wanted_kind(request.kind);
    FaultList faults;
    const FolderRecords folder = read_records(files, faults);
    const TablesView view{tables, folder};
    if (request.summary)
        summary(request, view, out);
    else if (!schema)
        list_kinds(request, view, out);
    else if (request.id.empty())
        list_entries(request, view, *schema, files, out);
    else
        show_entry(request, view, *schema, out);
    return 0;
}

}  // namespace isotally
