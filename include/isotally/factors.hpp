// Log partial rate factors of the sites of a ring under given conditions, with their covariance.
#pragma once

#include <functional>
#include <map>
#include <memory>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "isotally/arene.hpp"
#include "isotally/tables.hpp"

namespace isotally {

enum Relation { ortho = 0, meta = 1, para = 2 };
inline constexpr const char* relation_names[] = {"ortho", "meta", "para"};

/// Relation of two different positions of a ring.
constexpr Relation relation_between(int one, int other) {
    const int apart = (one - other + 6) % 6;
    return static_cast<Relation>((apart < 6 - apart ? apart : 6 - apart) - 1);
}

/// Conditions of one step.
struct Conditions {
    int reaction = -1;  // index in Tables::reactions
    double temperature_C = 25;
    double acid_percent = 0;  // sulfuric acid, weight percent; only where the reaction has it
};

/// A position of a ring: the groups as they are fed and which of the six positions it is.
struct PlacedSite {
    RingGroups groups{};
    int position = 0;
    int multiplicity = 1;
    int tag = 0;  // ring * 6 + first position: which site of the compound this is
};

/// One linear observation of the sites of a compound: sum of weight * log10 F = value + noise.
struct ObservedRow {
    enum class Kind { figure, at_most, rule };
    std::vector<std::pair<int, double>> weights;  // index in Observation::sites, weight
    double value = 0;
    double noise_sd = 0;       // its own
    Kind kind = Kind::figure;  // at_most: known only as "not more than"; rule: of the trade, no measurement
    double limit = 0, softness = 0;  // at_most: the limit itself; value and noise_sd are its linear stand-in
};

/// A record of the tables, resolved onto the sites of its compound.
struct Observation {
    std::string id, compound, source, status, confidence;
    Conditions conditions;
    std::vector<PlacedSite> sites;
    std::vector<ObservedRow> rows;
    double shared_sd = 0;  // noise common to its rows (the reference isomer of log-ratios)
    enum class Kind { shares, factor, rate, rule } kind = Kind::shares;
};

/// A row of states.csv, resolved: in this reaction, between these acid strengths, a group reacts as another.
struct GroupState {
    int reaction = 0, group = 0, state = 0;
    double acid_from = 0, acid_to = 0;  // both 0: any
    bool both_forms = false;            // a trace of the group as fed reacts too
};

/// Everything a question needs: tables with canonical molecules, groups, resolved observations.
struct Knowledge {
    Tables tables;
    GroupIndex groups;
    std::vector<GroupState> states;  // by reaction, then group
    std::vector<Observation> observations;
};

/// Resolves tables into knowledge; throws Error{tables} where a molecule of a record can't be read or
/// a product is no isomer of its substrate.
Knowledge prepare(Tables tables);

/// Every such fault of the tables, each with file, line and field.
std::vector<Fault> lint_chemistry(const Tables& tables);

/// What the medium makes of the groups of a ring (ammonium, complexed carbonyl ...).
RingGroups in_state(const Knowledge& knowledge, const Conditions& conditions, const RingGroups& groups);

/// The state of one group, or none where the medium leaves it as it is.
const GroupState* state_of(const Knowledge& knowledge, const Conditions& conditions, int group);

/// The linear Gaussian model of one reaction family, fitted to its observations.
///
/// Unknowns z are independent a priori with mean and sd from model.csv; an observation row is h.z + noise.
/// With S = H P H' + R, the mean of a form q is q.m + q P H' S^-1 (y - H m) and the covariance of two forms
/// is q P q' - q P H' S^-1 H P q'.
struct FamilyModel;

/// Fits a family to all observations of it but those left out (by compound, canonical SMILES). The knowledge
/// must outlive the model.
std::shared_ptr<const FamilyModel> fit_family(const Knowledge& knowledge, std::string_view family,
                                              std::string_view left_out_compound = {});

/// The same model without the observations of one compound, exactly as if it had been fitted without them.
std::shared_ptr<const FamilyModel> leave_out(const FamilyModel& model, std::string_view compound);

/// The same without the observations for which `which` is true.
std::shared_ptr<const FamilyModel> leave_out(const FamilyModel& model,
                                             const std::function<bool(const Observation&)>& which);

/// What one group adds to log10 F of a site.
struct Contribution {
    int substituent = -1;  // in the state in which it reacts
    Relation relation = ortho;
    double log10_factor = 0, sd = 0;
    std::string evidence;  // measured, inferred, correlated, assumed
    std::vector<std::string> sources;
};

struct Correction {
    std::string name;
    double log10_factor = 0, sd = 0;
};

struct SiteFactors {
    std::vector<double> mean;        // log10 F relative to one position of benzene
    std::vector<double> covariance;  // row-major, sites x sites; the compound's own deviation included
    std::vector<std::vector<Contribution>> contributions;
    std::vector<std::vector<Correction>> corrections;
    // ids of the isomer distributions of this very compound: in this reaction, and in others of the family
    std::vector<std::string> measured_by, measured_nearby;
};

/// How many groups of the tables have each kind of evidence in each family: "nitration, measured" ...
std::vector<std::pair<std::string, std::size_t>> count_evidence(const Knowledge& knowledge);

/// Posterior of the sites of a compound (canonical SMILES; for its own deviation). With `explain`, the
/// contributions and corrections too; they sum to `mean`.
SiteFactors site_factors(const FamilyModel& model, const Conditions& conditions, std::string_view compound,
                         const std::vector<PlacedSite>& sites, bool explain);

/// A family's model under one set of conditions. It keeps what each group adds, so that many molecules are
/// answered fast: the same figures as site_factors above. Not to be shared between threads.
struct SiteModel;
std::shared_ptr<SiteModel> under_conditions(std::shared_ptr<const FamilyModel> family,
                                            const Conditions& conditions);
SiteFactors site_factors(SiteModel& model, std::string_view compound, const std::vector<PlacedSite>& sites,
                         bool explain);

/// The sites as the model wants them.
std::vector<PlacedSite> placed_sites(const Arene& arene, const std::vector<Site>& sites);

}  // namespace isotally
