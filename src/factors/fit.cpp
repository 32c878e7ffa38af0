#include "fit.hpp"

#include <Eigen/Cholesky>
#include <Eigen/Core>
#include <algorithm>
#include <cmath>
#include <set>

#include "terms.hpp"

namespace isotally {

using factors::Form;
using factors::Prior;
using factors::Settings;
using factors::Term;
using factors::Type;
using factors::Unknown;

/// What all models of one fit share.
struct Fit {
    Settings settings;
    std::map<std::string, int, std::less<>> compounds;  // those observed, by canonical SMILES
    struct Column {
        double variance = 0;
        std::vector<std::pair<int, double>> rows;
    };
    std::map<Unknown, Column> columns;
    Eigen::LLT<Eigen::MatrixXd> factor;  // of S = H P H' + R
    std::vector<const Observation*> observations;
    std::vector<std::size_t> observation_of_row;
    std::map<std::pair<int, Relation>, std::vector<std::pair<const Observation*, int>>>
        carriers;  // of a group at a relation: record, groups on its ring
};

struct FamilyModel {
    std::shared_ptr<const Fit> fit;
    Eigen::VectorXd weights;  // S^-1 (y - H m), over the rows kept
    std::set<const Observation*> left_out;
    Eigen::MatrixXd removed;            // columns of S^-1 that belong to those rows
    Eigen::LLT<Eigen::MatrixXd> inner;  // their block of S^-1
};

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

namespace {

/// Mean and covariance of a list of forms under the posterior.
struct Posterior {
    Eigen::VectorXd mean;
    Eigen::MatrixXd covariance;
};

Posterior posterior(const FamilyModel& model, const std::vector<Form>& forms) {
    if (forms.empty())
        return {};
    const auto& fit = *model.fit;
    const auto q = static_cast<Eigen::Index>(forms.size());
    const auto n = model.weights.size();
    Eigen::MatrixXd cross = Eigen::MatrixXd::Zero(n, q);
    Posterior out{Eigen::VectorXd::Zero(q), Eigen::MatrixXd::Zero(q, q)};
    std::map<Unknown, std::vector<std::pair<Eigen::Index, double>>> by_unknown;
    for (Eigen::Index i = 0; i < q; ++i)
        for (const auto& term : forms[static_cast<std::size_t>(i)])
            by_unknown[term.unknown].emplace_back(i, term.weight);
    for (const auto& [unknown, uses] : by_unknown) {
        const auto prior = factors::prior_of(fit.settings, unknown);
        const double variance = prior.sd * prior.sd;
        const auto column = fit.columns.find(unknown);
        for (const auto& [i, wi] : uses) {
            out.mean(i) += wi * prior.mean;
            for (const auto& [j, wj] : uses)
                out.covariance(i, j) += variance * wi * wj;
            if (column != fit.columns.end())
                for (const auto& [row, w] : column->second.rows)
                    cross(row, i) += variance * w * wi;
        }
    }
    if (n > 0) {
        out.mean += cross.transpose() * model.weights;
        // S^-1 without the removed rows is S^-1 - B (S^-1 block)^-1 B', B the removed columns
        if (model.removed.cols() > 0) {
            Eigen::MatrixXd back = model.removed.transpose() * cross;
            model.inner.matrixL().solveInPlace(back);
            out.covariance += back.transpose() * back;
        }
        fit.factor.matrixL().solveInPlace(cross);
        out.covariance -= cross.transpose() * cross;
    }
    return out;
}

/// Who says so: measured on the monosubstituted ring, inferred from others that carry the group,
/// correlated by its own constants, assumed by another group's.
void tell_evidence(const Fit& fit, Contribution& contribution, const std::set<const Observation*>& left_out) {
    bool mono = false, poly = false;
    const auto found = fit.carriers.find({contribution.substituent, contribution.relation});
    if (found != fit.carriers.end())
        for (const auto& [observation, carried] : found->second) {
            if (left_out.contains(observation))
                continue;
            (carried == 1 ? mono : poly) = true;
            auto& sources = contribution.sources;
            if (carried == 1 && !observation->source.empty() &&
                std::find(sources.begin(), sources.end(), observation->source) == sources.end())
                sources.push_back(observation->source);
        }
    const auto& constants = factors::group_constants(fit.settings, contribution.substituent);
    contribution.evidence = mono                ? "measured"
                            : poly              ? "inferred"
                            : constants.assumed ? "assumed"
                                                : "correlated";
    if (!mono)
        contribution.sources = {contribution.relation == meta ? constants.source_meta
                                                              : constants.source_para};
    std::erase(contribution.sources, "");
}

double sd_of(double variance) {
    return std::sqrt(std::max(variance, 0.0));
}

void explain_sites(const FamilyModel& model, const Conditions& conditions, int compound,
                   const std::vector<PlacedSite>& sites, SiteFactors& out) {
    const auto& fit = *model.fit;
    const auto& settings = fit.settings;
    for (const auto& site : sites) {
        const auto groups = in_state(*settings.knowledge, conditions, site.groups);
        std::vector<Form> forms;
        std::vector<Contribution> contributions;
        std::vector<Correction> corrections;
        for (int p = 0; p < 6; ++p) {
            const int group = groups[static_cast<std::size_t>(p)];
            if (group < 0 || p == site.position)
                continue;
            contributions.push_back({group, relation_between(p, site.position), 0, 0, "", {}});
            factors::add_contribution(settings, conditions, group, contributions.back().relation, 1,
                                      forms.emplace_back());
            factors::compact(forms.back());
        }
        for (std::size_t which = 0; which < factors::corrections.size(); ++which) {
            const double count = factors::correction_count(settings, which, groups, site.position);
            if (settings.correction[which].sd <= 0 || count == 0)
                continue;
            corrections.push_back({factors::corrections[which], 0, 0});
            forms.push_back({{{Type::correction, static_cast<int>(which), 0, 0}, count}});
        }
        if (contributions.size() > 1) {
            corrections.push_back({"the compound's own deviation", 0, 0});
            forms.push_back(
                {{{Type::discrepancy, compound, site.tag, 0}, 1},
                 {{Type::discrepancy_of_conditions, compound, site.tag, conditions.reaction}, 1}});
        }
        const auto at = posterior(model, forms);
        for (std::size_t i = 0; i < forms.size(); ++i) {
            const auto k = static_cast<Eigen::Index>(i);
            const double sd = sd_of(at.covariance(k, k));
            if (i < contributions.size()) {
                contributions[i].log10_factor = at.mean(k);
                contributions[i].sd = sd;
                tell_evidence(fit, contributions[i], model.left_out);
            } else {
                corrections[i - contributions.size()].log10_factor = at.mean(k);
                corrections[i - contributions.size()].sd = sd;
            }
        }
        out.contributions.push_back(std::move(contributions));
        out.corrections.push_back(std::move(corrections));
    }
}

}  // namespace

SiteFactors site_factors(const FamilyModel& model, const Conditions& conditions, std::string_view compound,
                         const std::vector<PlacedSite>& sites, bool explain) {
    const auto& fit = *model.fit;
    const auto known = fit.compounds.find(compound);
    const int index = known == fit.compounds.end() ? static_cast<int>(fit.compounds.size()) : known->second;
    std::vector<Form> forms;
    for (const auto& site : sites)
        forms.push_back(factors::site_form(fit.settings, conditions, site, index));
    const auto at = posterior(model, forms);
    SiteFactors out;
    out.mean.assign(at.mean.data(), at.mean.data() + at.mean.size());
    out.covariance.assign(at.covariance.data(), at.covariance.data() + at.covariance.size());
    for (const auto* observation : fit.observations) {
        if (observation->compound != compound || model.left_out.contains(observation) ||
            observation->kind != Observation::Kind::shares)
            continue;
        const bool here = observation->conditions.reaction == conditions.reaction;
        (here ? out.measured_by : out.measured_nearby).push_back(observation->id);
    }
    if (explain)
        explain_sites(model, conditions, index, sites, out);
    return out;
}

namespace factors {

RowMarginal row_marginal(const FamilyModel& model, const Observation& observation, const ObservedRow& row) {
    const auto& fit = *model.fit;
    const auto form =
        row_form(fit.settings, observation, row, fit.compounds.find(observation.compound)->second);
    const auto at = posterior(model, {form});
    return {at.mean(0), at.covariance(0, 0)};
}

}  // namespace factors

std::vector<std::pair<std::string, std::size_t>> count_evidence(const Knowledge& knowledge) {
    std::map<std::string, std::size_t> counts;
    std::vector<std::string> families;
    for (const auto& reaction : knowledge.tables.reactions) {
        if (std::find(families.begin(), families.end(), reaction.family) != families.end())
            continue;
        families.push_back(reaction.family);
        const auto model = fit_family(knowledge, reaction.family);
        for (std::size_t i = 0; i < knowledge.tables.substituents.size(); ++i) {
            std::string best;  // of its three positions
            for (const auto relation : {ortho, meta, para}) {
                Contribution contribution{static_cast<int>(i), relation, 0, 0, "", {}};
                tell_evidence(*model->fit, contribution, {});
                if (best.empty() || contribution.evidence == "measured" ||
                    (contribution.evidence == "inferred" && best != "measured"))
                    best = contribution.evidence;
            }
            ++counts[reaction.family + ", " + best];
        }
    }
    return {counts.begin(), counts.end()};
}

}  // namespace isotally
