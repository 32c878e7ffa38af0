#include "isotally/shares.hpp"

#include <Eigen/Cholesky>
#include <Eigen/Core>
#include <algorithm>
#include <boost/random/mersenne_twister.hpp>
#include <boost/random/normal_distribution.hpp>
#include <cmath>
#include <numeric>

namespace isotally {
namespace {

/// Lower factor of a covariance that may be singular (equal sites, no uncertainty left).
Eigen::MatrixXd root_of(const std::vector<double>& covariance, std::size_t n) {
    const auto size = static_cast<Eigen::Index>(n);
    Eigen::MatrixXd matrix = Eigen::Map<const Eigen::MatrixXd>(covariance.data(), size, size);
    const double jitter = 1e-12 * std::max(1.0, matrix.diagonal().maxCoeff());
    matrix.diagonal().array() += jitter;
    return matrix.llt().matrixL();
}

double quantile(std::vector<double>& values, double at) {
    const double place = at * static_cast<double>(values.size() - 1);
    const auto below = static_cast<std::size_t>(place);
    const auto middle = values.begin() + static_cast<std::ptrdiff_t>(below);
    std::nth_element(values.begin(), middle, values.end());
    if (below + 1 >= values.size())
        return *middle;
    const double next = *std::min_element(middle + 1, values.end());
    return *middle + (place - static_cast<double>(below)) * (next - *middle);
}

Range range_of(double value, std::vector<double>& draws, double level) {
    return {value, std::min(value, quantile(draws, (1 - level) / 2)),
            std::max(value, quantile(draws, (1 + level) / 2))};
}

/// The only group of a ring with exactly one, else -1.
bool single_group(const std::vector<PlacedSite>& sites) {
    for (const auto& site : sites)
        if (std::count(site.groups.begin(), site.groups.end(), -1) != 5 || site.tag >= 6)
            return false;
    return true;
}

int distance_to_group(const PlacedSite& site) {
    const auto group = std::find_if(site.groups.begin(), site.groups.end(), [](int g) { return g >= 0; });
    const int apart = std::abs(static_cast<int>(group - site.groups.begin()) - site.position);
    return std::min(apart, 6 - apart);
}

std::optional<double> ortho_over_para(const std::vector<PlacedSite>& sites,
                                      const std::vector<double>& percent) {
    if (!single_group(sites))
        return std::nullopt;
    double shares[4] = {0, 0, 0, 0};
    for (std::size_t i = 0; i < sites.size(); ++i)
        shares[distance_to_group(sites[i])] += percent[i];
    return shares[1] / shares[3];
}

}  // namespace

std::vector<double> isomer_percents(const std::vector<PlacedSite>& sites,
                                    const std::vector<double>& log10_factors) {
    const double top = *std::max_element(log10_factors.begin(), log10_factors.end());
    std::vector<double> percent(sites.size());
    double total = 0;
    for (std::size_t i = 0; i < sites.size(); ++i)
        total += percent[i] = sites[i].multiplicity * std::pow(10.0, log10_factors[i] - top);
    for (auto& share : percent)
        share *= 100 / total;
    return percent;
}

ShareDraws draw_shares(const Tables& tables, std::string_view family, const std::vector<PlacedSite>& sites,
                       const SiteFactors& factors, const Draws& draws) {
    const std::size_t n = sites.size();
    const double points = model_figure(tables, family, "laboratory_sd_points").value;
    const double scatter = model_figure(tables, family, "laboratory_sd_log10").value;
    const double most_scatter = model_figure(tables, family, "laboratory_sd_minor_log10").value;
    const auto root = root_of(factors.covariance, n);
    const auto count = static_cast<std::size_t>(draws.count);
    std::vector<std::vector<double>> share(n, std::vector<double>(count));
    std::vector<double> ratio(count), rate(count), drawn(n), percent(n);
    boost::random::mt19937_64 random(draws.seed);
    boost::random::normal_distribution<double> normal;
    Eigen::VectorXd z(static_cast<Eigen::Index>(n));
    for (std::size_t d = 0; d < count; ++d) {
        for (auto& one : z)
            one = normal(random);
        const Eigen::VectorXd moved = root * z;
        double total = 0;
        for (std::size_t i = 0; i < n; ++i) {
            drawn[i] = factors.mean[i] + moved(static_cast<Eigen::Index>(i));
            total += sites[i].multiplicity * std::pow(10.0, drawn[i]);
        }
        rate[d] = total / 6;
        percent = isomer_percents(sites, drawn);
        double seen = 0;
        for (auto& p : percent) {
            const double sd = std::min(most_scatter, std::hypot(points / (p * std::log(10.0)), scatter));
            p *= std::pow(10.0, sd * normal(random));
            seen += p;
        }
        for (std::size_t i = 0; i < n; ++i)
            share[i][d] = percent[i] *= 100 / seen;
        if (const auto r = ortho_over_para(sites, percent))
            ratio[d] = *r;
    }
    const auto at_mean = isomer_percents(sites, factors.mean);
    ShareDraws out;
    for (std::size_t i = 0; i < n; ++i)
        out.percent.push_back(range_of(at_mean[i], share[i], draws.level));
    if (const auto r = ortho_over_para(sites, at_mean))
        out.ortho_para_ratio = range_of(*r, ratio, draws.level);
    double total = 0;
    for (std::size_t i = 0; i < n; ++i)
        total += sites[i].multiplicity * std::pow(10.0, factors.mean[i]);
    out.relative_rate = range_of(total / 6, rate, draws.level);
    return out;
}

MoleculeName name_molecule(const Tables& tables, const Arene& arene) {
    MoleculeName out;
    const auto ring = name_ring(tables, arene.rings.front().groups);
    out.systematic = ring.systematic;
    out.name = ring.general ? ring.general : ring.systematic;
    for (const auto& known : tables.names)
        if (known.preferred && known.smiles == arene.smiles)
            out.name = known.name;
    return out;
}

namespace {

/// Names of a product, from the ring it is made on (other rings are groups of it), or a known name.
void name_product(const Knowledge& knowledge, const Arene& arene, int new_group, IsomerShare& share) {
    const auto& tables = knowledge.tables;
    if (new_group >= 0) {
        auto groups = arene.rings[static_cast<std::size_t>(share.site.ring)].groups;
        groups[static_cast<std::size_t>(share.site.positions.front())] = new_group;
        const auto ring = name_ring(tables, groups);
        share.product_systematic_name = ring.systematic;
        share.product_name = ring.general ? ring.general : ring.systematic;
    }
    for (const auto& known : tables.names)
        if (known.preferred && known.smiles == share.site.product)
            share.product_name = known.name;
}

int new_group_index(const Tables& tables, const Reaction& reaction) {
    for (std::size_t i = 0; i < tables.substituents.size(); ++i)
        if (tables.substituents[i].smiles == reaction.new_group)
            return static_cast<int>(i);
    return -1;
}

}  // namespace

Answer<StepAnswer> answer_step(const Knowledge& knowledge, const FamilyModel& model, const Arene& arene,
                               const Conditions& conditions, const Draws& draws) {
    const auto& tables = knowledge.tables;
    const auto& reaction = tables.reactions[static_cast<std::size_t>(conditions.reaction)];
    const auto found = sites(arene, reaction.new_group);
    if (const auto refused = refuse_by_name(tables, arene, conditions, found))
        return *refused;
    const auto placed = placed_sites(arene, found);
    auto factors = site_factors(model, conditions, arene.smiles, placed, true);
    if (const auto refused = refuse_below_floor(tables, conditions, factors.mean))
        return *refused;

    StepAnswer answer;
    answer.smiles = arene.smiles;
    const auto name = name_molecule(tables, arene);
    answer.name = name.name;
    answer.systematic_name = name.systematic;
    answer.conditions = conditions;
    const auto drawn = draw_shares(tables, reaction.family, placed, factors, draws);
    const int new_group = new_group_index(tables, reaction);
    for (std::size_t i = 0; i < found.size(); ++i) {
        IsomerShare share;
        share.site = found[i];
        const auto& ring = arene.rings[static_cast<std::size_t>(found[i].ring)];
        const auto locants = name_ring(tables, ring.groups).locants;
        for (const int position : found[i].positions)
            share.locants.push_back(locants[static_cast<std::size_t>(position)]);
        std::sort(share.locants.begin(), share.locants.end());
        name_product(knowledge, arene, new_group, share);
        share.percent = drawn.percent[i];
        share.log10_factor = factors.mean[i];
        share.log10_factor_sd = std::sqrt(std::max(0.0, factors.covariance[i * found.size() + i]));
        share.contributions = std::move(factors.contributions[i]);
        share.corrections = std::move(factors.corrections[i]);
        answer.shares.push_back(std::move(share));
    }
    std::stable_sort(answer.shares.begin(), answer.shares.end(),
                     [](const IsomerShare& a, const IsomerShare& b) {
                         if (a.percent.value != b.percent.value)
                             return a.percent.value > b.percent.value;
                         return a.site.product < b.site.product;
                     });
    answer.ortho_para_ratio = drawn.ortho_para_ratio;
    answer.relative_rate = drawn.relative_rate;
    answer.measured_by = std::move(factors.measured_by);
    answer.measured_nearby = std::move(factors.measured_nearby);
    const double told = model_figure(tables, reaction.family, "told_percent").value;
    std::vector<Site> notable;  // what is made in traces only needs no caution of its own
    for (std::size_t i = 0; i < found.size(); ++i)
        if (drawn.percent[i].value >= told)
            notable.push_back(found[i]);
    answer.cautions = cautions_for(tables, arene, conditions, notable);
    answer.notes = reaction_notes(knowledge, arene, conditions, drawn.relative_rate.value);
    return answer;
}

}  // namespace isotally
