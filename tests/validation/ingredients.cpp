// What each ingredient of the model brings: it is taken out of the full model, and the left-out scores of
// nitration-poly and nitration-mono are compared compound by compound. Prints the table of
// validation/README.md.
#include <algorithm>
#include <cmath>
#include <cstdio>
#include <functional>
#include <map>

#include "factors/fit.hpp"
#include "isotally/check.hpp"

namespace {

using namespace isotally;

void set_figure(Tables& tables, const std::string& quantity, double value, double sd) {
    for (auto& row : tables.model)
        if (row.quantity == quantity || row.quantity.starts_with(quantity + ":")) {
            row.figure.value = value;
            if (!std::isnan(sd))
                row.figure.sd = sd;
        }
}

constexpr double nothing = 1e-4;
const double keep = std::nan("");

void without_neighbours(Knowledge& knowledge) {
    for (auto& observation : knowledge.observations) {
        const auto& groups = observation.sites.front().groups;
        if (std::count(groups.begin(), groups.end(), -1) < 5)
            for (auto& row : observation.rows)
                row.noise_sd = 1e3;
    }
}

void without_bounds(Knowledge& knowledge) {
    for (auto& observation : knowledge.observations)
        std::erase_if(observation.rows,
                      [](const ObservedRow& row) { return row.kind == ObservedRow::Kind::at_most; });
    std::erase_if(knowledge.observations,
                  [](const Observation& observation) { return observation.rows.empty(); });
}

/// Temperature is told in no record and asked in no question.
void at_one_temperature(Knowledge& knowledge) {
    for (auto& observation : knowledge.observations)
        observation.conditions.temperature_C = 25;
}

struct Ingredient {
    const char* name;
    std::function<void(Tables&)> tables = [](Tables&) {};
    std::function<void(Knowledge&)> knowledge = [](Knowledge&) {};
    std::function<void(Knowledge&)> asked = [](Knowledge&) {};
};

std::vector<Ingredient> ingredients() {
    const auto drop = [](const char* quantity) {
        return [quantity](Tables& tables) { set_figure(tables, quantity, 0, 0); };
    };
    const auto close = [](std::vector<std::string> quantities) {
        return [quantities](Tables& tables) {
            for (const auto& quantity : quantities)
                set_figure(tables, quantity, nothing, keep);
        };
    };
    std::vector<Ingredient> list{
        {"rings with several groups as teachers", [](Tables&) {}, without_neighbours},
        {"flanked site", drop("correction:flanked")},
        {"buttressed site", drop("correction:buttressed")},
        {"bounds (isomers not found)", [](Tables&) {}, without_bounds},
        {"acid strength", close({"acid_slope_sd", "acid_kind_sd"})},
        {"conditions inside the family",
         close({"condition_sd", "condition_common_sd", "rho_of_conditions_sd",
                "ortho_offset_of_conditions_sd", "ortho_steric_of_conditions_sd"})},
        {"temperature", [](Tables&) {}, at_one_temperature, at_one_temperature},
        {"deviation of the compound", close({"discrepancy_sd", "discrepancy_of_conditions_sd"})},
        {"kinds of groups", close({"kind_residual_sd"})},
        {"series of homologues", [](Tables& tables) { set_figure(tables, "own_fraction", 1, keep); }},
        {"acceptors' para offset", [](Tables& tables) { set_figure(tables, "acceptor_para", 0, nothing); }},
        {"rows of practice", [](Tables& tables) {
             std::erase_if(tables.measurements,
                           [](const Measurement& m) { return m.from.status == "practice"; });
         }}};
    Ingredient plain{"all of the first eight (plain additivity)"};
    plain.tables = [list](Tables& tables) {
        for (std::size_t i = 0; i < 8; ++i)
            list[i].tables(tables);
    };
    plain.knowledge = [](Knowledge& knowledge) {
        without_bounds(knowledge);
        without_neighbours(knowledge);
        at_one_temperature(knowledge);
    };
    plain.asked = at_one_temperature;
    list.push_back(plain);
    return list;
}

struct PerCompound {
    double log_score = 0, log_records = 0, error = 0, error_records = 0;
};

std::map<std::string, PerCompound> by_compound(const std::vector<CheckedRecord>& records) {
    std::map<std::string, PerCompound> sums;
    for (const auto& record : records) {
        if (!record.complete)
            continue;
        auto& one = sums[record.substrate];
        one.error += record_error(record), ++one.error_records;
        if (record.has_ratios)
            one.log_score += record.log_score, ++one.log_records;
    }
    return sums;
}

struct Gain {
    double mean = 0, standard_error = 0;
};

Gain gain_of(const std::vector<double>& differences) {
    const double n = static_cast<double>(differences.size());
    Gain gain;
    for (const double d : differences)
        gain.mean += d / n;
    for (const double d : differences)
        gain.standard_error += (d - gain.mean) * (d - gain.mean) / (n * (n - 1));
    gain.standard_error = std::sqrt(gain.standard_error);
    return gain;
}

std::vector<CheckedRecord> set_named(const Tables& tables, const std::vector<CheckedRecord>& records,
                                     const char* name) {
    for (const auto& set : check_sets(tables, records))
        if (set.name == name)
            return set.records;
    return {};
}

void print_row(const Ingredient& ingredient, const Knowledge& full, const std::vector<CheckedRecord>& with) {
    auto tables = parse_tables(read_table_folder(ISOTALLY_SOURCE_DIR "/tables"));
    ingredient.tables(tables);
    auto taught = prepare(tables);
    ingredient.knowledge(taught);
    auto asked = full;
    ingredient.asked(asked);
    const auto without = check_family(taught, asked, "nitration", {});
    std::printf("| %s |", ingredient.name);
    for (const char* set : {"nitration-poly", "nitration-mono"}) {
        const auto before = by_compound(set_named(full.tables, without, set));
        const auto after = by_compound(set_named(full.tables, with, set));
        std::vector<double> log_gain, error_gain;
        for (const auto& [compound, now] : after) {
            const auto& then = before.at(compound);
            if (now.log_records > 0)
                log_gain.push_back(now.log_score / now.log_records - then.log_score / then.log_records);
            error_gain.push_back(then.error / then.error_records - now.error / now.error_records);
        }
        const auto l = gain_of(log_gain), e = gain_of(error_gain);
        std::printf(" %+.2f (%.2f) | %+.1f (%.1f) |", l.mean, l.standard_error, e.mean, e.standard_error);
    }
    std::printf("\n");
}

/// Mean error in points of the records of a series, each predicted with only itself left out: the other
/// records of its compound stay, so that what temperature and acid do to one ring is put to the test.
double series_error(const Knowledge& taught, const Knowledge& full,
                    const std::vector<CheckedRecord>& series) {
    std::vector<double> errors;
    for (const auto& record : series) {
        if (!record.complete)
            continue;
        std::vector<bool> use(taught.observations.size());
        const Observation* asked = nullptr;
        for (std::size_t i = 0; i < use.size(); ++i)
            use[i] = taught.observations[i].id != record.id;
        for (const auto& observation : full.observations)
            if (observation.id == record.id && observation.kind == Observation::Kind::shares)
                asked = &observation;
        const auto model = factors::fit_rows(taught, "nitration", use);
        const auto at = site_factors(*model, asked->conditions, asked->compound, asked->sites, false);
        const auto percent = isomer_percents(asked->sites, at.mean);
        auto predicted = record;
        for (std::size_t i = 0; i < percent.size(); ++i)
            predicted.isomers[i].predicted_percent = percent[i];
        errors.push_back(record_error(predicted));
    }
    double sum = 0;
    for (const double error : errors)
        sum += error;
    return sum / static_cast<double>(errors.size());
}

void print_series(const Knowledge& full, const std::vector<CheckedRecord>& with) {
    std::printf("\n| ingredient taken out | nitration-temperature, points | nitration-acid, points "
                "|\n|---|---|---|\n");
    const auto line = [&](const Ingredient& ingredient) {
        auto tables = parse_tables(read_table_folder(ISOTALLY_SOURCE_DIR "/tables"));
        ingredient.tables(tables);
        auto taught = prepare(tables);
        ingredient.knowledge(taught);
        auto asked = full;
        ingredient.asked(asked);
        std::printf("| %s |", ingredient.name);
        for (const char* set : {"nitration-temperature", "nitration-acid"})
            std::printf(" %.2f |", series_error(taught, asked, set_named(full.tables, with, set)));
        std::printf("\n");
    };
    line({"none"});
    for (const auto& ingredient : ingredients())
        if (const std::string name = ingredient.name;
            name == "temperature" || name == "acid strength" || name == "conditions inside the family")
            line(ingredient);
}

}  // namespace

int main() {
    const auto full = prepare(parse_tables(read_table_folder(ISOTALLY_SOURCE_DIR "/tables")));
    const auto with = check_family(full, "nitration", {});
    std::printf("| ingredient | poly: log score gained | poly: points gained | mono: log score gained | "
                "mono: points gained |\n"
                "|---|---|---|---|---|\n");
    for (const auto& ingredient : ingredients())
        print_row(ingredient, full, with);
    print_series(full, with);
}
