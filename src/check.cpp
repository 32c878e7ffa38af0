#include "isotally/check.hpp"

#include <Eigen/Cholesky>
#include <Eigen/Core>
#include <algorithm>
#include <array>
#include <boost/random/mersenne_twister.hpp>
#include <boost/random/uniform_int_distribution.hpp>
#include <cmath>
#include <map>
#include <numbers>
#include <tuple>
#include <utility>

namespace isotally {
namespace {

const Measurement& record_of(const Tables& tables, const std::string& id) {
    return *std::find_if(tables.measurements.begin(), tables.measurements.end(),
                         [&](const Measurement& m) { return m.id == id; });
}

/// ln of the normal density of the rows of a record under the model (bounds left out).
double log_density(const Observation& observation, const SiteFactors& factors) {
    const auto n = factors.mean.size();
    std::vector<const ObservedRow*> rows;
    for (const auto& row : observation.rows)
        if (row.kind == ObservedRow::Kind::figure)
            rows.push_back(&row);
    const auto m = static_cast<Eigen::Index>(rows.size());
    if (m == 0)
        return 0;
    Eigen::MatrixXd weights = Eigen::MatrixXd::Zero(m, static_cast<Eigen::Index>(n));
    Eigen::VectorXd apart(m);
    for (Eigen::Index i = 0; i < m; ++i) {
        const auto& row = *rows[static_cast<std::size_t>(i)];
        apart(i) = row.value;
        for (const auto& [site, weight] : row.weights) {
            weights(i, site) = weight;
            apart(i) -= weight * factors.mean[static_cast<std::size_t>(site)];
        }
    }
    const Eigen::Map<const Eigen::MatrixXd> covariance(
        factors.covariance.data(), static_cast<Eigen::Index>(n), static_cast<Eigen::Index>(n));
    Eigen::MatrixXd s = weights * covariance * weights.transpose();
    s.array() += observation.shared_sd * observation.shared_sd;
    for (Eigen::Index i = 0; i < m; ++i)
        s(i, i) += std::pow(rows[static_cast<std::size_t>(i)]->noise_sd, 2);
    const Eigen::LLT<Eigen::MatrixXd> factor(s);
    const double logdet = 2 * factor.matrixLLT().diagonal().array().log().sum();
    const double size = static_cast<double>(m);
    return -0.5 * (apart.dot(factor.solve(apart)) + logdet + size * std::log(2 * std::numbers::pi)) / size;
}

/// ln of the predicted probability that a limit of a record holds, mean over its limits.
std::pair<int, double> limits_hold(const Observation& observation, const SiteFactors& factors) {
    const auto n = factors.mean.size();
    int limits = 0;
    double sum = 0;
    for (const auto& row : observation.rows) {
        if (row.kind != ObservedRow::Kind::at_most)
            continue;
        double mean = 0, variance = row.softness * row.softness;
        for (const auto& [i, wi] : row.weights) {
            mean += wi * factors.mean[static_cast<std::size_t>(i)];
            for (const auto& [j, wj] : row.weights)
                variance += wi * wj *
                            factors.covariance[static_cast<std::size_t>(i) * n + static_cast<std::size_t>(j)];
        }
        const double z = (row.limit - mean) / std::sqrt(variance);
        sum += std::log(0.5 * std::erfc(-z / std::numbers::sqrt2));
        ++limits;
    }
    return {limits, limits > 0 ? sum / limits : 0};
}

std::size_t largest(const std::vector<double>& values) {
    return static_cast<std::size_t>(std::max_element(values.begin(), values.end()) - values.begin());
}

CheckedRecord check_record(const Knowledge& knowledge, const FamilyModel& model, std::string_view family,
                           const Observation& observation, const Draws& draws) {
    const auto& tables = knowledge.tables;
    const auto& record = record_of(tables, observation.id);
    const auto factors =
        site_factors(model, observation.conditions, observation.compound, observation.sites, false);
    const auto drawn = draw_shares(tables, family, observation.sites, factors, draws);
    auto arene = std::get<Arene>(parse_arene(tables, knowledge.groups, observation.compound));
    const auto& reaction = tables.reactions[static_cast<std::size_t>(observation.conditions.reaction)];
    const auto found = sites(arene, reaction.new_group);

    CheckedRecord out;
    out.id = record.id;
    out.reaction = record.reaction;
    out.family = family;
    out.substrate = record.substrate;
    out.use = record.use;
    out.source = record.from.source;
    out.status = record.from.status;
    out.conditions = observation.conditions;
    out.complete = record.complete && record.use != "partial" && record.use != "bound";
    out.has_ratios =
        std::any_of(observation.rows.begin(), observation.rows.end(),
                    [](const ObservedRow& row) { return row.kind == ObservedRow::Kind::figure; });
    out.log_score = log_density(observation, factors);
    std::tie(out.limits, out.limits_log_probability) = limits_hold(observation, factors);
    const auto& groups = observation.sites.front().groups;
    out.groups = static_cast<int>(6 - std::count(groups.begin(), groups.end(), -1));
    std::vector<double> observed(found.size(), 0), predicted(found.size(), 0);
    for (std::size_t i = 0; i < found.size(); ++i) {
        for (const auto& product : record.products)
            if (product.smiles == found[i].product)
                observed[i] += product.percent;
        predicted[i] = drawn.percent[i].value;
        out.isomers.push_back(
            {found[i].product, observed[i], predicted[i], drawn.percent[i].low, drawn.percent[i].high});
    }
    out.leading_right = largest(observed) == largest(predicted);
    return out;
}

}  // namespace

std::vector<CheckedRecord> check_family(const Knowledge& knowledge, std::string_view family,
                                        const Draws& draws, LeftOut left_out) {
    return check_family(knowledge, knowledge, family, draws, left_out);
}

std::vector<CheckedRecord> check_family(const Knowledge& taught, const Knowledge& scored,
                                        std::string_view family, const Draws& draws, LeftOut left_out) {
    const auto full = fit_family(taught, family);
    std::map<std::string, std::shared_ptr<const FamilyModel>> without;
    std::vector<CheckedRecord> checked;
    for (const auto& observation : scored.observations) {
        const auto& reaction =
            scored.tables.reactions[static_cast<std::size_t>(observation.conditions.reaction)];
        if (reaction.family != family || observation.kind != Observation::Kind::shares ||
            observation.status == "practice" || observation.sites.size() < 2)
            continue;
        auto& model = without[left_out == LeftOut::compound ? observation.compound : observation.id];
        if (!model)
            model = leave_out(*full, [&](const Observation& other) {
                return left_out == LeftOut::compound ? other.compound == observation.compound
                                                     : other.id == observation.id;
            });
        checked.push_back(check_record(scored, *model, family, observation, draws));
    }
    return checked;
}

std::vector<CheckedRate> check_rates(const Knowledge& taught, const Knowledge& scored,
                                     std::string_view family) {
    const auto full = fit_family(taught, family);
    std::vector<CheckedRate> checked;
    for (const auto& observation : scored.observations) {
        const auto& reaction =
            scored.tables.reactions[static_cast<std::size_t>(observation.conditions.reaction)];
        const auto& groups = observation.sites.front().groups;
        const auto carried = 6 - std::count(groups.begin(), groups.end(), -1);
        if (reaction.family != family || observation.kind != Observation::Kind::rate || carried < 2)
            continue;
        const auto model = leave_out(*full, observation.compound);
        const auto factors =
            site_factors(*model, observation.conditions, observation.compound, observation.sites, false);
        double predicted = 0;
        for (const auto& [site, weight] : observation.rows.front().weights)
            predicted += weight * factors.mean[static_cast<std::size_t>(site)];
        checked.push_back({observation.id, observation.compound, observation.rows.front().value, predicted,
                           log_density(observation, factors)});
    }
    return checked;
}

namespace {

constexpr int resamples = 1000;

bool counts(const CheckedIsomer& isomer) {
    return isomer.observed_percent > 1 || isomer.predicted_percent > 1;
}

/// Sums over some records, from which every score follows.
struct Sums {
    double records = 0, leading = 0, complete = 0, log_score = 0, isomers = 0, error = 0, covered = 0,
           width = 0;

    void add(const Sums& other) {
        records += other.records, leading += other.leading, complete += other.complete;
        log_score += other.log_score, isomers += other.isomers, error += other.error;
        covered += other.covered, width += other.width;
    }
};

Sums sums_of(const CheckedRecord& record) {
    Sums sums;
    sums.records = 1;
    sums.leading = record.leading_right;
    if (!record.complete)
        return sums;
    sums.complete = record.has_ratios;
    sums.log_score = record.has_ratios ? record.log_score : 0;
    for (const auto& isomer : record.isomers) {
        if (!counts(isomer))
            continue;
        ++sums.isomers;
        sums.error += std::abs(isomer.observed_percent - isomer.predicted_percent);
        sums.covered += isomer.observed_percent >= isomer.low && isomer.observed_percent <= isomer.high;
        sums.width += isomer.high - isomer.low;
    }
    return sums;
}

std::array<double, 5> scores_of(const Sums& s) {
    const double isomers = std::max(s.isomers, 1.0);
    return {s.error / isomers, s.leading / std::max(s.records, 1.0), s.covered / isomers, s.width / isomers,
            s.log_score / std::max(s.complete, 1.0)};
}

}  // namespace

Scores score(std::string_view name, const std::vector<CheckedRecord>& records) {
    std::map<std::string, Sums> by_compound;
    Sums all;
    for (const auto& record : records) {
        by_compound[record.substrate].add(sums_of(record));
        all.add(sums_of(record));
    }
    std::vector<Sums> compounds;
    for (const auto& [smiles, sums] : by_compound)
        compounds.push_back(sums);
    std::array<std::vector<double>, 5> drawn;
    boost::random::mt19937_64 random(1);
    for (int r = 0; r < resamples && !compounds.empty(); ++r) {
        Sums sums;
        boost::random::uniform_int_distribution<std::size_t> pick(0, compounds.size() - 1);
        for (std::size_t i = 0; i < compounds.size(); ++i)
            sums.add(compounds[pick(random)]);
        const auto figures = scores_of(sums);
        for (std::size_t f = 0; f < figures.size(); ++f)
            drawn[f].push_back(figures[f]);
    }
    const auto figures = scores_of(all);
    const auto range = [&](std::size_t f) {
        auto& values = drawn[f];
        std::sort(values.begin(), values.end());
        const auto at = [&](double share) {
            return values.empty()
                       ? figures[f]
                       : values[static_cast<std::size_t>(share * static_cast<double>(values.size() - 1))];
        };
        return Score{figures[f], at(0.05), at(0.95)};
    };
    return {std::string(name),
            static_cast<int>(records.size()),
            static_cast<int>(compounds.size()),
            range(0),
            range(1),
            range(2),
            range(3),
            range(4)};
}

std::vector<CheckSet> check_sets(const Tables& tables, const std::vector<CheckedRecord>& records) {
    std::vector<CheckSet> sets;
    const auto put = [&](const std::string& name, const CheckedRecord& record) {
        const auto found =
            std::find_if(sets.begin(), sets.end(), [&](const CheckSet& set) { return set.name == name; });
        if (found == sets.end())
            sets.push_back({name, {record}});
        else
            found->records.push_back(record);
    };
    const auto in_series = [&](const CheckedRecord& record, auto&& differ) {
        return std::any_of(records.begin(), records.end(), [&](const CheckedRecord& other) {
            return &other != &record && other.substrate == record.substrate && differ(other);
        });
    };
    for (const auto& record : records) {
        if (record.reaction.find("nitronium") != std::string::npos)
            continue;
        const bool whole = record.use == "yes" || record.use == "weak";
        put(record.family + (!whole ? "-partial" : record.groups == 1 ? "-mono" : "-poly"), record);
        if (!whole)
            continue;
        if (record.groups > 1 && record.use == "yes")
            put(record.family + "-poly-yes", record);
        const auto& now = record.conditions;
        if (in_series(record, [&](const CheckedRecord& other) {
                return other.reaction == record.reaction &&
                       other.conditions.temperature_C != now.temperature_C;
            }))
            put(record.family + "-temperature", record);
        if (tables.reactions[static_cast<std::size_t>(now.reaction)].has_acid &&
            in_series(record, [&](const CheckedRecord& other) {
                return other.conditions.acid_percent > 0 && other.conditions.acid_percent != now.acid_percent;
            }))
            put(record.family + "-acid", record);
        if (in_series(record, [&](const CheckedRecord& other) {
                return other.reaction == record.reaction &&
                       other.conditions.temperature_C == now.temperature_C &&
                       other.conditions.acid_percent == now.acid_percent;
            }))
            put(record.family + "-repeats", record);
    }
    std::sort(sets.begin(), sets.end(), [](const CheckSet& a, const CheckSet& b) { return a.name < b.name; });
    return sets;
}

double record_error(const CheckedRecord& record) {
    const auto sums = sums_of(record);
    return sums.isomers > 0 ? sums.error / sums.isomers : 0;
}

std::string likely_reason(const Tables& tables, const CheckedRecord& record) {
    const auto molecule = read_molecule(record.substrate);
    const auto workspace = new_workspace();
    for (const auto& row : tables.cautions) {
        if (row.code.starts_with("additivity-") &&
            applies_to(row.reactions, record.reaction, record.family) &&
            occurs(*workspace, *molecule, row.substrate_smarts, row.code))
            return row.text;
    }
    return {};
}

}  // namespace isotally
