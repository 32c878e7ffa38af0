#include <algorithm>
#include <cmath>
#include <unordered_map>

#include "family_model.hpp"
#include "fit.hpp"

namespace isotally {

using factors::Form;
using factors::Type;
using factors::Unknown;

namespace {

/// Who says so: measured on the monosubstituted ring, inferred from others that carry the group,
/// correlated by its own constants, assumed by another group's.
void tell_evidence(const FamilyModel& model, Contribution& contribution) {
    const auto& fit = *model.fit;
    bool mono = false, poly = false;
    const auto found = fit.carriers.find({contribution.substituent, contribution.relation});
    if (found != fit.carriers.end())
        for (const auto& [observation, carried] : found->second) {
            if (model.left_out.contains(observation))
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

/// A part of a site: a linear form, what the fit makes of it, and its terms by dense number.
struct Part {
    Contribution told;  // of groups only
    factors::Projection seen;
    double sd = 0;
    std::vector<std::pair<int, double>> terms;
};

}  // namespace

struct SiteModel {
    std::shared_ptr<const FamilyModel> family;
    Conditions conditions;
    std::unordered_map<int, Part> groups;                // by group in its state * 3 + relation
    std::map<std::pair<int, double>, Part> corrections;  // by which, how often
    std::map<Unknown, int> numbers;                      // dense number of an unknown
    std::vector<Unknown> unknowns;                       // by number
    std::vector<double> variances;                       // prior variance by number
    std::vector<double> weights;                         // scratch: number * sites + site

    Part make(const Form& form) {
        Part part;
        part.seen = factors::project(*family, form);
        part.sd = std::sqrt(std::max(0.0, factors::variance_of(*family, form, part.seen)));
        for (const auto& term : form) {
            const auto [at, fresh] = numbers.try_emplace(term.unknown, static_cast<int>(variances.size()));
            if (fresh)
                unknowns.push_back(term.unknown),
                    variances.push_back(
                        std::pow(factors::prior_of(family->fit->settings, term.unknown).sd, 2));
            part.terms.emplace_back(at->second, term.weight);
        }
        return part;
    }

    const Part& of_group(int group, Relation relation) {
        const auto found = groups.find(group * 3 + relation);
        if (found != groups.end())
            return found->second;
        Form form;
        factors::add_contribution(family->fit->settings, conditions, group, relation, 1, form);
        factors::compact(form);
        Part part = make(form);
        part.told = {group, relation, part.seen.mean, part.sd, "", {}};
        tell_evidence(*family, part.told);
        return groups.emplace(group * 3 + relation, std::move(part)).first->second;
    }

    const Part& of_correction(std::size_t which, double count) {
        const std::pair key(static_cast<int>(which), count);
        const auto found = corrections.find(key);
        if (found != corrections.end())
            return found->second;
        Form form{{{Type::correction, static_cast<int>(which), 0, 0}, count}};
        return corrections.emplace(key, make(form)).first->second;
    }
};

namespace {

/// The sites of one molecule as sums of parts.
struct Sums {
    SiteModel& model;
    SiteFactors out;
    std::size_t count;
    std::vector<Eigen::VectorXd> seen, put_back;
    std::vector<int> touched;

    Sums(SiteModel& of, std::size_t sites) : model(of), count(sites) {
        out.mean.assign(sites, 0);
        out.covariance.assign(sites * sites, 0);
        const auto& family = *model.family;
        seen.assign(sites, Eigen::VectorXd::Zero(family.weights.size()));
        put_back.assign(sites, Eigen::VectorXd::Zero(family.removed.cols()));
    }

    void add(std::size_t site, const Part& part) {
        out.mean[site] += part.seen.mean;
        seen[site] += part.seen.seen;
        if (put_back[site].size() > 0)
            put_back[site] += part.seen.put_back;
        model.weights.resize(std::max(model.weights.size(), model.variances.size() * count), 0);
        for (const auto& [number, weight] : part.terms) {
            model.weights[static_cast<std::size_t>(number) * count + site] += weight;
            touched.push_back(number);
        }
    }

    SiteFactors finish() {
        // numbers follow the molecules seen before; sums must not
        std::sort(touched.begin(), touched.end(), [&](int a, int b) {
            return model.unknowns[static_cast<std::size_t>(a)] < model.unknowns[static_cast<std::size_t>(b)];
        });
        touched.erase(std::unique(touched.begin(), touched.end()), touched.end());
        for (const int number : touched) {
            const double variance = model.variances[static_cast<std::size_t>(number)];
            double* weight = &model.weights[static_cast<std::size_t>(number) * count];
            for (std::size_t i = 0; i < count; ++i)
                for (std::size_t j = 0; j <= i; ++j)
                    out.covariance[i * count + j] += variance * weight[i] * weight[j];
            std::fill_n(weight, count, 0.0);
        }
        for (std::size_t i = 0; i < count; ++i)
            for (std::size_t j = 0; j <= i; ++j) {
                auto& covariance = out.covariance[i * count + j];
                covariance += put_back[i].dot(put_back[j]) - seen[i].dot(seen[j]);
                out.covariance[j * count + i] = covariance;
            }
        return std::move(out);
    }
};

/// The compound's own deviation at a site: shared by all records of the compound, unknown for a new one.
Form deviation(int compound, int tag, int reaction) {
    return {{{Type::discrepancy, compound, tag, 0}, 1},
            {{Type::discrepancy_of_conditions, compound, tag, reaction}, 1}};
}

}  // namespace

std::shared_ptr<SiteModel> under_conditions(std::shared_ptr<const FamilyModel> family,
                                            const Conditions& conditions) {
    auto model = std::make_shared<SiteModel>();
    model->family = std::move(family);
    model->conditions = conditions;
    return model;
}

SiteFactors site_factors(SiteModel& model, std::string_view compound, const std::vector<PlacedSite>& sites,
                         bool explain) {
    const auto& fit = *model.family->fit;
    const auto& settings = fit.settings;
    const auto known = fit.compounds.find(compound);
    const double own_variance =
        std::pow(settings.discrepancy_sd, 2) + std::pow(settings.discrepancy_of_conditions_sd, 2);
    Sums sums(model, sites.size());
    for (std::size_t i = 0; i < sites.size(); ++i) {
        const auto& site = sites[i];
        const auto groups = in_state(*settings.knowledge, model.conditions, site.groups);
        std::vector<Contribution> contributions;
        std::vector<Correction> corrections;
        int carried = 0;
        for (int p = 0; p < 6; ++p) {
            const int group = groups[static_cast<std::size_t>(p)];
            if (group < 0 || p == site.position)
                continue;
            ++carried;
            const auto& part = model.of_group(group, relation_between(p, site.position));
            sums.add(i, part);
            if (explain)
                contributions.push_back(part.told);
        }
        for (std::size_t which = 0; which < factors::corrections.size(); ++which) {
            if (settings.correction[which].sd <= 0)
                continue;
            const double times = factors::correction_count(settings, which, groups, site.position);
            if (times == 0)
                continue;
            const auto& part = model.of_correction(which, times);
            sums.add(i, part);
            if (explain)
                corrections.push_back({factors::corrections[which], part.seen.mean, part.sd});
        }
        if (carried > 1) {
            Correction own{"the compound's own deviation", 0, std::sqrt(own_variance)};
            if (known == fit.compounds.end()) {
                for (std::size_t j = 0; j <= i; ++j)  // twice the same site: the same deviation
                    if (sites[j].tag == site.tag)
                        sums.out.covariance[i * sites.size() + j] += own_variance;
            } else {
                const auto part = model.make(deviation(known->second, site.tag, model.conditions.reaction));
                sums.add(i, part);
                own.log10_factor = part.seen.mean;
                own.sd = part.sd;
            }
            if (explain)
                corrections.push_back(own);
        }
        if (explain) {
            sums.out.contributions.push_back(std::move(contributions));
            sums.out.corrections.push_back(std::move(corrections));
        }
    }
    if (known != fit.compounds.end())
        for (const auto* observation : fit.observations) {
            if (observation->compound != compound || model.family->left_out.contains(observation) ||
                observation->kind != Observation::Kind::shares)
                continue;
            const bool here = observation->conditions.reaction == model.conditions.reaction;
            (here ? sums.out.measured_by : sums.out.measured_nearby).push_back(observation->id);
        }
    return sums.finish();
}

SiteFactors site_factors(const FamilyModel& model, const Conditions& conditions, std::string_view compound,
                         const std::vector<PlacedSite>& sites, bool explain) {
    // the model outlives this call, so the pointer need not own it
    const auto here = under_conditions({std::shared_ptr<void>(), &model}, conditions);
    return site_factors(*here, compound, sites, explain);
}

std::vector<std::pair<std::string, std::size_t>> count_evidence(const Knowledge& knowledge) {
    std::map<std::string, std::size_t> counts;
    for (const auto& family : families_of(knowledge.tables)) {
        const auto model = fit_family(knowledge, family);
        for (std::size_t i = 0; i < knowledge.tables.substituents.size(); ++i) {
            std::string best;  // of its three positions
            for (const auto relation : {ortho, meta, para}) {
                Contribution contribution{static_cast<int>(i), relation, 0, 0, "", {}};
                tell_evidence(*model, contribution);
                if (best.empty() || contribution.evidence == "measured" ||
                    (contribution.evidence == "inferred" && best != "measured"))
                    best = contribution.evidence;
            }
            ++counts[family + ", " + best];
        }
    }
    return {counts.begin(), counts.end()};
}

}  // namespace isotally
