// A family of two reactions and four groups, every figure invented.
#pragma once

#include <map>
#include <string>
#include <utility>
#include <vector>

#include "isotally/tables.hpp"

namespace isotally {

inline constexpr double rho_mean = -6.5, sigma_sd = 0.02;

struct Constants {
    double para, meta, nu;
};
inline const std::map<std::string, Constants> constants_of{{"Me", {-0.31, -0.07, 0.52}},
                                                           {"NO2", {0.79, 0.67, 1.39}}};

inline Substituent small_group(const std::string& id, const std::string& smiles, const std::string& kind) {
    Substituent out;
    out.id = out.name = id;
    out.smiles = smiles;
    out.kind = kind;
    const auto known = constants_of.find(id);
    if (known == constants_of.end())
        return out;
    Provenance from;
    from.source = "constants";
    out.constants = {{"sigma_p_plus", {known->second.para, sigma_sd, from}},
                     {"sigma_m_plus", {known->second.meta, sigma_sd, from}},
                     {"charton_nu", {known->second.nu, sigma_sd, from}}};
    return out;
}

inline Measurement small_record(const std::string& id, const std::string& reaction,
                                const std::string& substrate, const std::vector<ProductShare>& products,
                                bool complete, const std::string& use = "yes") {
    Measurement out;
    out.id = id;
    out.reaction = reaction;
    out.substrate = substrate;
    out.products = products;
    out.complete = complete;
    out.use = use;
    out.from.source = "paper of " + id;
    out.from.status = "invented";
    return out;
}

inline constexpr const char* ortho_nitrotoluene = "Cc1ccccc1[N+](=O)[O-]";

inline Tables small_tables() {
    Tables out;
    out.substituents = {small_group("Me", "*C", "alkyl"), small_group("NO2", "*[N+](=O)[O-]", "acceptor"),
                        small_group("Et", "*CC", "alkyl"), small_group("Cl", "*Cl", "halogen")};
    out.substituents[2].like = "Me";
    out.substituents[3].constants = out.substituents[0].constants;
    Reaction one;
    one.id = "one";
    one.family = "nitration";
    one.new_group = "*[N+](=O)[O-]";
    Reaction two = one;
    two.id = "two";
    two.figures["selectivity"].value = 0.8;
    out.reactions = {one, two};
    const std::map<std::string, std::pair<double, double>> figures{
        {"rho", {rho_mean, 0.8}},
        {"ortho_offset", {0.5, 0.4}},
        {"ortho_steric", {-1.2, 0.4}},
        {"ortho_sigma", {1.0, 0.8}},
        {"acceptor_para", {-0.5, 0.5}},
        {"rho_of_conditions_sd", {0.3, 0}},
        {"ortho_offset_of_conditions_sd", {0.15, 0}},
        {"ortho_steric_of_conditions_sd", {0.1, 0}},
        {"kind_residual_sd", {0.15, 0}},
        {"common_residual_sd", {0.4, 0}},
        {"residual_sd", {0.2, 0}},
        {"residual_sd:ortho", {0.3, 0}},
        {"condition_common_sd", {0.25, 0}},
        {"condition_sd", {0.12, 0}},
        {"acid_slope_sd", {0.1, 0}},
        {"acid_kind_sd", {0.1, 0}},
        {"enthalpic", {1, 0}},
        {"temperature_reference_C", {25, 0}},
        {"acid_reference_percent", {80, 0}},
        {"correction:flanked", {-0.3, 0.15}},
        {"discrepancy_sd", {0.2, 0}},
        {"discrepancy_of_conditions_sd", {0.08, 0}},
        {"sigma_stand_in_sd", {0.1, 0}},
        {"like_sd", {0.05, 0}},
        {"laboratory_sd_points", {1.2, 0}},
        {"laboratory_sd_log10", {0.03, 0}},
        {"laboratory_sd_minor_log10", {0.3, 0}},
        {"weak_widening", {2, 0}},
        {"bound_softness", {0.3, 0}},
        {"named_percent", {95, 0}},
        {"own_fraction", {0.35, 0}},
        {"unlisted_percent", {1, 0}},
        {"stray_percent", {3, 0}},
        {"ortho_para_rule_sd", {0.3, 0}}};
    for (const auto& [quantity, figure] : figures)
        out.model.push_back({"all", quantity, {figure.first, figure.second, {}}});
    out.measurements = {
        small_record(
            "toluene", "one", "Cc1ccccc1",
            {{ortho_nitrotoluene, 57, {}}, {"Cc1cccc(N(=O)=O)c1", 3, 1.5}, {"Cc1ccc(N(=O)=O)cc1", 40, {}}},
            true),
        small_record("nitrobenzene", "two", "O=[N+]([O-])c1ccccc1",
                     {{"O=N(=O)c1ccccc1N(=O)=O", 6, {}}, {"O=N(=O)c1cccc(N(=O)=O)c1", 93, {}}}, false,
                     "weak"),
        small_record("nitrotoluene", "one", ortho_nitrotoluene,
                     {{"Cc1ccc(N(=O)=O)cc1N(=O)=O", 65, {}}, {"Cc1c(N(=O)=O)cccc1N(=O)=O", 34, {}}}, false),
        small_record("xylene", "one", "Cc1cccc(C)c1",
                     {{"Cc1cccc(C)c1N(=O)=O", 14, {}}, {"Cc1ccc(N(=O)=O)c(C)c1", 86, {}}}, false)};
    RateFigure factor;
    factor.id = "factor";
    factor.reaction = "two";
    factor.substrate = "Cc1ccccc1";
    factor.relation = "para";
    factor.value = 50;
    factor.sd_log10 = 0.05;
    factor.use = "yes";
    factor.from.source = "paper of factor";
    out.rates = {factor};
    return out;
}

}  // namespace isotally
