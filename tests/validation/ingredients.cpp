// What each ingredient of the model brings: it is taken out of the full model and put back, and the left-out
// scores are compared compound by compound. Prints the tables of validation/README.md.
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
    const char* name = "";
    std::function<void(Tables&)> tables = [](Tables&) {};
    std::function<void(Knowledge&)> knowledge = [](Knowledge&) {};
    std::function<void(Knowledge&)> asked = [](Knowledge&) {};
    bool of_conditions = false;  // tried with only the record left out, too
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
    for (auto& one : list)
        one.of_conditions = std::string(one.name) == "acid strength" ||
                            std::string(one.name) == "temperature" ||
                            std::string(one.name) == "conditions inside the family";
    list.push_back(plain);
    return list;
}

Knowledge knowledge_of(const Ingredient& ingredient) {
    auto tables = parse_tables(read_table_folder(ISOTALLY_SOURCE_DIR "/tables"));
    ingredient.tables(tables);
    auto taught = prepare(tables);
    ingredient.knowledge(taught);
    return taught;
}

/// Differences (full model less the model without the ingredient), summed by family and compound.
struct Sums {
    std::map<std::string, std::pair<double, int>> by_compound;

    void add(const std::string& compound, double difference) {
        auto& [sum, count] = by_compound[compound];
        sum += difference;
        ++count;
    }
};

struct Gain {
    double mean = 0, standard_error = 0;
};

Gain gain_of(const Sums& sums) {
    const double n = static_cast<double>(sums.by_compound.size());
    Gain gain;
    for (const auto& [compound, one] : sums.by_compound)
        gain.mean += one.first / one.second / n;
    for (const auto& [compound, one] : sums.by_compound)
        gain.standard_error += std::pow(one.first / one.second - gain.mean, 2) / (n * (n - 1));
    gain.standard_error = std::sqrt(gain.standard_error);
    return gain;
}

struct Columns {
    Sums poly_score, poly_points, score, points, limits, rates, sulfonation_points;
};

using Checked = std::map<std::string, std::vector<CheckedRecord>>;

Checked check_all(const Knowledge& taught, const Knowledge& asked, LeftOut left_out) {
    Checked checked;
    for (const auto& family : families_of(asked.tables))
        checked[family] = check_family(taught, asked, family, {}, left_out);
    return checked;
}

Columns compare(const Checked& with, const Checked& without) {
    Columns columns;
    for (const auto& [family, records] : with)
        for (const auto& now : records) {
            const auto& others = without.at(family);
            const auto then = std::find_if(others.begin(), others.end(),
                                           [&](const CheckedRecord& record) { return record.id == now.id; });
            const auto compound = family + " " + now.substrate;
            const bool poly = family == "nitration" && now.groups > 1 &&
                              now.reaction.find("nitronium") == now.reaction.npos;
            if (now.complete) {
                const double points = record_error(*then) - record_error(now);
                columns.points.add(compound, points);
                if (poly)
                    columns.poly_points.add(compound, points);
                if (family == "sulfonation")
                    columns.sulfonation_points.add(compound, points);
            }
            if (now.complete && now.has_ratios) {
                const double score = now.log_score - then->log_score;
                columns.score.add(compound, score);
                if (poly)
                    columns.poly_score.add(compound, score);
            }
            if (now.limits > 0)
                columns.limits.add(compound, now.limits_log_probability - then->limits_log_probability);
        }
    return columns;
}

void compare_rates(const Knowledge& full, const Knowledge& taught, const Knowledge& asked, Columns& columns) {
    for (const auto& family : families_of(full.tables)) {
        const auto with = check_rates(full, full, family), without = check_rates(taught, asked, family);
        for (std::size_t i = 0; i < with.size(); ++i)
            columns.rates.add(family + " " + with[i].substrate, with[i].log_score - without[i].log_score);
    }
}

void print_gain(const Sums& sums, int digits) {
    const auto gain = gain_of(sums);
    const double least_shown = 0.5 * std::pow(10.0, -digits);
    std::printf(" %+.*f (%.*f)%s |", digits, gain.mean, digits, gain.standard_error,
                gain.mean > std::max(gain.standard_error, least_shown) ? " *" : "");
}

void print_table(const Knowledge& full, LeftOut left_out) {
    const bool compound = left_out == LeftOut::compound;
    std::printf("\n| ingredient | nitration-poly: log score | nitration-poly: points | all: log score | "
                "all: points |%s\n|---|---|---|---|---|%s\n",
                compound ? " limits | rates |" : " sulfonation: points |", compound ? "---|---|" : "---|");
    const auto with = check_all(full, full, left_out);
    for (const auto& ingredient : ingredients()) {
        if (!compound && !ingredient.of_conditions)
            continue;
        const auto taught = knowledge_of(ingredient);
        auto asked = full;
        ingredient.asked(asked);
        auto columns = compare(with, check_all(taught, asked, left_out));
        std::printf("| %s |", ingredient.name);
        print_gain(columns.poly_score, 3);
        print_gain(columns.poly_points, 2);
        print_gain(columns.score, 3);
        print_gain(columns.points, 2);
        if (compound) {
            compare_rates(full, taught, asked, columns);
            print_gain(columns.limits, 3);
            print_gain(columns.rates, 3);
        } else {
            print_gain(columns.sulfonation_points, 2);
        }
        std::printf("\n");
    }
}

}  // namespace

int main() {
    const auto full = knowledge_of({});
    print_table(full, LeftOut::compound);
    print_table(full, LeftOut::record);
}
