#include "tables/columns.hpp"

#include <algorithm>
#include <cmath>
#include <utility>

#include "tables/faults.hpp"
#include "tables/plain_text.hpp"

namespace isotally {

namespace {

using Columns = std::vector<Column>;
using Type = FieldType;

Column required(Column column) {
    column.required = true;
    return column;
}

Column words(std::string name, std::string description, std::vector<std::string> allowed) {
    return {.name = std::move(name),
            .type = Type::word,
            .description = std::move(description),
            .words = std::move(allowed)};
}

Column text(std::string name, std::string description) {
    return {.name = std::move(name), .type = Type::text, .description = std::move(description)};
}

Column of_type(Type type, std::string name, std::string description) {
    return {.name = std::move(name), .type = type, .description = std::move(description)};
}

Column flag(std::string name, std::string description) {
    return required(of_type(Type::flag, std::move(name), std::move(description)));
}

Column own_id() {
    return required(of_type(Type::id, "id", "name of the entry, unique in this file"));
}

Column refers(std::string name, std::string file, std::string description) {
    return {.name = std::move(name),
            .type = Type::reference,
            .description = std::move(description),
            .refers = std::move(file)};
}

Column reaction() {
    return required(refers("reaction", "reactions.csv", "reaction (conditions) it holds for"));
}

Column substrate() {
    return required(of_type(Type::smiles, "substrate", "molecule fed, SMILES"));
}

Column number(std::string name, std::string unit, double minimum, double maximum, std::string description) {
    return {.name = std::move(name),
            .type = Type::number,
            .description = std::move(description),
            .unit = std::move(unit),
            .minimum = minimum,
            .maximum = maximum};
}

Column value(std::string unit, std::string description) {
    return required({.name = "value",
                     .type = Type::number,
                     .description = std::move(description),
                     .unit = std::move(unit)});
}

Column sd(std::string name, std::string unit, std::string description) {
    return {.name = std::move(name),
            .type = Type::number,
            .description = std::move(description),
            .unit = std::move(unit),
            .minimum = 0};
}

Column over_zero(Column column) {
    column.positive = true;
    return column;
}

Column temperature() {
    return number("temperature_C", "degree Celsius", -150, 500, "temperature; empty: not stated");
}

Column acid(std::string name, std::string description) {
    return number(std::move(name), "percent by weight", 0, 150, std::move(description));
}

Column acid_percent() {
    return acid("acid_percent", "sulfuric acid, nitric acid not counted, oleum over 100; empty: not stated");
}

std::vector<std::string> uses() {
    return {"yes", "weak", "partial", "bound", "no"};
}

Columns with_provenance(Columns columns) {
    columns.push_back(
        refers("source", "sources.json", "where the figure comes from; empty only for practice and derived"));
    columns.push_back(text("locator", "page, table or row in the source; for derived: the command"));
    columns.push_back(
        required(words("status", "seen (read), memory (recalled), practice (no source), derived, invented",
                       {"seen", "memory", "practice", "derived", "invented"})));
    columns.push_back(words("confidence", "how far the collector trusts it", {"high", "medium", "low"}));
    columns.push_back(text("note", "whatever else is known"));
    return columns;
}

Columns factor_columns(bool with_relation) {
    Columns columns{own_id(), reaction(), temperature(), acid_percent(), substrate()};
    if (with_relation)
        columns.push_back(
            required(words("relation", "position against the substituent", {"ortho", "meta", "para"})));
    columns.push_back(
        over_zero(value("1", with_relation ? "rate of this position against one position of benzene"
                                           : "rate of the molecule against benzene")));
    columns.push_back(
        over_zero(required(sd("sd_log10", "1", "standard deviation of its decimal logarithm"))));
    columns.push_back(required(
        words("use", "yes, weak (wide), partial, bound (known only as less or more than), no", uses())));
    columns.push_back(text("use_reason", "why it is not used, or not fully"));
    return with_provenance(std::move(columns));
}

FileSchema substituents() {
    return {
        .file = "substituents.csv",
        .kind = "substituents",
        .holds = "groups on a benzene ring, and classes of groups",
        .keys = {{"id"}, {"smiles"}},
        .columns = {
            own_id(),
            required(text("name", "what it is called")),
            of_type(Type::smiles, "smiles", "the group, its attachment first as *; empty for a class"),
            of_type(Type::smarts, "smarts", "class only: pattern on the group, its attachment as [#0]"),
            {.name = "rank",
             .type = Type::integer,
             .description = "class only: the lowest rank that matches wins, ties by id",
             .minimum = 0,
             .maximum = 100000},
            refers("like", "substituents.csv", "group whose constants stand in for missing ones"),
            required(words(
                "kind", "what sort of group it is",
                {"alkyl", "halogen", "donor", "acceptor", "cation", "benzylic", "aryl", "alkenyl", "silyl"})),
            text("prefix", "in names: nitro, propan-2-yl; empty: none"),
            text("principal",
                 "in names: the characteristic group that gives a suffix or a parent; empty: prefix only"),
            text("note", "whatever else is known")}};
}

FileSchema constants() {
    return {.file = "constants.csv",
            .kind = "constants",
            .holds = "substituent constants, one used and others beside it",
            .keys = {{"id"}},
            .columns = with_provenance(
                {own_id(), required(refers("substituent", "substituents.csv", "group")),
                 required(words("quantity", "Hammett and Brown-Okamoto constants; Charton's steric constant",
                                {"sigma_m", "sigma_p", "sigma_m_plus", "sigma_p_plus", "charton_nu"})),
                 value("1", "the constant"), over_zero(required(sd("sd", "1", "its standard deviation"))),
                 flag("use", "yes: the model uses this row (one a group and quantity)")})};
}

FileSchema reactions() {
    Column instead = text("instead", "what people do where a ring lies below the floor");
    instead.may_be_missing = true;
    return {.file = "reactions.csv",
            .kind = "reactions",
            .holds = "conditions under which a group is put on",
            .keys = {{"id"}},
            .columns = {own_id(), required(of_type(Type::id, "family", "kind of new group: nitration")),
                        required(text("name", "what it is called")),
                        required(text("conditions", "reagent and medium in one line")),
                        required(of_type(Type::smiles, "new_group",
                                         "the group it puts on, its attachment first as *")),
                        flag("has_acid", "yes: the strength of the sulfuric acid is a condition"),
                        std::move(instead), text("note", "said with every answer: reversible, rearranging")}};
}

FileSchema reaction_figures() {
    return {
        .file = "reaction_figures.csv",
        .kind = "reaction_figures",
        .holds = "ranges, floors, reaches and yields of the reactions",
        .keys = {{"id"}, {"reaction", "quantity"}},
        .columns = with_provenance(
            {own_id(), reaction(),
             required(of_type(Type::id, "quantity", "which figure; its unit is part of its name")),
             value("", "the figure"), sd("sd", "", "its standard deviation; empty: a limit or a default")}),
        .listed = false};
}

FileSchema model() {
    return {.file = "model.csv",
            .kind = "model",
            .holds = "priors and standard deviations of the model",
            .keys = {{"family", "quantity"}},
            .columns = with_provenance({required(of_type(Type::id, "family", "family of reactions, or all")),
                                        required(of_type(Type::id, "quantity", "which figure")),
                                        value("", "the figure"), sd("sd", "", "its standard deviation")})};
}

FileSchema measurements() {
    return {
        .file = "measurements.json",
        .kind = "measurements",
        .holds = "isomer shares of one substrate",
        .keys = {{"id"}},
        .columns = with_provenance(
            {own_id(), reaction(), temperature(), acid_percent(), substrate(),
             required(of_type(Type::parts, "products", "the isomers found")),
             flag("complete", "true: every isomer above about 1 percent is listed"),
             required(
                 words("use", "yes, weak (wide), partial (not all isomers), bound (a limit), no", uses())),
             text("use_reason", "why it is not used, or not fully"), text("method", "how it was measured"),
             text("basis", "how the percents were stated"),
             text("control", "kinetic, equilibrium, catalysed")}),
        .part = {required(of_type(Type::smiles, "smiles", "isomer")),
                 required(number("percent", "percent by mole", 0, 100, "its share of the isomers")),
                 over_zero(sd("sd", "percent by mole", "standard deviation where the source gives one"))}};
}

FileSchema states() {
    Column group = required(of_type(Type::group, "group", "substituent, kind:acceptor or principal:ketone"));
    return {
        .file = "states.csv",
        .kind = "states",
        .holds = "what a medium makes of a group",
        .keys = {{"reactions", "group", "state", "acid_from"}},
        .columns = with_provenance(
            {required(of_type(Type::references, "reactions", "reactions or families, separated by blanks")),
             std::move(group), required(refers("state", "substituents.csv", "the group it becomes")),
             acid("acid_from", "from this acid strength; both 0 or empty: any"),
             acid("acid_to", "up to this acid strength"),
             required(words("both_forms", "whether the free form reacts as well", {"yes", "minor", "no"}))})};
}

FileSchema bans() {
    return {.file = "bans.csv",
            .kind = "bans",
            .holds = "what does not go, and what people do instead",
            .keys = {{"id"}},
            .columns = with_provenance(
                {own_id(),
                 required(of_type(Type::references, "reactions",
                                  "reactions or families, separated by blanks; * for all")),
                 required(of_type(Type::smarts, "smarts", "pattern on the whole molecule")),
                 of_type(Type::smarts, "unless", "not banned where this matches"),
                 required(text("reason", "one sentence")), text("instead", "what people do instead")})};
}

FileSchema cautions() {
    return {.file = "cautions.csv",
            .kind = "cautions",
            .holds = "hazards shown with an answer, the worst first",
            .keys = {{"code", "reactions", "substrate_smarts", "product_smarts"}},
            .columns = with_provenance(
                {required(of_type(Type::id, "code", "short name of the hazard")),
                 required(of_type(Type::references, "reactions",
                                  "reactions or families, separated by blanks; * for all")),
                 of_type(Type::smarts, "substrate_smarts", "pattern on the substrate; empty: any"),
                 of_type(Type::smarts, "product_smarts", "pattern on the product; empty: any"),
                 required({.name = "severity",
                           .type = Type::integer,
                           .description = "100 worst",
                           .minimum = 0,
                           .maximum = 100}),
                 required(text("text", "one sentence"))})};
}

FileSchema names() {
    return {.file = "names.csv",
            .kind = "names",
            .holds = "names of molecules that can be typed",
            .keys = {{"name"}},
            .columns = with_provenance({required(text("name", "case is ignored")),
                                        required(of_type(Type::smiles, "smiles", "the molecule")),
                                        flag("preferred", "yes: printed as well as read")})};
}

FileSchema sources() {
    return {.file = "sources.json",
            .kind = "sources",
            .holds = "where the figures come from (CSL-JSON)",
            .keys = {{"id"}},
            .columns = {own_id(), required(of_type(Type::id, "type", "CSL type: article-journal, book")),
                        text("title", "title"), text("container-title", "journal or book"),
                        text("volume", "volume"), text("page", "first page or pages"),
                        text("publisher", "publisher"), text("URL", "address"),
                        text("DOI", "digital object identifier"),
                        text("note", "what could not be taken apart")},
            .open = true};
}

}  // namespace

const std::vector<FileSchema>& file_schemas() {
    static const std::vector<FileSchema> schemas{substituents(),
                                                 constants(),
                                                 reactions(),
                                                 reaction_figures(),
                                                 model(),
                                                 measurements(),
                                                 {.file = "factors.csv",
                                                  .kind = "factors",
                                                  .holds = "partial rate factors of one position",
                                                  .keys = {{"id"}},
                                                  .columns = factor_columns(true)},
                                                 {.file = "rates.csv",
                                                  .kind = "rates",
                                                  .holds = "relative rates of whole molecules",
                                                  .keys = {{"id"}},
                                                  .columns = factor_columns(false)},
                                                 states(),
                                                 bans(),
                                                 cautions(),
                                                 names(),
                                                 sources()};
    return schemas;
}

const FileSchema* schema_of_file(std::string_view file) {
    for (const FileSchema& schema : file_schemas())
        if (schema.file == file)
            return &schema;
    return nullptr;
}

const FileSchema* schema_of_kind(std::string_view kind) {
    for (const FileSchema& schema : file_schemas())
        if (schema.kind == kind)
            return &schema;
    return nullptr;
}

const Column* find_column(const std::vector<Column>& columns, std::string_view name) {
    const auto found = std::find_if(columns.begin(), columns.end(),
                                    [&](const Column& column) { return column.name == name; });
    return found == columns.end() ? nullptr : &*found;
}

std::vector<std::string> column_names(const std::vector<Column>& columns) {
    std::vector<std::string> result;
    for (const Column& column : columns)
        result.push_back(column.name);
    return result;
}

std::string expected_text(const Column& column) {
    const auto range = [&] {
        const std::string unit = column.unit.empty() || column.unit == "1" ? "" : " (" + column.unit + ")";
        if (column.positive)
            return " over 0" + unit;
        if (!std::isfinite(column.minimum))
            return unit;
        if (!std::isfinite(column.maximum))
            return " not below " + number_text(column.minimum) + unit;
        return " from " + number_text(column.minimum) + " to " + number_text(column.maximum) + unit;
    };
    switch (column.type) {
    case Type::id:
        return "a word of printable ASCII without blanks";
    case Type::word:
        return "one of " + joined(column.words);
    case Type::text:
        return "a text";
    case Type::number:
        return "a number" + range();
    case Type::integer:
        return "a whole number" + range();
    case Type::flag:
        return "yes or no";
    case Type::smiles:
        return "a SMILES";
    case Type::smarts:
        return "a SMARTS";
    case Type::reference:
        return "an id from " + column.refers;
    case Type::references:
        return "ids or families from reactions.csv separated by blanks, or *";
    case Type::group:
        return "an id from substituents.csv, kind:KIND or principal:GROUP";
    case Type::parts:
        return "a list of objects with " + joined(column_names(schema_of_file("measurements.json")->part));
    }
    return {};
}

}  // namespace isotally
