#include "isotally/check.hpp"

#include <Eigen/Cholesky>
#include <Eigen/Core>
#include <algorithm>
#include <cmath>
#include <map>
#include <numbers>

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

    CheckedRecord out{record.id,
                      record.reaction,
                      record.substrate,
                      record.use,
                      record.from.source,
                      record.from.status,
                      0,
                      record.complete && record.use != "partial" && record.use != "bound",
                      false,
                      log_density(observation, factors),
                      {}};
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
                                        const Draws& draws) {
    const auto full = fit_family(knowledge, family);
    std::map<std::string, std::shared_ptr<const FamilyModel>> without;
    std::vector<CheckedRecord> checked;
    for (const auto& observation : knowledge.observations) {
        const auto& reaction =
            knowledge.tables.reactions[static_cast<std::size_t>(observation.conditions.reaction)];
        if (reaction.family != family || observation.kind != Observation::Kind::shares ||
            observation.status == "practice" || observation.sites.size() < 2)
            continue;
        auto& model = without[observation.compound];
        if (!model)
            model = leave_out(*full, observation.compound);
        checked.push_back(check_record(knowledge, *model, family, observation, draws));
    }
    return checked;
}

Scores score(std::string_view name, const std::vector<CheckedRecord>& records) {
    Scores s;
    s.name = name;
    s.records = static_cast<int>(records.size());
    double isomers = 0, leading = 0, scored = 0;
    for (const auto& record : records) {
        leading += record.leading_right;
        if (!record.complete)
            continue;
        ++scored;
        s.log_score += record.log_score;
        for (const auto& isomer : record.isomers) {
            if (isomer.observed_percent <= 1 && isomer.predicted_percent <= 1)
                continue;
            ++isomers;
            s.mean_absolute_error_points += std::abs(isomer.observed_percent - isomer.predicted_percent);
            s.coverage_90 += isomer.observed_percent >= isomer.low && isomer.observed_percent <= isomer.high;
            s.mean_width_points += isomer.high - isomer.low;
        }
    }
    if (s.records > 0)
        s.leading_isomer_right = leading / s.records;
    if (scored > 0)
        s.log_score /= scored;
    if (isomers > 0) {
        s.mean_absolute_error_points /= isomers;
        s.coverage_90 /= isomers;
        s.mean_width_points /= isomers;
    }
    return s;
}

}  // namespace isotally
