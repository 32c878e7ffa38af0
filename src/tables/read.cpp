#include <algorithm>
#include <utility>

#include "tables/citation.hpp"
#include "tables/digest.hpp"
#include "tables/plain_text.hpp"
#include "tables/records.hpp"

namespace isotally {

namespace {

Provenance provenance_of(const Record& record) {
    return {record.text("source"),     record.text("locator"), record.text("status"),
            record.text("confidence"), record.text("note"),    record.line};
}

Figure figure_of(const Record& record) {
    return {record.number("value"), record.number("sd"), provenance_of(record)};
}

double number_or_zero(const Record& record, std::string_view column) {
    return record.has(column) ? record.number(column) : 0;
}

std::optional<double> optional_number(const Record& record, std::string_view column) {
    return record.has(column) ? std::optional(record.number(column)) : std::nullopt;
}

Substituent substituent_of(const Record& record) {
    return {record.text("id"),
            record.text("name"),
            record.text("smiles"),
            record.text("smarts"),
            static_cast<int>(number_or_zero(record, "rank")),
            record.text("like"),
            record.text("kind"),
            record.text("prefix"),
            record.text("principal"),
            {},
            record.line};
}

Constant constant_of(const Record& record) {
    return {record.text("substituent"), record.text("quantity"), figure_of(record), record.at("use").flag};
}

Reaction reaction_of(const Record& record) {
    return {record.text("id"),         record.text("family"),    record.text("name"),
            record.text("conditions"), record.text("new_group"), record.at("has_acid").flag,
            record.text("note"),       record.text("instead"),   {}};
}

State state_of(const Record& record) {
    return {split_at_blanks(record.text("reactions")),
            record.text("group"),
            record.text("state"),
            number_or_zero(record, "acid_from"),
            number_or_zero(record, "acid_to"),
            record.text("both_forms"),
            provenance_of(record)};
}

Ban ban_of(const Record& record) {
    return {record.text("id"),     split_at_blanks(record.text("reactions")),
            record.text("smarts"), record.text("unless"),
            record.text("reason"), record.text("instead"),
            provenance_of(record)};
}

Caution caution_of(const Record& record) {
    return {record.text("code"),
            split_at_blanks(record.text("reactions")),
            record.text("substrate_smarts"),
            record.text("product_smarts"),
            static_cast<int>(record.number("severity")),
            record.text("text"),
            provenance_of(record)};
}

Measurement measurement_of(const Record& record) {
    Measurement measurement;
    measurement.id = record.text("id");
    measurement.reaction = record.text("reaction");
    measurement.substrate = record.text("substrate");
    measurement.method = record.text("method");
    measurement.basis = record.text("basis");
    measurement.control = record.text("control");
    measurement.temperature_C = optional_number(record, "temperature_C");
    measurement.acid_percent = optional_number(record, "acid_percent");
    for (const Record& part : record.parts)
        measurement.products.push_back(
            {part.text("smiles"), part.number("percent"), optional_number(part, "sd")});
    measurement.complete = record.at("complete").flag;
    measurement.use = record.text("use");
    measurement.use_reason = record.text("use_reason");
    measurement.from = provenance_of(record);
    return measurement;
}

RateFigure rate_of(const Record& record) {
    RateFigure rate;
    rate.id = record.text("id");
    rate.reaction = record.text("reaction");
    rate.substrate = record.text("substrate");
    rate.relation = record.text("relation");
    rate.temperature_C = optional_number(record, "temperature_C");
    rate.acid_percent = optional_number(record, "acid_percent");
    rate.value = record.number("value");
    rate.sd_log10 = record.number("sd_log10");
    rate.use = record.text("use");
    rate.use_reason = record.text("use_reason");
    rate.from = provenance_of(record);
    return rate;
}

template <class Build>
auto build_all(const FolderRecords& folder, std::string_view file, Build build) {
    std::vector<decltype(build(std::declval<const Record&>()))> result;
    for (const Record& record : folder.of(file).records)
        result.push_back(build(record));
    return result;
}

void attach_figures(const FolderRecords& folder, Tables& tables) {
    for (const Constant& constant : tables.constants)
        if (constant.use)
            tables.substituents[static_cast<std::size_t>(find_substituent(tables, constant.substituent))]
                .constants[constant.quantity] = constant.figure;
    for (const Record& record : folder.of("reaction_figures.csv").records)
        tables.reactions[static_cast<std::size_t>(find_reaction(tables, record.text("reaction")))]
            .figures[record.text("quantity")] = figure_of(record);
}

}  // namespace

Tables parse_tables(const std::vector<TableFile>& files) {
    FaultList faults;
    const FolderRecords folder = read_records(files, faults);
    check_records(folder, faults);
    if (const std::vector<Fault> found = faults.take(); !found.empty())
        throw Error(ErrorKind::tables, found[0].where, found[0].message);

    Tables tables;
    tables.version = folder.version;
    tables.digest = digest_of(files);
    tables.substituents = build_all(folder, "substituents.csv", substituent_of);
    tables.constants = build_all(folder, "constants.csv", constant_of);
    tables.reactions = build_all(folder, "reactions.csv", reaction_of);
    tables.model = build_all(folder, "model.csv", [](const Record& record) {
        return ModelFigure{record.text("family"), record.text("quantity"), figure_of(record)};
    });
    tables.states = build_all(folder, "states.csv", state_of);
    tables.bans = build_all(folder, "bans.csv", ban_of);
    tables.cautions = build_all(folder, "cautions.csv", caution_of);
    tables.measurements = build_all(folder, "measurements.json", measurement_of);
    tables.rates = build_all(folder, "factors.csv", rate_of);
    for (RateFigure& rate : build_all(folder, "rates.csv", rate_of))
        tables.rates.push_back(std::move(rate));
    tables.names = build_all(folder, "names.csv", [](const Record& record) {
        return Name{record.text("name"), record.text("smiles"), record.at("preferred").flag,
                    provenance_of(record)};
    });
    tables.sources = build_all(folder, "sources.json", [](const Record& record) {
        return Source{record.text("id"), citation_of(record.json), record.json};
    });
    attach_figures(folder, tables);
    return tables;
}

}  // namespace isotally
