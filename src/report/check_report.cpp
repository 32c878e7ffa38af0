#include <fmt/format.h>

#include <algorithm>
#include <nlohmann/json.hpp>

#include "isotally/report.hpp"
#include "numbers.hpp"

namespace isotally {
namespace {

using Json = nlohmann::ordered_json;
using report::json_number;

constexpr std::size_t worst_shown = 10;

const std::vector<std::pair<const char*, Score Scores::*>>& score_fields() {
    static const std::vector<std::pair<const char*, Score Scores::*>> fields{
        {"mean_absolute_error_points", &Scores::mean_absolute_error_points},
        {"leading_isomer_right", &Scores::leading_isomer_right},
        {"coverage_90", &Scores::coverage_90},
        {"mean_width_points", &Scores::mean_width_points},
        {"log_score", &Scores::log_score}};
    return fields;
}

Json scores_json(const Scores& scores) {
    Json out{{"name", scores.name}, {"records", scores.records}, {"compounds", scores.compounds}};
    for (const auto& [name, field] : score_fields())
        out[name] = json_number((scores.*field).value);
    for (const auto& [name, field] : score_fields())
        out[std::string(name) + "_range"] = {json_number((scores.*field).low),
                                             json_number((scores.*field).high)};
    return out;
}

std::vector<CheckedRecord> all_records(const std::vector<CheckSet>& sets) {
    std::vector<CheckedRecord> all;
    for (const auto& set : sets)
        if (set.name.ends_with("-mono") || set.name.ends_with("-poly") || set.name.ends_with("-partial"))
            all.insert(all.end(), set.records.begin(), set.records.end());
    return all;
}

std::vector<CheckedRecord> worst_of(std::vector<CheckedRecord> records) {
    std::stable_sort(records.begin(), records.end(), [](const CheckedRecord& a, const CheckedRecord& b) {
        return record_error(a) > record_error(b);
    });
    records.resize(std::min(records.size(), worst_shown));
    return records;
}

std::string reason_text(const Tables& tables, const CheckedRecord& record) {
    const auto reason = likely_reason(tables, record);
    if (!reason.empty())
        return reason;
    return record.groups == 1 ? "The only record of its group here: predicted from constants alone."
                              : "No reason known.";
}

}  // namespace

std::string check_json(const Tables& tables, const std::vector<CheckSet>& sets) {
    Json set_list = Json::array(), rows = Json::array(), worst = Json::array();
    for (const auto& set : sets)
        set_list.push_back(scores_json(score(set.name, set.records)));
    const auto records = all_records(sets);
    for (const auto& record : records)
        for (const auto& isomer : record.isomers)
            rows.push_back({{"record", record.id},
                            {"reaction", record.reaction},
                            {"substrate", record.substrate},
                            {"product", isomer.product},
                            {"observed_percent", record.complete || isomer.observed_percent > 0
                                                     ? Json(json_number(isomer.observed_percent))
                                                     : Json(nullptr)},
                            {"predicted_percent", json_number(isomer.predicted_percent)},
                            {"low", json_number(isomer.low)},
                            {"high", json_number(isomer.high)},
                            {"left_out", true},
                            {"complete", record.complete},
                            {"use", record.use},
                            {"source", record.source},
                            {"status", record.status}});
    for (const auto& record : worst_of(records))
        worst.push_back({{"record", record.id},
                         {"substrate", record.substrate},
                         {"error_points", json_number(record_error(record))},
                         {"reason", reason_text(tables, record)}});
    const Json document{{"format", "isotally.check.1"},
                        {"tables", {{"version", tables.version}, {"digest", tables.digest}}},
                        {"sets", set_list},
                        {"total", scores_json(score("total", records))},
                        {"worst", worst},
                        {"rows", rows}};
    return report::plain_numbers(document.dump(2));
}

std::string check_csv(const std::vector<CheckSet>& sets) {
    std::string out = "record,reaction,substrate,product,observed_percent,predicted_percent,low,high,left_"
                      "out,complete,use,source,status\n";
    for (const auto& record : all_records(sets))
        for (const auto& isomer : record.isomers)
            out += fmt::format(
                "{},{},{},{},{},{},{},{},yes,{},{},{},{}\n", record.id, record.reaction,
                report::csv_field(record.substrate), report::csv_field(isomer.product),
                record.complete || isomer.observed_percent > 0 ? report::number(isomer.observed_percent) : "",
                report::number(isomer.predicted_percent), report::number(isomer.low),
                report::number(isomer.high), record.complete ? "yes" : "no", record.use, record.source,
                record.status);
    return out;
}

std::string check_text(const Tables& tables, const std::vector<CheckSet>& sets) {
    std::string out =
        "every compound predicted with all measurements on it left out; in brackets, the range that\n"
        "resampling the compounds gives, nine times in ten\n\n";
    out += fmt::format("  {:<24}{:>8}{:>22}{:>20}{:>20}\n", "set", "records", "mean error, points",
                       "leader right", "90 % interval holds");
    const auto line = [&](const Scores& s) {
        const auto pair = [](const Score& score, int decimals) {
            return fmt::format("{:.{}f} [{:.{}f}, {:.{}f}]", score.value, decimals, score.low, decimals,
                               score.high, decimals);
        };
        const bool scored = s.mean_width_points.value > 0;
        out += fmt::format("  {:<24}{:>8}{:>22}{:>20}{:>20}\n", s.name, s.records,
                           scored ? pair(s.mean_absolute_error_points, 1) : "-",
                           pair(s.leading_isomer_right, 2), scored ? pair(s.coverage_90, 2) : "-");
    };
    for (const auto& set : sets)
        line(score(set.name, set.records));
    const auto records = all_records(sets);
    line(score("total", records));
    out += "\n  mean width of the 90 % intervals and mean log score:\n";
    for (const auto& set : sets) {
        const auto s = score(set.name, set.records);
        if (s.mean_width_points.value > 0)
            out += fmt::format("  {:<24}{:>8}{:>17.1f} points{:>20.2f}\n", s.name, s.records,
                               s.mean_width_points.value, s.log_score.value);
    }
    out += "\nworst records, with the likely reason\n";
    for (const auto& record : worst_of(records)) {
        out += fmt::format("  {:<6}{} in {}: {:.0f} points\n", record.id, record.substrate, record.reaction,
                           record_error(record));
        for (const auto& part : report::wrapped(reason_text(tables, record), 90))
            out += "        " + part + "\n";
    }
    return out;
}

}  // namespace isotally
