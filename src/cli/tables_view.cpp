#include "cli/tables_view.hpp"

#include <algorithm>
#include <map>

#include "tables/plain_text.hpp"

namespace isotally {

namespace {

using Json = nlohmann::ordered_json;
using Words = std::vector<std::string>;

/// Columns of a listing, of the rows shown below an entry, and those an entry is looked up by.
/// group, acid, shares and citation are put together from several columns.
struct Layout {
    Words listed, below, found_by;
};

const Layout& layout_of(const std::string& kind) {
    static const std::map<std::string, Layout> layouts{
        {"substituents",
         {{"id", "name", "kind", "group", "like"}, {"id", "name", "group"}, {"id", "name", "smiles"}}},
        {"constants",
         {{"id", "substituent", "quantity", "value", "sd", "use", "status", "source"},
          {"quantity", "value", "sd", "use", "status", "confidence", "source", "locator"},
          {"id", "substituent"}}},
        {"reactions", {{"id", "name", "conditions"}, {"id", "name"}, {"id", "family"}}},
        {"reaction_figures",
         {{}, {"quantity", "value", "sd", "status", "confidence", "source", "locator"}, {"id"}}},
        {"model",
         {{"family", "quantity", "value", "sd", "status", "source", "note"}, {}, {"family", "quantity"}}},
        {"measurements",
         {{"id", "reaction", "temperature_C", "acid_percent", "substrate", "shares", "use", "status"},
          {"id", "reaction", "substrate"},
          {"id", "substrate", "reaction"}}},
        {"factors",
         {{"id", "reaction", "temperature_C", "substrate", "relation", "value", "sd_log10", "use", "status"},
          {},
          {"id", "substrate", "reaction"}}},
        {"rates",
         {{"id", "reaction", "temperature_C", "substrate", "value", "sd_log10", "use", "status"},
          {},
          {"id", "substrate", "reaction"}}},
        {"states",
         {{"reaction", "group", "state", "acid", "both_forms", "status"},
          {"reaction", "group", "state", "acid", "both_forms", "status", "source"},
          {"reaction", "group", "state"}}},
        {"bans", {{"id", "reactions", "reason"}, {"id", "reason", "instead", "status", "source"}, {"id"}}},
        {"cautions",
         {{"code", "severity", "reactions", "text"}, {"code", "severity", "text", "status"}, {"code"}}},
        {"names", {{"name", "smiles", "preferred", "status"}, {}, {"name", "smiles"}}},
        {"sources", {{"id", "citation"}, {}, {"id"}}}};
    return layouts.at(kind);
}

std::string citation(const TablesView& view, const std::string& id) {
    for (const Source& source : view.tables.sources)
        if (source.id == id)
            return source.citation;
    return {};
}

std::string shares(const Record& record) {
    std::string result;
    for (const Record& part : record.parts)
        result += (result.empty() ? "" : " / ") + part.text("percent");
    return result;
}

std::string shown(const TablesView& view, const FileSchema& schema, const Record& record,
                  const std::string& column) {
    if (schema.kind == "substituents" && column == "group")
        return record.has("smiles") ? record.text("smiles") : record.text("smarts");
    if (column == "acid") {
        const bool any =
            !record.has("acid_from") || (record.number("acid_from") == 0 && record.number("acid_to") == 0);
        return any ? "any" : record.text("acid_from") + "-" + record.text("acid_to");
    }
    if (column == "shares")
        return shares(record);
    if (column == "citation")
        return citation(view, record.text("id"));
    return record.text(column);
}

std::string heading(const std::string& column) {
    if (column == "temperature_C")
        return "C";
    return column == "acid_percent" ? "acid %" : column;
}

TextTable text_table(const TablesView& view, const FileSchema& schema, const Words& columns,
                     const std::vector<const Record*>& records) {
    TextTable table;
    for (const std::string& name : columns) {
        const Column* column = find_column(schema.columns, name);
        const bool number =
            column && (column->type == FieldType::number || column->type == FieldType::integer);
        const bool typed_back =
            column && (column->type == FieldType::id || column->type == FieldType::group ||
                       (column->type == FieldType::reference && name != "source"));
        table.columns.push_back({heading(name), number, number || typed_back});
    }
    for (const Record* record : records) {
        std::vector<std::string> row;
        for (const std::string& name : columns)
            row.push_back(shown(view, schema, *record, name));
        table.rows.push_back(std::move(row));
    }
    return table;
}

std::vector<const Record*> all_of(const TablesView& view, const FileSchema& schema) {
    std::vector<const Record*> result;
    for (const Record& record : view.folder.of(schema.file).records)
        result.push_back(&record);
    return result;
}

std::string lower(std::string text) {
    for (char& c : text)
        if (c >= 'A' && c <= 'Z')
            c = static_cast<char>(c - 'A' + 'a');
    return text;
}

template <class Belongs>
void add_rows(const TablesView& view, std::vector<RelatedRows>& all, const char* title, const char* file,
              Belongs belongs) {
    RelatedRows related{title, schema_of_file(file), {}};
    for (const Record& record : view.folder.of(file).records)
        if (belongs(record))
            related.rows.push_back(&record);
    if (!related.rows.empty())
        all.push_back(std::move(related));
}

bool concerns(const Record& row, const Record& reaction) {
    return applies_to(split_at_blanks(row.text("reactions")), reaction.text("id"), reaction.text("family"));
}

std::string field_lines(const TablesView& view, const FileSchema& schema, const Record& record) {
    TextTable table{{{"", false, true}, {"", false, false}}, {}};
    if (schema.open)
        table.rows.push_back({"citation", citation(view, record.text("id"))});
    for (const Column& column : schema.columns)
        if (!record.text(column.name).empty())
            table.rows.push_back(
                {column.name, record.text(column.name) +
                                  (column.unit.empty() || column.unit == "1" ? "" : " " + column.unit)});
    const std::string text = aligned(table, Overflow::wrap);
    return text.substr(text.find('\n') + 1);
}

TextTable part_table(const FileSchema& schema, const Record& record) {
    TextTable table;
    for (const Column& column : schema.part)
        table.columns.push_back(
            {column.name, column.type == FieldType::number, column.type == FieldType::number});
    for (const Record& part : record.parts) {
        std::vector<std::string> row;
        for (const Column& column : schema.part)
            row.push_back(part.text(column.name));
        table.rows.push_back(std::move(row));
    }
    return table;
}

std::string related_text(const TablesView& view, const RelatedRows& related, bool cited) {
    const Layout& layout = layout_of(related.schema->kind);
    TextTable table = cited ? text_table(view, *related.schema, {}, {})
                            : text_table(view, *related.schema, layout.below, related.rows);
    if (cited) {
        Words columns =
            layout.listed.empty() ? Words{"id", "quantity", "value", "sd", "status"} : layout.listed;
        std::erase(columns, "source");
        columns.push_back("locator");
        table = text_table(view, *related.schema, columns, related.rows);
    }
    for (const Record* row : related.rows)
        table.remarks.push_back(cited ? "" : row->text("note"));
    return "\n" + related.title + "\n" + aligned(table, Overflow::wrap, 2);
}

Json cell_json(const Column& column, const Cell& cell) {
    switch (cell.kind) {
    case Cell::Kind::text:
        if (column.type == FieldType::references)
            return split_at_blanks(cell.text);
        return cell.text;
    case Cell::Kind::number:
        return cell.number;
    case Cell::Kind::flag:
        return cell.flag;
    default:
        return nullptr;
    }
}

}  // namespace

TextTable listing(const TablesView& view, const FileSchema& schema) {
    return text_table(view, schema, layout_of(schema.kind).listed, all_of(view, schema));
}

TextTable full_listing(const TablesView& view, const FileSchema& schema,
                       const std::vector<const Record*>& records) {
    if (schema.open)
        return text_table(view, schema, {"id", "type", "citation"}, records);
    const bool with_parts = !schema.part.empty();
    TextTable table;
    for (const Column& column : schema.columns) {
        if (column.type != FieldType::parts)
            table.columns.push_back({column.name});
        else
            for (const Column& part : schema.part)
                table.columns.push_back({part.name == "smiles" ? "product" : part.name});
    }
    const auto add_row = [&](const Record& record, const Record& part) {
        std::vector<std::string> row;
        for (const Column& column : schema.columns) {
            if (column.type != FieldType::parts)
                row.push_back(record.text(column.name));
            else
                for (const Column& inner : schema.part)
                    row.push_back(part.text(inner.name));
        }
        table.rows.push_back(std::move(row));
    };
    for (const Record* record : records) {
        if (!with_parts)
            add_row(*record, {});
        for (const Record& part : record->parts)
            add_row(*record, part);
    }
    return table;
}

std::vector<const Record*> find_entries(const TablesView& view, const FileSchema& schema,
                                        const std::string& id) {
    Words known;
    const auto matching = [&](const std::string& column, const std::string& wanted) {
        std::vector<const Record*> found;
        for (const Record& record : view.folder.of(schema.file).records) {
            const std::string& text = record.text(column);
            if (text.empty())
                continue;
            if (text == wanted || (column == "name" && lower(text) == lower(wanted)))
                found.push_back(&record);
            known.push_back(text);
        }
        return found;
    };
    for (const std::string& column : layout_of(schema.kind).found_by)
        if (auto found = matching(column, id); !found.empty())
            return found;
    if (find_column(schema.columns, "substrate"))
        for (const Name& name : view.tables.names)
            if (lower(name.name) == lower(id))
                if (auto found = matching("substrate", name.smiles); !found.empty())
                    return found;
    throw Error(ErrorKind::usage, "argument ID",
                "no entry of " + schema.kind + " is called " + in_quotes(id) +
                    ", expected one that `isotally tables " + schema.kind + "` lists" +
                    did_you_mean(id, known));
}

std::vector<RelatedRows> related_rows(const TablesView& view, const FileSchema& schema,
                                      const Record& record) {
    std::vector<RelatedRows> all;
    const std::string& id = record.text("id");
    const auto with = [](std::string column, std::string value) {
        return [column = std::move(column), value = std::move(value)](const Record& row) {
            return row.text(column) == value;
        };
    };
    if (schema.kind == "substituents") {
        add_rows(view, all, "constants", "constants.csv", with("substituent", id));
        add_rows(view, all, "states", "states.csv", [&](const Record& row) {
            const std::string& group = row.text("group");
            const std::string principal =
                record.text("principal").substr(0, record.text("principal").find(':'));
            return group == id || row.text("state") == id || group == "kind:" + record.text("kind") ||
                   (record.has("principal") && group == "principal:" + principal);
        });
        add_rows(view, all, "stands_in_for", "substituents.csv", with("like", id));
    } else if (schema.kind == "reactions") {
        add_rows(view, all, "figures", "reaction_figures.csv", with("reaction", id));
        add_rows(view, all, "states", "states.csv", [&](const Record& row) { return concerns(row, record); });
        add_rows(view, all, "bans", "bans.csv", [&](const Record& row) { return concerns(row, record); });
        add_rows(view, all, "cautions", "cautions.csv",
                 [&](const Record& row) { return concerns(row, record); });
    } else if (schema.kind == "sources") {
        for (const FileSchema& citing : file_schemas())
            if (find_column(citing.columns, "source"))
                add_rows(view, all, citing.kind.c_str(), citing.file.c_str(), with("source", id));
    }
    return all;
}

std::string entry_text(const TablesView& view, const FileSchema& schema,
                       const std::vector<const Record*>& records) {
    std::string result;
    for (const Record* record : records) {
        result += (result.empty() ? "" : "\n") + field_lines(view, schema, *record);
        if (!record->parts.empty())
            result += "\nproducts\n" + aligned(part_table(schema, *record), Overflow::wrap, 2);
        for (const RelatedRows& related : related_rows(view, schema, *record))
            result += related_text(view, related, schema.kind == "sources");
    }
    TextTable sources{{{"", false, true}, {"", false, false}}, {}};
    if (schema.kind != "sources")
        for (const Source* source : sources_of(view, schema, records))
            sources.rows.push_back({source->id, source->citation});
    if (sources.rows.empty())
        return result;
    const std::string text = aligned(sources, Overflow::wrap, 2);
    return result + "\nsources\n" + text.substr(text.find('\n') + 1);
}

nlohmann::ordered_json record_json(const TablesView& view, const FileSchema& schema, const Record& record) {
    if (schema.open)
        return {{"id", record.text("id")},
                {"citation", citation(view, record.text("id"))},
                {"csl", Json::parse(record.json)}};
    Json result = Json::object();
    for (const Column& column : schema.columns) {
        if (column.type != FieldType::parts) {
            result[column.name] = cell_json(column, record.at(column.name));
            continue;
        }
        Json parts = Json::array();
        for (const Record& part : record.parts) {
            Json object = Json::object();
            for (const Column& inner : schema.part)
                object[inner.name] = cell_json(inner, part.at(inner.name));
            parts.push_back(std::move(object));
        }
        result[column.name] = std::move(parts);
    }
    return result;
}

nlohmann::ordered_json entry_json(const TablesView& view, const FileSchema& schema, const Record& record) {
    Json result = record_json(view, schema, record);
    Json cited_by = Json::object();
    for (const RelatedRows& related : related_rows(view, schema, record)) {
        Json rows = Json::array();
        for (const Record* row : related.rows)
            rows.push_back(record_json(view, *related.schema, *row));
        (schema.kind == "sources" ? cited_by : result)[related.title] = std::move(rows);
    }
    if (schema.kind == "sources")
        result["cited_by"] = std::move(cited_by);
    return result;
}

std::vector<const Source*> sources_of(const TablesView& view, const FileSchema& schema,
                                      const std::vector<const Record*>& records) {
    Words ids;
    const auto note = [&](const Record& record) {
        if (record.has("source"))
            ids.push_back(record.text("source"));
    };
    for (const Record* record : records) {
        note(*record);
        for (const RelatedRows& related : related_rows(view, schema, *record))
            for (const Record* row : related.rows)
                note(*row);
    }
    std::vector<const Source*> result;
    for (const Source& source : view.tables.sources)
        if (std::find(ids.begin(), ids.end(), source.id) != ids.end())
            result.push_back(&source);
    return result;
}

}  // namespace isotally
