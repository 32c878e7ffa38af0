#include "isotally/shares.hpp"

#include <Eigen/Cholesky>
#include <Eigen/Core>
#include <algorithm>
#include <boost/math/special_functions/erf.hpp>
#include <boost/random/uniform_int_distribution.hpp>
#include <cmath>
#include <limits>
#include <numbers>

#include "shares/draw_kernel.hpp"

namespace isotally {
namespace {

constexpr double ln10 = std::numbers::ln10;

/// Lower factor (row-major) of the covariance of ln F, which may be singular (equal sites, no uncertainty
/// left).
std::vector<double> root_of(const std::vector<double>& covariance, std::size_t n) {
    using Square = Eigen::Matrix<double, Eigen::Dynamic, Eigen::Dynamic, Eigen::RowMajor>;
    const auto size = static_cast<Eigen::Index>(n);
    Eigen::MatrixXd matrix = Eigen::Map<const Eigen::MatrixXd>(covariance.data(), size, size);
    const double jitter = 1e-12 * std::max(1.0, matrix.diagonal().maxCoeff());
    matrix.diagonal().array() += jitter;
    std::vector<double> root(n * n);
    Eigen::Map<Square>(root.data(), size, size) = ln10 * Eigen::MatrixXd(matrix.llt().matrixL());
    return root;
}

/// The value at a place between two order statistics.
double at_place(std::vector<double>& values, double place) {
    const auto below = static_cast<std::size_t>(place);
    const auto middle = values.begin() + static_cast<std::ptrdiff_t>(below);
    std::nth_element(values.begin(), middle, values.end());
    if (below + 1 >= values.size())
        return *middle;
    const double next = *std::min_element(middle + 1, values.end());
    return *middle + (place - static_cast<double>(below)) * (next - *middle);
}

/// Order statistics of draws: a sample brackets the place, only what lies between is put in order. The same
/// values as ordering all of them, several times faster.
class Ordered {
public:
    explicit Ordered(const std::vector<double>& values) : values_(values) {
        const std::size_t step = std::max<std::size_t>(1, values.size() / sample_size);
        for (std::size_t i = 0; i < values.size(); i += step)
            sample_.push_back(values[i]);
        std::sort(sample_.begin(), sample_.end());
    }

    double at(double share) {
        const double place = share * static_cast<double>(values_.size() - 1);
        const auto guess = static_cast<std::size_t>(share * static_cast<double>(sample_.size() - 1));
        constexpr double far = std::numeric_limits<double>::infinity();
        const double low = guess < margin ? -far : sample_[guess - margin];
        const double high = guess + margin + 1 >= sample_.size() ? far : sample_[guess + margin + 1];
        std::size_t below = 0, kept = 0;
        near_.resize(values_.size());
        for (const double value : values_) {  // without a branch that is hard to foresee
            below += value < low ? 1u : 0u;
            near_[kept] = value;
            kept += value >= low && value <= high ? 1u : 0u;
        }
        near_.resize(kept);
        const double place_in = place - static_cast<double>(below);
        if (place_in >= 0 && place_in < static_cast<double>(near_.size()) - 1)
            return at_place(near_, place_in);
        near_ = values_;
        return at_place(near_, place);
    }

private:
    static constexpr std::size_t sample_size = 32, margin = 4;
    const std::vector<double>& values_;
    std::vector<double> sample_, near_;
};

Range range_of(double value, const std::vector<double>& draws, double level) {
    Ordered ordered(draws);
    return {value, std::min(value, ordered.at((1 - level) / 2)),
            std::max(value, ordered.at((1 + level) / 2))};
}

/// Whether the only ring carries exactly one group.
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

const double* Normals::column(std::size_t k) {
    const auto n = static_cast<std::size_t>(count);
    if (in_order.empty())
        for (std::size_t i = 0; i < n; ++i)
            in_order.push_back(
                -std::numbers::sqrt2 *
                boost::math::erfc_inv((2.0 * static_cast<double>(i) + 1) / static_cast<double>(n)));
    while (columns.size() <= k) {
        columns.push_back(in_order);
        auto& column = columns.back();
        for (std::size_t left = n; left > 1; --left) {
            boost::random::uniform_int_distribution<std::size_t> pick(0, left - 1);
            std::swap(column[left - 1], column[pick(random)]);
        }
    }
    return columns[k].data();
}

ShareDraws draw_shares(const Tables& tables, std::string_view family, const std::vector<PlacedSite>& sites,
                       const SiteFactors& factors, const Draws& draws, Normals& normals) {
    static const auto kernel = shares::draw_kernels().front();
    const std::size_t n = sites.size();
    const auto value = [&](const char* quantity) { return model_figure(tables, family, quantity).value; };
    const auto count = static_cast<std::size_t>(draws.count);
    const auto root = root_of(factors.covariance, n);
    std::vector<double> ln_factor(n), rate(count);
    std::vector<std::vector<double>> share(n, std::vector<double>(count));
    std::vector<double*> out(n);
    for (std::size_t i = 0; i < n; ++i) {
        ln_factor[i] = std::log(sites[i].multiplicity) + ln10 * factors.mean[i];
        normals.column(2 * i + 1);
        out[i] = share[i].data();
    }
    std::vector<const double*> model(n), laboratory(n);
    for (std::size_t i = 0; i < n; ++i)
        model[i] = normals.column(2 * i), laboratory[i] = normals.column(2 * i + 1);
    kernel.run({n, count, ln_factor.data(), root.data(), model.data(), laboratory.data(),
                value("laboratory_sd_points"), ln10 * value("laboratory_sd_log10"),
                ln10 * value("laboratory_sd_minor_log10"), out.data(), rate.data()});
    const auto at_mean = isomer_percents(sites, factors.mean);
    ShareDraws drawn;
    if (const auto ratio = ortho_over_para(sites, at_mean)) {
        std::vector<double> ratios(count), percent(n);
        for (std::size_t d = 0; d < count; ++d) {
            for (std::size_t i = 0; i < n; ++i)
                percent[i] = share[i][d];
            ratios[d] = *ortho_over_para(sites, percent);
        }
        drawn.ortho_para_ratio = range_of(*ratio, ratios, draws.level);
    }
    for (std::size_t i = 0; i < n; ++i)
        drawn.percent.push_back(range_of(at_mean[i], share[i], draws.level));
    double total = 0;
    for (std::size_t i = 0; i < n; ++i)
        total += sites[i].multiplicity * std::pow(10.0, factors.mean[i]);
    drawn.relative_rate = range_of(total / 6, rate, draws.level);
    return drawn;
}

ShareDraws draw_shares(const Tables& tables, std::string_view family, const std::vector<PlacedSite>& sites,
                       const SiteFactors& factors, const Draws& draws) {
    Normals normals(draws);
    return draw_shares(tables, family, sites, factors, draws, normals);
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

StepWorker step_worker(const Knowledge& knowledge, std::shared_ptr<const FamilyModel> model,
                       const Conditions& conditions, const Draws& draws) {
    return {&knowledge,    rules_for(knowledge.tables, conditions.reaction), conditions,
            draws,         under_conditions(std::move(model), conditions),   new_workspace(),
            Normals(draws)};
}

Answer<StepAnswer> answer_step(const Knowledge& knowledge, const FamilyModel& model, const Arene& arene,
                               const Conditions& conditions, const Draws& draws) {
    // the model outlives this call, so the pointer need not own it
    auto worker = step_worker(knowledge, {std::shared_ptr<void>(), &model}, conditions, draws);
    return answer_step(worker, arene);
}

Answer<StepAnswer> answer_step(StepWorker& worker, const Arene& arene) {
    const auto& knowledge = *worker.knowledge;
    const auto& conditions = worker.conditions;
    auto& workspace = *worker.workspace;
    const auto& tables = knowledge.tables;
    const auto& reaction = tables.reactions[static_cast<std::size_t>(conditions.reaction)];
    const auto found = sites(arene, reaction.new_group, workspace);
    if (const auto refused = refuse_by_name(worker.rules, workspace, arene, found))
        return *refused;
    const auto placed = placed_sites(arene, found);
    auto factors = site_factors(*worker.model, arene.smiles, placed, true);
    if (const auto refused = refuse_below_floor(tables, conditions, factors.mean))
        return *refused;

    StepAnswer answer;
    answer.smiles = arene.smiles;
    const auto name = name_molecule(tables, arene);
    answer.name = name.name;
    answer.systematic_name = name.systematic;
    answer.conditions = conditions;
    const auto drawn = draw_shares(tables, reaction.family, placed, factors, worker.draws, worker.normals);
    const int new_group = new_group_index(tables, reaction);
    std::vector<std::array<int, 6>> locants;
    for (const auto& ring : arene.rings)
        locants.push_back(name_ring(tables, ring.groups).locants);
    answer.shares.reserve(found.size());
    for (std::size_t i = 0; i < found.size(); ++i) {
        IsomerShare share;
        share.site = found[i];
        for (const int position : found[i].positions)
            share.locants.push_back(
                locants[static_cast<std::size_t>(found[i].ring)][static_cast<std::size_t>(position)]);
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
    answer.cautions = cautions_for(worker.rules, workspace, arene, notable);
    answer.notes =
        reaction_notes(knowledge, worker.rules, workspace, arene, conditions, drawn.relative_rate.value);
    return answer;
}

}  // namespace isotally
