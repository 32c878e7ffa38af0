// Worlds with known truth: the unknowns of a family are drawn from their priors, every record of the tables
// is measured anew in that world, the family is fitted to those figures, and another laboratory's shares of
// rings that were not measured must lie in the 90 % intervals nine times in ten.
#include <gtest/gtest.h>

#include <algorithm>
#include <boost/random/mersenne_twister.hpp>
#include <boost/random/normal_distribution.hpp>
#include <cmath>
#include <map>

#include "factors/fit.hpp"
#include "isotally/shares.hpp"
#include "knowledge.hpp"

namespace isotally {
namespace {

constexpr int worlds = 1000;
constexpr const char* family = "bromination";

struct World {
    boost::random::mt19937_64 random;
    boost::random::normal_distribution<double> normal;
    std::map<factors::Unknown, double> truth;

    explicit World(std::uint64_t seed) : random(seed) {}
    double draw() { return normal(random); }

    double value(const factors::Settings& settings, const factors::Form& form) {
        double sum = 0;
        for (const auto& term : form) {
            const auto [at, fresh] = truth.try_emplace(term.unknown, 0.0);
            if (fresh) {
                const auto prior = factors::prior_of(settings, term.unknown);
                at->second = prior.mean + prior.sd * draw();
            }
            sum += term.weight * at->second;
        }
        return sum;
    }
};

/// The observations of the family whose rows are figures: bounds and rules are no draws of this model.
Knowledge measurable(const Knowledge& known) {
    Knowledge kept = known;
    std::erase_if(kept.observations, [&](Observation& observation) {
        std::erase_if(observation.rows,
                      [](const ObservedRow& row) { return row.kind != ObservedRow::Kind::figure; });
        const auto& reaction =
            known.tables.reactions[static_cast<std::size_t>(observation.conditions.reaction)];
        return observation.rows.empty() || reaction.family != family;
    });
    return kept;
}

void measure_anew(Knowledge& known, const factors::Settings& settings, World& world,
                  const std::map<std::string, int>& compounds) {
    for (auto& observation : known.observations) {
        const double shared = observation.shared_sd * world.draw();
        for (auto& row : observation.rows) {
            row.value = shared + row.noise_sd * world.draw();
            for (const auto& [site, weight] : row.weights)
                row.value +=
                    weight * world.value(settings,
                                         factors::site_form(settings, observation.conditions,
                                                            observation.sites[static_cast<std::size_t>(site)],
                                                            compounds.at(observation.compound)));
        }
    }
}

/// Shares that another laboratory finds where these are true.
std::vector<double> found_by_a_laboratory(std::vector<double> percent, World& world) {
    const auto figure = [](const char* quantity) { return model_figure(tables(), family, quantity).value; };
    double total = 0;
    for (auto& p : percent) {
        const double sd = std::min(
            figure("laboratory_sd_minor_log10"),
            std::hypot(figure("laboratory_sd_points") / (p * std::log(10.0)), figure("laboratory_sd_log10")));
        p *= std::pow(10.0, sd * world.draw());
        total += p;
    }
    for (auto& p : percent)
        p *= 100 / total;
    return percent;
}

TEST(Worlds, IntervalsHoldAsOftenAsTheyClaim) {
    auto known = measurable(knowledge());
    const auto settings = factors::read_settings(known, family);
    std::map<std::string, int> compounds;
    for (const auto& observation : known.observations)
        compounds.emplace(observation.compound, static_cast<int>(compounds.size()));
    const Conditions conditions{find_reaction(known.tables, "bromination-acetic-acid"), 25, 0};
    struct Target {
        std::string smiles;
        std::vector<PlacedSite> sites;
    };
    std::vector<Target> targets;
    for (const char* smiles : {"CCc1ccccc1", "Cc1ccc(Cl)cc1", "CCOc1ccccc1", "Cc1cccc(F)c1", "COc1ccccc1C"}) {
        const auto arene = std::get<Arene>(parse_arene(known.tables, known.groups, smiles));
        targets.push_back({arene.smiles, placed_sites(arene, sites(arene, "*Br"))});
        compounds.emplace(arene.smiles, static_cast<int>(compounds.size()));
    }
    int inside = 0, all = 0;
    for (int w = 0; w < worlds; ++w) {
        World world(static_cast<std::uint64_t>(w));
        measure_anew(known, settings, world, compounds);
        const auto model = fit_family(known, family);
        const auto& target = targets[static_cast<std::size_t>(w) % targets.size()];
        std::vector<double> truth;
        for (const auto& site : target.sites)
            truth.push_back(world.value(
                settings, factors::site_form(settings, conditions, site, compounds.at(target.smiles))));
        const auto found = found_by_a_laboratory(isomer_percents(target.sites, truth), world);
        const auto answer = site_factors(*model, conditions, target.smiles, target.sites, false);
        const auto drawn = draw_shares(known.tables, family, target.sites, answer, {0.9, 400, 1});
        for (std::size_t i = 0; i < found.size(); ++i) {
            ++all;
            inside += found[i] >= drawn.percent[i].low && found[i] <= drawn.percent[i].high;
        }
    }
    const double coverage = static_cast<double>(inside) / all;
    EXPECT_GE(coverage, 0.88);
    EXPECT_LE(coverage, 0.92);
}

}  // namespace
}  // namespace isotally
