#include "fit.hpp"

#include <algorithm>
#include <cmath>

#include "family_model.hpp"

namespace isotally {

namespace factors {
namespace {

double prior_mean(const Settings& settings, const Form& form) {
    double mean = 0;
    for (const auto& term : form)
        mean += term.weight * prior_of(settings, term.unknown).mean;
    return mean;
}

Form row_form(const Settings& settings, const Observation& observation, const ObservedRow& row,
              int compound) {
    Form form;
    for (const auto& [site, weight] : row.weights) {
        auto one = site_form(settings, observation.conditions,
                             observation.sites[static_cast<std::size_t>(site)], compound);
        for (auto& term : one)
            form.push_back({term.unknown, term.weight * weight});
    }
    compact(form);
    return form;
}

/// Which groups at which relation the record measures (bounds and rules of the trade are no measurement).
void note_carriers(Fit& fit, const Observation& observation) {
    std::set<std::pair<int, Relation>> seen;
    int carried = 0;
    for (const auto& row : observation.rows) {
        if (row.kind != ObservedRow::Kind::figure)
            continue;
        for (const auto& [index, weight] : row.weights) {
            const auto& site = observation.sites[static_cast<std::size_t>(index)];
            const auto groups = in_state(*fit.settings.knowledge, observation.conditions, site.groups);
            carried = static_cast<int>(6 - std::count(groups.begin(), groups.end(), -1));
            for (int p = 0; p < 6; ++p)
                if (groups[static_cast<std::size_t>(p)] >= 0 && p != site.position)
                    seen.emplace(groups[static_cast<std::size_t>(p)], relation_between(p, site.position));
        }
    }
    for (const auto& one : seen)
        fit.carriers[one].emplace_back(&observation, carried);
}

}  // namespace

std::shared_ptr<const FamilyModel> fit_rows(const Knowledge& knowledge, std::string_view family,
                                            const std::vector<bool>& use) {
    auto model = std::make_shared<Fit>();
    model->settings = read_settings(knowledge, family);
    std::vector<double> residual;
    std::vector<std::pair<int, double>> shared;  // first row of each record with its common sd
    std::vector<double> own;
    for (std::size_t i = 0; i < knowledge.observations.size(); ++i) {
        const auto& observation = knowledge.observations[i];
        if (!use[i] ||
            knowledge.tables.reactions[static_cast<std::size_t>(observation.conditions.reaction)].family !=
                family)
            continue;
        const int compound =
            model->compounds.emplace(observation.compound, static_cast<int>(model->compounds.size()))
                .first->second;
        model->observations.push_back(&observation);
        note_carriers(*model, observation);
        for (const auto& row : observation.rows) {
            const int at = static_cast<int>(own.size());
            const auto form = row_form(model->settings, observation, row, compound);
            residual.push_back(row.value - prior_mean(model->settings, form));
            for (const auto& term : form) {
                auto [column, fresh] = model->columns.try_emplace(term.unknown);
                if (fresh) {
                    const double sd = prior_of(model->settings, term.unknown).sd;
                    column->second.variance = sd * sd;
                }
                column->second.rows.emplace_back(at, term.weight);
            }
            own.push_back(row.noise_sd);
            // bounds have no noise in common with the figures: each stands for itself, as record -1, -2 ...
            const bool figure = row.kind == ObservedRow::Kind::figure;
            shared.emplace_back(figure ? static_cast<int>(model->observations.size()) : -1 - at,
                                figure ? observation.shared_sd : 0.0);
            model->observation_of_row.push_back(model->observations.size() - 1);
        }
    }
    const auto n = static_cast<Eigen::Index>(own.size());
    Eigen::MatrixXd s = Eigen::MatrixXd::Zero(n, n);
    for (const auto& [unknown, column] : model->columns)
        for (const auto& [i, wi] : column.rows)
            for (const auto& [j, wj] : column.rows)
                if (j <= i)
                    s(i, j) += column.variance * wi * wj;
    for (Eigen::Index i = 0; i < n; ++i) {
        const auto at = static_cast<std::size_t>(i);
        s(i, i) += own[at] * own[at];
        for (Eigen::Index j = i; j >= 0 && model->observation_of_row[static_cast<std::size_t>(j)] ==
                                               model->observation_of_row[at];
             --j)
            if (shared[static_cast<std::size_t>(j)].first == shared[at].first)
                s(i, j) += shared[at].second * shared[at].second;
    }
    model->factor.compute(s);
    auto fitted = std::make_shared<FamilyModel>();
    fitted->weights = model->factor.solve(Eigen::Map<const Eigen::VectorXd>(residual.data(), n));
    fitted->fit = std::move(model);
    return fitted;
}

}  // namespace factors

std::shared_ptr<const FamilyModel> fit_family(const Knowledge& knowledge, std::string_view family,
                                              std::string_view left_out) {
    std::vector<bool> use(knowledge.observations.size(), true);
    if (!left_out.empty())
        for (std::size_t i = 0; i < use.size(); ++i)
            use[i] = knowledge.observations[i].compound != left_out;
    return factors::fit_rows(knowledge, family, use);
}

std::shared_ptr<const FamilyModel> leave_out(const FamilyModel& model, std::string_view compound) {
    return leave_out(model, [&](const Observation& observation) { return observation.compound == compound; });
}

std::shared_ptr<const FamilyModel> leave_out(const FamilyModel& model,
                                             const std::function<bool(const Observation&)>& which) {
    auto out = std::make_shared<FamilyModel>(model);
    for (const auto* observation : model.fit->observations)
        if (which(*observation))
            out->left_out.insert(observation);
    std::vector<Eigen::Index> rows;
    for (std::size_t i = 0; i < model.fit->observation_of_row.size(); ++i)
        if (out->left_out.contains(model.fit->observations[model.fit->observation_of_row[i]]))
            rows.push_back(static_cast<Eigen::Index>(i));
    const auto k = static_cast<Eigen::Index>(rows.size());
    if (k == 0)
        return out;
    Eigen::MatrixXd chosen = Eigen::MatrixXd::Zero(model.weights.size(), k);
    for (Eigen::Index i = 0; i < k; ++i)
        chosen(rows[static_cast<std::size_t>(i)], i) = 1;
    out->removed = model.fit->factor.solve(chosen);
    Eigen::MatrixXd block(k, k);
    Eigen::VectorXd own(k);
    for (Eigen::Index i = 0; i < k; ++i) {
        block.row(i) = out->removed.row(rows[static_cast<std::size_t>(i)]);
        own(i) = model.weights(rows[static_cast<std::size_t>(i)]);
    }
    out->inner.compute(block);
    out->weights -= out->removed * out->inner.solve(own);
    return out;
}

namespace factors {

double prior_variance(const Settings& settings, const Form& form) {
    double variance = 0;
    for (const auto& term : form)
        variance += std::pow(term.weight * prior_of(settings, term.unknown).sd, 2);
    return variance;
}

Projection project(const FamilyModel& model, const Form& form) {
    const auto& fit = *model.fit;
    Projection out{prior_mean(fit.settings, form), Eigen::VectorXd::Zero(model.weights.size()), {}};
    for (const auto& term : form)
        if (const auto column = fit.columns.find(term.unknown); column != fit.columns.end())
            for (const auto& [row, weight] : column->second.rows)
                out.seen(row) += column->second.variance * weight * term.weight;
    out.mean += out.seen.dot(model.weights);
    // S^-1 without the removed rows is S^-1 - B (S^-1 block)^-1 B', B the removed columns
    if (model.removed.cols() > 0) {
        out.put_back = model.removed.transpose() * out.seen;
        model.inner.matrixL().solveInPlace(out.put_back);
    }
    fit.factor.matrixL().solveInPlace(out.seen);
    return out;
}

double variance_of(const FamilyModel& model, const Form& form, const Projection& seen) {
    return prior_variance(model.fit->settings, form) - seen.seen.squaredNorm() + seen.put_back.squaredNorm();
}

RowMarginal row_marginal(const FamilyModel& model, const Observation& observation, const ObservedRow& row) {
    const auto& fit = *model.fit;
    const auto form =
        row_form(fit.settings, observation, row, fit.compounds.find(observation.compound)->second);
    const auto seen = project(model, form);
    return {seen.mean, variance_of(model, form, seen)};
}

}  // namespace factors

}  // namespace isotally
