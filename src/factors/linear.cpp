#include "linear.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

#include "fit.hpp"

namespace isotally::factors {
namespace {

constexpr int sweeps = 4;
constexpr double says_nothing_sd = 1000.0;
constexpr double damping = 0.7;

/// A Gaussian factor by precision and precision times mean.
struct Natural {
    double precision = 0, shift = 0;
};

/// Standard normal density over distribution function, stable in the far tail.
double hazard(double z) {
    if (z < -30)
        return -z;
    const double density = std::exp(-0.5 * z * z) / std::sqrt(2 * std::numbers::pi);
    return density / (0.5 * std::erfc(-z / std::numbers::sqrt2));
}

/// Mean and variance of N(mean, variance) times the soft step Phi((limit - x) / softness).
RowMarginal cut_off(const RowMarginal& x, double limit, double softness) {
    const double spread = x.variance + softness * softness;
    const double z = (limit - x.mean) / std::sqrt(spread);
    const double r = hazard(z);
    return {x.mean - x.variance * r / std::sqrt(spread),
            x.variance - x.variance * x.variance * r * (z + r) / spread};
}

struct Bound {
    std::size_t observation, row;
    double limit, softness;
    Natural factor;
};

void write_back(Knowledge& knowledge, const Bound& bound) {
    auto& row = knowledge.observations[bound.observation].rows[bound.row];
    const bool weak = bound.factor.precision < 1 / (says_nothing_sd * says_nothing_sd);
    row.noise_sd = weak ? says_nothing_sd : 1 / std::sqrt(bound.factor.precision);
    row.value = weak ? bound.limit : bound.factor.shift / bound.factor.precision;
}

void make_bounds_linear(Knowledge& knowledge, const std::string& family, const std::vector<bool>& use) {
    std::vector<Bound> bounds;
    for (std::size_t i = 0; i < use.size(); ++i)
        for (std::size_t r = 0; use[i] && r < knowledge.observations[i].rows.size(); ++r) {
            const auto& row = knowledge.observations[i].rows[r];
            if (row.kind == ObservedRow::Kind::at_most)
                bounds.push_back({i, r, row.limit, row.softness, {}});
        }
    for (const auto& bound : bounds)
        write_back(knowledge, bound);
    for (int sweep = 0; sweep < sweeps && !bounds.empty(); ++sweep) {
        const auto model = fit_rows(knowledge, family, use);
        for (auto& bound : bounds) {
            const auto& observation = knowledge.observations[bound.observation];
            const auto now = row_marginal(*model, observation, observation.rows[bound.row]);
            // the marginal without this bound, then with the cut
            const double precision = 1 / now.variance - bound.factor.precision;
            if (precision <= 0)
                continue;
            const RowMarginal without{(now.mean / now.variance - bound.factor.shift) / precision,
                                      1 / precision};
            const auto cut = cut_off(without, bound.limit, bound.softness);
            const Natural wanted{std::max(0.0, 1 / cut.variance - precision),
                                 cut.mean / cut.variance - without.mean * precision};
            bound.factor.precision += damping * (wanted.precision - bound.factor.precision);
            bound.factor.shift += damping * (wanted.shift - bound.factor.shift);
        }
        for (const auto& bound : bounds)
            write_back(knowledge, bound);
    }
}

void make_rates_linear(Knowledge& knowledge, const std::string& family, const std::vector<bool>& all) {
    auto use = all;
    for (std::size_t i = 0; i < use.size(); ++i)
        use[i] = use[i] && knowledge.observations[i].kind != Observation::Kind::rate;
    const auto model = fit_rows(knowledge, family, use);
    for (std::size_t i = 0; i < use.size(); ++i) {
        auto& observation = knowledge.observations[i];
        if (!all[i] || observation.kind != Observation::Kind::rate)
            continue;
        const auto at =
            site_factors(*model, observation.conditions, observation.compound, observation.sites, false);
        double total = 0, linear = 0;
        for (std::size_t s = 0; s < at.mean.size(); ++s)
            total += observation.sites[s].multiplicity * std::pow(10.0, at.mean[s]);
        auto& row = observation.rows.front();
        row.weights.clear();
        for (std::size_t s = 0; s < at.mean.size(); ++s) {
            const double share = observation.sites[s].multiplicity * std::pow(10.0, at.mean[s]) / total;
            row.weights.emplace_back(static_cast<int>(s), share);
            linear += share * at.mean[s];
        }
        row.value -= std::log10(total / 6) - linear;
    }
}

}  // namespace

void make_linear(Knowledge& knowledge) {
    for (const auto& family : families_of(knowledge.tables)) {
        std::vector<bool> use(knowledge.observations.size());
        for (std::size_t i = 0; i < use.size(); ++i)
            use[i] = knowledge.tables
                         .reactions[static_cast<std::size_t>(knowledge.observations[i].conditions.reaction)]
                         .family == family;
        make_rates_linear(knowledge, family, use);
        make_bounds_linear(knowledge, family, use);
    }
}

}  // namespace isotally::factors
