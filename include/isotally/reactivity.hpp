// Whether a reaction goes on a ring, and what is said with it: limits, bans, cautions, all as data.
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "isotally/arene.hpp"
#include "isotally/factors.hpp"

namespace isotally {

/// Conditions with the reaction's defaults for what is not given. Refuses a temperature the family's
/// measured series does not reach and an acid strength outside the reaction's range (naming the one
/// that has it). Throws Error{usage} for an acid strength where the reaction has none.
Answer<Conditions> choose_conditions(const Tables& tables, int reaction, std::optional<double> temperature_C,
                                     std::optional<double> acid_percent);

/// The rows of bans.csv and cautions.csv that concern one reaction. They point into the tables.
struct Rules {
    const Reaction* reaction = nullptr;
    std::vector<const Ban*> energetic, bans;
    std::vector<const Caution*> cautions, notes;
};
Rules rules_for(const Tables& tables, int reaction);

/// Three or more nitro groups, or nitro beside another energetic group: declined whatever the question.
std::optional<Refusal> decline_molecule(const Tables& tables, std::string_view smiles);

/// Named bans, and products that would be declined.
std::optional<Refusal> refuse_by_name(const Rules& rules, Workspace& workspace, const Arene& arene,
                                      const std::vector<Site>& sites);

/// The floor: refused where the best position of every ring lies below it (log10 F in the state of the
/// groups).
std::optional<Refusal> refuse_below_floor(const Tables& tables, const Conditions& conditions,
                                          const std::vector<double>& log10_factors);

struct ProductCaution {
    std::string code, text;
    std::vector<std::string> products;  // SMILES of the products it is about; empty: the step as a whole
};

/// Cautions of a step, the worst first; the standing one last. `sites`: the products worth a caution.
std::vector<ProductCaution> cautions_for(const Rules& rules, Workspace& workspace, const Arene& arene,
                                         const std::vector<Site>& sites);

/// What must be said with the figures: reversible, two forms of a group react, slower than the acid reaches
/// ...
std::vector<std::string> reaction_notes(const Knowledge& knowledge, const Rules& rules, Workspace& workspace,
                                        const Arene& arene, const Conditions& conditions,
                                        double relative_rate);

}  // namespace isotally
