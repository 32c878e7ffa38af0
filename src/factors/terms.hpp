// The unknowns of a family and what each site factor is made of.
#pragma once

#include <array>
#include <cstdint>
#include <string>
#include <vector>

#include "isotally/factors.hpp"

namespace isotally::factors {

/// An unknown: its type and up to three indices.
enum class Type : std::uint8_t {
    rho,                // slope on sigma plus, shared by the family
    rho_of_conditions,  // deviation of the slope; a: reaction
    ortho_offset,       // a of x[ortho] = x[para] + a + b nu + c sigma
    ortho_steric,
    ortho_sigma,
    ortho_offset_of_conditions,  // a: reaction
    ortho_steric_of_conditions,
    acceptor_para,  // extra of acceptors at para
    kind_residual,  // a: kind, b: relation
    // of groups: a is the head of a series, shared by its members, or a member's own part
    common_residual,            // a: group; the same at all positions of the ring
    residual,                   // a: group, b: relation
    condition_common,           // a: group, c: reaction
    condition,                  // a: group, b: relation, c: reaction
    acid_kind,                  // slope per ten weight percent; a: kind, b: relation
    acid_slope,                 // a: group, b: relation
    temperature,                // slope per ten degrees, families that are not enthalpic; b: relation
    temperature_slope,          // a: group, b: relation
    correction,                 // a: which
    discrepancy,                // a: compound, b: site
    discrepancy_of_conditions,  // c: reaction
};

struct Unknown {
    Type type = Type::rho;
    int a = 0, b = 0, c = 0;
    auto operator<=>(const Unknown&) const = default;
};

struct Term {
    Unknown unknown;
    double weight = 0;
};

using Form = std::vector<Term>;  // a linear form over the unknowns

struct Prior {
    double mean = 0, sd = 0;
};

inline constexpr std::array<const char*, 9> kinds{"alkyl",    "halogen", "donor",   "acceptor", "cation",
                                                  "benzylic", "aryl",    "alkenyl", "silyl"};

/// Corrections to additivity: what each counts is in correction_count; whether a family has it, and
/// with which prior, is in model.csv ("correction:flanked").
inline constexpr std::array<const char*, 2> corrections{"flanked", "buttressed"};

/// Constants of a group with the stand-ins for missing ones.
struct GroupConstants {
    int kind = 0;
    bool draws_off = false;  // an acceptor or a cation
    double sigma_para = 0, sigma_meta = 0, nu = 0;
    double sd_para = 0, sd_meta = 0, sd_nu = 0;
    int head = -1;         // of its series: the group it is like, through all steps (itself if none)
    bool assumed = false;  // a stand-in was needed
    std::string source_para, source_meta;
    std::string missing;  // what can't be found even so
};

/// Numbers of one family, read once from model.csv and reaction_figures.csv.
struct Settings {
    const Knowledge* knowledge = nullptr;
    std::string family;
    Prior rho, ortho_offset, ortho_steric, ortho_sigma, acceptor_para;
    double rho_of_conditions_sd = 0, ortho_offset_of_conditions_sd = 0, ortho_steric_of_conditions_sd = 0;
    std::array<std::array<double, 3>, kinds.size()> residual_sd{}, kind_residual_sd{}, acid_slope_sd{},
        acid_kind_sd{}, condition_sd{};
    std::array<double, kinds.size()> common_residual_sd{}, condition_common_sd{};
    bool enthalpic = true;
    double temperature_reference_C = 0, acid_reference_percent = 0;
    std::array<Prior, 3> temperature{};
    double temperature_slope_sd = 0;
    std::array<Prior, corrections.size()> correction{};
    double discrepancy_sd = 0, discrepancy_of_conditions_sd = 0;
    double own_fraction = 0;             // what a member of a series keeps to itself, of the sd of the series
    std::vector<double> selectivity;     // by reaction: rho of the conditions over rho of the family
    std::vector<GroupConstants> groups;  // by substituent
};

Settings read_settings(const Knowledge& knowledge, std::string_view family);

/// Throws Error{tables} where a constant is missing and no group stands in for it.
const GroupConstants& group_constants(const Settings& settings, int substituent);

Prior prior_of(const Settings& settings, const Unknown& unknown);

/// What one group in its state adds to log10 F of a site at this relation.
void add_contribution(const Settings& settings, const Conditions& conditions, int group, Relation relation,
                      double weight, Form& form);

/// How often a correction applies at a position of a ring (groups in their states).
double correction_count(const Settings& settings, std::size_t which, const RingGroups& groups, int position);

/// log10 F of a site: contributions, corrections, deviation of the compound (index from the model).
Form site_form(const Settings& settings, const Conditions& conditions, const PlacedSite& site, int compound);

/// Adds up terms of the same unknown.
void compact(Form& form);

}  // namespace isotally::factors
