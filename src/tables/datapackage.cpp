#include <cmath>
#include <nlohmann/json.hpp>

#include "tables/columns.hpp"

namespace isotally {

namespace {

using Json = nlohmann::ordered_json;

std::string type_name(const Column& column, bool in_json) {
    switch (column.type) {
    case FieldType::number:
        return "number";
    case FieldType::integer:
        return "integer";
    case FieldType::flag:
        return "boolean";
    case FieldType::parts:
        return "array";
    default:
        return in_json && column.type == FieldType::text ? "any" : "string";
    }
}

Json constraints(const Column& column, const FileSchema& schema) {
    Json result = Json::object();
    if (column.required)
        result["required"] = true;
    for (const auto& key : schema.keys)
        if (key.size() == 1 && key[0] == column.name)
            result["unique"] = true;
    if (!column.words.empty())
        result["enum"] = column.words;
    if (column.positive)
        result["exclusiveMinimum"] = 0;
    else if (std::isfinite(column.minimum))
        result["minimum"] = column.minimum;
    if (std::isfinite(column.maximum))
        result["maximum"] = column.maximum;
    return result;
}

Json field(const Column& column, const FileSchema& schema, bool in_json) {
    Json result{{"name", column.name}, {"type", type_name(column, in_json)}};
    if (!column.unit.empty())
        result["unit"] = column.unit;
    result["description"] = column.description;
    if (column.type == FieldType::flag && !in_json) {
        result["trueValues"] = {"yes"};
        result["falseValues"] = {"no"};
    }
    if (Json found = constraints(column, schema); !found.empty())
        result["constraints"] = std::move(found);
    if (!schema.part.empty() && column.type == FieldType::parts) {
        Json items = Json::array();
        for (const Column& part : schema.part)
            items.push_back(field(part, {}, true));
        result["items"] = std::move(items);
    }
    return result;
}

Json resource(const FileSchema& schema) {
    const bool in_json = schema.file.ends_with(".json");
    Json fields = Json::array(), foreign = Json::array();
    for (const Column& column : schema.columns) {
        fields.push_back(field(column, schema, in_json));
        if (column.type != FieldType::reference)
            continue;
        const bool itself = column.refers == schema.file;
        const FileSchema* other = schema_of_file(column.refers);
        foreign.push_back({{"fields", column.name},
                           {"reference", {{"resource", itself ? "" : other->kind}, {"fields", "id"}}}});
    }
    Json table{{"fields", std::move(fields)}, {"missingValues", {""}}, {"primaryKey", schema.keys.front()}};
    if (!foreign.empty())
        table["foreignKeys"] = std::move(foreign);
    return {{"name", schema.kind},
            {"path", schema.file},
            {"title", schema.holds},
            {"format", in_json ? "json" : "csv"},
            {"mediatype", in_json ? "application/json" : "text/csv"},
            {"encoding", "utf-8"},
            {"schema", std::move(table)}};
}

}  // namespace

std::string datapackage_text(const std::string& version) {
    Json resources = Json::array();
    for (const FileSchema& schema : file_schemas())
        resources.push_back(resource(schema));
    const Json package{
        {"name", "isotally-tables"},
        {"title", "What isotally knows: substituents, reactions, measurements and where they come from"},
        {"version", version},
        {"resources", std::move(resources)}};
    return package.dump(1) + "\n";
}

}  // namespace isotally
