// Percent of each isomer of one substitution, with interval and evidence.
#pragma once

#include <cstdint>
#include <memory>
#include <optional>
#include <random>
#include <string>
#include <vector>

#include "isotally/arene.hpp"
#include "isotally/factors.hpp"
#include "isotally/reactivity.hpp"

namespace isotally {

struct Draws {
    double level = 0.90;  // 0..1: how often the intervals should hold
    int count = 1000;
    std::uint64_t seed = 1;
};

struct Range {
    double value = 0, low = 0, high = 0;
};

struct IsomerShare {
    Site site;
    std::vector<int> locants;  // of the substrate's systematic name
    std::optional<std::string> product_name, product_systematic_name;
    Range percent;  // share at the posterior mean; what another laboratory would find
    double log10_factor = 0, log10_factor_sd = 0;
    std::vector<Contribution> contributions;
    std::vector<Correction> corrections;
};

struct StepAnswer {
    std::string smiles;
    std::optional<std::string> name, systematic_name;
    Conditions conditions;
    std::vector<IsomerShare> shares;        // by falling percent
    std::optional<Range> ortho_para_ratio;  // all ortho over all para; rings with exactly one group
    Range relative_rate;                    // whole molecule, benzene = 1, no encounter limit
    // isomer distributions of this compound: in this reaction, and in others of the family
    std::vector<std::string> measured_by, measured_nearby;
    std::vector<ProductCaution> cautions;
    std::vector<std::string> notes;
};

/// Share of product k = n_k F_k / sum_j n_j F_j at the posterior mean of log10 F, in percent (they sum to
/// 100).
std::vector<double> isomer_percents(const std::vector<PlacedSite>& sites,
                                    const std::vector<double>& log10_factors);

/// Standard normals by column, `draws.count` each, made on first use: the same for every molecule. Each
/// column holds the quantiles at the middle of `count` equal parts, in random order (a Latin hypercube), so
/// that a thousand draws give the ends of an interval as well as many thousand independent ones.
struct Normals {
    int count;
    std::mt19937_64 random;
    std::vector<double> in_order;
    std::vector<std::vector<double>> columns;

    explicit Normals(const Draws& draws) : count(draws.count), random(draws.seed) {}
    const double* column(std::size_t k);
};

/// Intervals of shares by draws of the posterior and of a laboratory's scatter.
struct ShareDraws {
    std::vector<Range> percent;
    std::optional<Range> ortho_para_ratio;
    Range relative_rate;
};

ShareDraws draw_shares(const Tables& tables, std::string_view family, const std::vector<PlacedSite>& sites,
                       const SiteFactors& factors, const Draws& draws, Normals& normals);
ShareDraws draw_shares(const Tables& tables, std::string_view family, const std::vector<PlacedSite>& sites,
                       const SiteFactors& factors, const Draws& draws);

/// One question put to many molecules: keeps what does not depend on the molecule. One for each thread; the
/// answers are those of answer_step below, byte for byte.
struct StepWorker {
    const Knowledge* knowledge;
    Rules rules;
    Conditions conditions;
    Draws draws;
    std::shared_ptr<SiteModel> model;
    std::shared_ptr<Workspace> workspace;
    Normals normals;
};
StepWorker step_worker(const Knowledge& knowledge, std::shared_ptr<const FamilyModel> model,
                       const Conditions& conditions, const Draws& draws);
Answer<StepAnswer> answer_step(StepWorker& worker, const Arene& arene);

/// One step: refuses what does not go. The model is that of the reaction's family.
Answer<StepAnswer> answer_step(const Knowledge& knowledge, const FamilyModel& model, const Arene& arene,
                               const Conditions& conditions, const Draws& draws);

/// Name of a molecule: general and systematic, where there is one.
struct MoleculeName {
    std::optional<std::string> name, systematic;
};
MoleculeName name_molecule(const Tables& tables, const Arene& arene);

}  // namespace isotally
