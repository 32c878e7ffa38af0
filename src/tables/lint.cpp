#include <algorithm>
#include <cmath>
#include <set>
#include <utility>

#include "tables/citation.hpp"
#include "tables/plain_text.hpp"
#include "tables/records.hpp"

namespace isotally {

namespace {

using Lines = std::map<std::string, std::size_t>;  // where an id stands first

struct Known {
    std::map<std::string, Lines, std::less<>> ids;  // by file
    std::set<std::string> families, kinds, principals;
};

std::vector<std::string> words_of(const Lines& ids) {
    std::vector<std::string> result;
    for (const auto& id : ids)
        result.push_back(id.first);
    return result;
}

std::vector<std::string> words_of(const std::set<std::string>& words) {
    return {words.begin(), words.end()};
}

bool usable(const Cell& cell) {
    return cell.kind == Cell::Kind::text;
}

Known gather(const FolderRecords& folder) {
    Known known;
    for (const auto& [file, read] : folder.files)
        for (const Record& record : read.records)
            if (usable(record.at("id")))
                known.ids[file].emplace(record.text("id"), record.line);
    for (const Record& record : folder.of("reactions.csv").records)
        if (usable(record.at("family")))
            known.families.insert(record.text("family"));
    for (const Record& record : folder.of("substituents.csv").records) {
        if (usable(record.at("kind")))
            known.kinds.insert(record.text("kind"));
        // "acid:carboxy": the characteristic group before the colon
        if (usable(record.at("principal")))
            known.principals.insert(record.text("principal").substr(0, record.text("principal").find(':')));
    }
    return known;
}

std::string lower(std::string text) {
    for (char& c : text)
        if (c >= 'A' && c <= 'Z')
            c = static_cast<char>(c - 'A' + 'a');
    return text;
}

void check_keys(const FileSchema& schema, const std::vector<Record>& records, FaultList& faults) {
    for (const std::vector<std::string>& key : schema.keys) {
        std::map<std::vector<std::string>, std::size_t> seen;
        for (const Record& record : records) {
            std::vector<std::string> values;
            for (const std::string& column : key)
                values.push_back(schema.kind == "names" ? lower(record.text(column)) : record.text(column));
            if (values[0].empty())
                continue;
            const auto [first, fresh] = seen.emplace(values, record.line);
            if (fresh)
                continue;
            std::string shown;
            for (const std::string& column : key)
                shown += (shown.empty() ? "" : " ") + record.text(column);
            faults.add(
                schema.file, record.line, key[0],
                in_quotes(shown) + " stands already on line " + std::to_string(first->second) +
                    (key.size() == 1 ? ", expected one entry" : ", expected one entry for " + joined(key)));
        }
    }
}

class RecordChecks {
public:
    RecordChecks(const FolderRecords& folder, const FileSchema& schema, const Known& known, FaultList& faults)
        : folder_(folder), schema_(schema), known_(known), faults_(faults) {}

    void references(const Record& record) const {
        for (const Column& column : schema_.columns) {
            const Cell& cell = record.at(column.name);
            if (!usable(cell))
                continue;
            if (column.type == FieldType::reference)
                reference(record, column, cell.text);
            if (column.type == FieldType::group)
                group(record, column, cell.text);
            if (column.type != FieldType::references || !complete("reactions.csv"))
                continue;
            for (const std::string& word : split_at_blanks(cell.text))
                if (word != "*" && !known_.families.count(word) && !ids("reactions.csv").count(word))
                    unknown(record, column, word, reactions_and_families());
        }
        if (schema_.kind == "model" && complete("reactions.csv") && usable(record.at("family"))) {
            std::vector<std::string> families = words_of(known_.families);
            families.push_back("all");
            if (std::find(families.begin(), families.end(), record.text("family")) == families.end())
                fault(record, "family",
                      "unknown family " + in_quotes(record.text("family")) + ", expected one of " +
                          joined(families) + did_you_mean(record.text("family"), families));
        }
    }

    void provenance(const Record& record) const {
        const std::string& status = record.text("status");
        if (!usable(record.at("status")))
            return;
        if (!record.has("source") && status != "practice" && status != "derived")
            fault(record, "source",
                  "empty, expected an id from sources.json (only practice and derived figures go without)");
        if (!record.has("locator") && status == "derived")
            fault(record, "locator", "empty, expected the command that derives the figure");
    }

    void fault(const Record& record, std::string_view field, std::string message) const {
        faults_.add(schema_.file, record.line, field, std::move(message));
    }

private:
    bool complete(const std::string& file) const {
        const auto found = folder_.files.find(file);
        return found != folder_.files.end() && found->second.complete;
    }

    const Lines& ids(const std::string& file) const {
        static const Lines none;
        const auto found = known_.ids.find(file);
        return found == known_.ids.end() ? none : found->second;
    }

    std::vector<std::string> reactions_and_families() const {
        std::vector<std::string> words = words_of(ids("reactions.csv"));
        words.insert(words.end(), known_.families.begin(), known_.families.end());
        return words;
    }

    void unknown(const Record& record, const Column& column, const std::string& word,
                 const std::vector<std::string>& words) const {
        fault(record, column.name,
              "unknown id " + in_quotes(word) + ", expected " + expected_text(column) +
                  did_you_mean(word, words));
    }

    void reference(const Record& record, const Column& column, const std::string& id) const {
        if (complete(column.refers) && !ids(column.refers).count(id))
            unknown(record, column, id, words_of(ids(column.refers)));
    }

    void group(const Record& record, const Column& column, const std::string& text) const {
        if (!complete("substituents.csv"))
            return;
        for (const auto& [prefix, words] :
             {std::pair{"kind:", &known_.kinds}, std::pair{"principal:", &known_.principals}}) {
            if (!text.starts_with(prefix))
                continue;
            const std::string word = text.substr(std::string_view(prefix).size());
            if (!words->count(word))
                fault(record, column.name,
                      "no substituent has " + in_quotes(text) + ", expected one of " +
                          joined(words_of(*words)) + did_you_mean(word, words_of(*words)));
            return;
        }
        if (!ids("substituents.csv").count(text))
            unknown(record, column, text, words_of(ids("substituents.csv")));
    }

    const FolderRecords& folder_;
    const FileSchema& schema_;
    const Known& known_;
    FaultList& faults_;
};

void check_substituent(const Record& record, const std::map<std::string, std::string>& like,
                       const RecordChecks& checks) {
    if (record.has("smiles") == record.has("smarts"))
        checks.fault(record, "smiles", "expected either smiles (a group) or smarts (a class of groups)");
    if (usable(record.at("smiles")) && !record.text("smiles").starts_with("*"))
        checks.fault(record, "smiles",
                     "found " + in_quotes(record.text("smiles")) +
                         ", expected the attachment first, written *");
    if (usable(record.at("smarts")) && record.text("smarts").find("#0") == std::string::npos)
        checks.fault(record, "smarts",
                     "found " + in_quotes(record.text("smarts")) + ", expected the attachment written [#0]");
    if (record.has("smarts") && !record.has("rank"))
        checks.fault(record, "rank", "empty, expected a rank (a class of groups has one)");
    std::set<std::string> visited;
    std::string id = record.text("id");
    while (!id.empty() && visited.insert(id).second) {
        const auto next = like.find(id);
        id = next == like.end() ? "" : next->second;
    }
    if (!id.empty() && id == record.text("id"))
        checks.fault(record, "like", in_quotes(record.text("like")) + " leads back to the group itself");
}

void check_measurement(const Record& record, const RecordChecks& checks) {
    double sum = 0, variance = 0;
    std::set<std::string> seen;
    for (const Record& part : record.parts) {
        if (part.at("percent").kind != Cell::Kind::number)
            return;
        sum += part.number("percent");
        if (part.has("sd"))
            variance += part.number("sd") * part.number("sd");
        if (usable(part.at("smiles")) && !seen.insert(part.text("smiles")).second)
            checks.fault(record, "products.smiles",
                         "the product " + in_quotes(part.text("smiles")) + " stands twice");
    }
    if (record.parts.empty() || record.text("use") == "no")
        return;  // a row that is not used may show the misprint it is not used for
    const double allowed = std::max(3.0, 3 * std::sqrt(variance));
    if (sum > 100 + allowed)
        checks.fault(record, "products.percent",
                     "the percents add up to " + number_text(sum) + ", expected at most 100 (" +
                         number_text(std::round(10 * allowed) / 10) + " points over are tolerated)");
    if (sum <= 0)
        checks.fault(record, "products.percent", "the percents add up to nothing");
}

void check_used_constants(const FileSchema& schema, const std::vector<Record>& records, FaultList& faults) {
    std::map<std::pair<std::string, std::string>, std::size_t> used;
    for (const Record& record : records) {
        if (!record.at("use").flag || !usable(record.at("substituent")) || !usable(record.at("quantity")))
            continue;
        const auto [first, fresh] =
            used.emplace(std::pair{record.text("substituent"), record.text("quantity")}, record.line);
        if (!fresh)
            faults.add(schema.file, record.line, "use",
                       "a second row with use yes for " + record.text("substituent") + " " +
                           record.text("quantity") + " (the first is on line " +
                           std::to_string(first->second) + "), expected one");
    }
}

/// Temperatures and rho may be below zero, an ortho:para ratio none; all else is an amount over zero.
void check_reaction_figure(const Record& record, const RecordChecks& checks) {
    const std::string& quantity = record.text("quantity");
    if (record.at("value").kind != Cell::Kind::number || quantity.ends_with("_C") || quantity == "rho" ||
        quantity.starts_with("ortho_para_"))
        return;
    if (!(record.number("value") > 0))
        checks.fault(record, "value",
                     "found " + record.text("value") + ", expected more than 0 for " + quantity);
}

void check_kind(const FileSchema& schema, const std::vector<Record>& records, const RecordChecks& checks,
                const Known& known, FaultList& faults) {
    if (schema.kind == "constants")
        check_used_constants(schema, records, faults);
    std::map<std::string, std::string> like;
    if (schema.kind == "substituents")
        for (const Record& record : records)
            like[record.text("id")] = record.text("like");
    for (const Record& record : records) {
        if (schema.kind == "substituents")
            check_substituent(record, like, checks);
        if (schema.kind == "measurements")
            check_measurement(record, checks);
        if (schema.file == "reaction_figures.csv")
            check_reaction_figure(record, checks);
        if (schema.kind == "reactions" && usable(record.at("new_group")) &&
            !record.text("new_group").starts_with("*"))
            checks.fault(record, "new_group",
                         "found " + in_quotes(record.text("new_group")) +
                             ", expected the attachment first, written *");
        if (schema.kind == "states" && record.has("acid_from") != record.has("acid_to"))
            checks.fault(record, record.has("acid_from") ? "acid_to" : "acid_from",
                         "empty, expected both ends of the range of acid strength or neither");
        if (schema.kind == "states" && record.number("acid_from") > record.number("acid_to"))
            checks.fault(record, "acid_to",
                         "found " + record.text("acid_to") + ", expected not less than acid_from, " +
                             record.text("acid_from"));
        if (schema.kind == "rates")
            if (const auto factors = known.ids.find("factors.csv"); factors != known.ids.end())
                if (const auto other = factors->second.find(record.text("id"));
                    other != factors->second.end())
                    checks.fault(record, "id",
                                 in_quotes(record.text("id")) + " stands already in factors.csv, line " +
                                     std::to_string(other->second) + ", expected an id of its own");
        if (schema.kind == "sources")
            for (const CslFault& found : csl_faults(record.json))
                checks.fault(record, found.field, found.message);
    }
}

}  // namespace

void check_records(const FolderRecords& folder, FaultList& faults) {
    const Known known = gather(folder);
    for (const FileSchema& schema : file_schemas()) {
        const std::vector<Record>& records = folder.of(schema.file).records;
        const RecordChecks checks(folder, schema, known, faults);
        check_keys(schema, records, faults);
        check_kind(schema, records, checks, known, faults);
        const bool has_provenance = find_column(schema.columns, "status") != nullptr;
        for (const Record& record : records) {
            checks.references(record);
            if (has_provenance)
                checks.provenance(record);
        }
    }
}

std::vector<Fault> lint_tables(const std::vector<TableFile>& files) {
    FaultList faults;
    const FolderRecords folder = read_records(files, faults);
    check_records(folder, faults);
    return faults.take();
}

}  // namespace isotally
