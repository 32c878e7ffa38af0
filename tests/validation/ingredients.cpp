// What each ingredient of the model brings: it is taken out of the full model, and the left-out scores of
// nitration-poly and nitration-mono are compared compound by compound. Prints the table of
// validation/README.md.
#include <algorithm>
#include <cmath>
#include <cstdio>
#include <functional>
#include <map>

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

void without_temperature(Tables& tables) {
    for (auto& record : tables.measurements)
        record.temperature_C = 25;
    for (auto& record : tables.rates)
        record.temperature_C = 25;
    for (auto& reaction : tables.reactions)
        reaction.figures["temperature_default_C"].value = 25;
}

struct Ingredient {
    const char* name;
    std::function<void(Tables&)> tables = [](Tables&) {};
    std::function<void(Knowledge&)> knowledge = [](Knowledge&) {};
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
        {"temperature", without_temperature},
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
    };
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
    const auto without = check_family(taught, full, "nitration", {});
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

}  // namespace

int main() {
    const auto full = prepare(parse_tables(read_table_folder(ISOTALLY_SOURCE_DIR "/tables")));
    const auto with = check_family(full, "nitration", {});
    std::printf("| ingredient | poly: log score gained | poly: points gained | mono: log score gained | "
                "mono: points gained |\n"
                "|---|---|---|---|---|\n");
    for (const auto& ingredient : ingredients())
        print_row(ingredient, full, with);
}
