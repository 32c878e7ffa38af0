#include "terms.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <cstdlib>
#include <string_view>

namespace isotally::factors {
namespace {

constexpr double kelvin = 273.15;
constexpr int most_likenesses = 4;

const Figure* find_figure(const Tables& tables, std::string_view family, const std::string& quantity) {
    const Figure* general = nullptr;
    for (const auto& row : tables.model) {
        if (row.quantity != quantity)
            continue;
        if (row.family == family)
            return &row.figure;
        if (row.family == "all")
            general = &row.figure;
    }
    return general;
}

/// "residual_sd:donor:ortho", else "residual_sd:donor", else "residual_sd:ortho", else "residual_sd".
double sd_for(const Tables& tables, std::string_view family, const std::string& quantity, const char* kind,
              const char* relation) {
    std::vector<std::string> tries;
    if (kind && relation)
        tries.push_back(fmt::format("{}:{}:{}", quantity, kind, relation));
    if (kind)
        tries.push_back(fmt::format("{}:{}", quantity, kind));
    if (relation)
        tries.push_back(fmt::format("{}:{}", quantity, relation));
    tries.push_back(quantity);
    for (const auto& name : tries)
        if (const auto* figure = find_figure(tables, family, name))
            return figure->value;
    throw Error(ErrorKind::tables, "model.csv", fmt::format("no row for {} ({} or all)", quantity, family));
}

Prior prior_row(const Tables& tables, std::string_view family, const std::string& quantity) {
    const auto& figure = model_figure(tables, family, quantity);
    return {figure.value, figure.sd};
}

double square(double x) {
    return x * x;
}

/// Missing constants come from the group it is like, widened at each step.
GroupConstants look_up_constants(const Tables& tables, double stand_in_sd, double like_sd, int index) {
    const auto* group = &tables.substituents[static_cast<std::size_t>(index)];
    GroupConstants c;
    c.head = index;
    for (int step = 0; step < most_likenesses; ++step) {
        const int next = find_substituent(tables, tables.substituents[static_cast<std::size_t>(c.head)].like);
        if (next < 0)
            break;
        c.head = next;
    }
    const auto kind = std::find(kinds.begin(), kinds.end(), group->kind);
    c.kind = static_cast<int>(kind - kinds.begin());
    c.draws_off = group->kind == "acceptor" || group->kind == "cation";
    const auto look = [&](std::initializer_list<const char*> quantities, double& value, double& sd,
                          std::string* source) {
        const auto* at = group;
        double widening = 0;
        for (int step = 0; at && step < most_likenesses; ++step) {
            bool first = true;
            for (const char* quantity : quantities) {
                const auto found = at->constants.find(quantity);
                if (found != at->constants.end()) {
                    value = found->second.value;
                    sd = std::sqrt(square(found->second.sd) + square(widening) +
                                   (first ? 0 : square(stand_in_sd)));
                    if (source)
                        *source = found->second.from.source;
                    c.assumed |= step > 0 || !first;
                    return;
                }
                first = false;
            }
            const int next = at->like.empty() ? -1 : find_substituent(tables, at->like);
            at = next < 0 ? nullptr : &tables.substituents[static_cast<std::size_t>(next)];
            widening += like_sd;
        }
        c.missing =
            fmt::format("{} has no {} and no group to stand in for it", group->id, *quantities.begin());
    };
    look({"sigma_p_plus", "sigma_p"}, c.sigma_para, c.sd_para, &c.source_para);
    look({"sigma_m_plus", "sigma_m"}, c.sigma_meta, c.sd_meta, &c.source_meta);
    look({"charton_nu"}, c.nu, c.sd_nu, nullptr);
    return c;
}

}  // namespace

Settings read_settings(const Knowledge& knowledge, std::string_view family) {
    const auto& tables = knowledge.tables;
    Settings s;
    s.knowledge = &knowledge;
    s.family = family;
    s.rho = prior_row(tables, family, "rho");
    s.ortho_offset = prior_row(tables, family, "ortho_offset");
    s.ortho_steric = prior_row(tables, family, "ortho_steric");
    s.ortho_sigma = prior_row(tables, family, "ortho_sigma");
    s.acceptor_para = prior_row(tables, family, "acceptor_para");
    const auto plain = [&](const char* quantity) {
        return sd_for(tables, family, quantity, nullptr, nullptr);
    };
    s.rho_of_conditions_sd = plain("rho_of_conditions_sd");
    s.ortho_offset_of_conditions_sd = plain("ortho_offset_of_conditions_sd");
    s.ortho_steric_of_conditions_sd = plain("ortho_steric_of_conditions_sd");
    for (std::size_t k = 0; k < kinds.size(); ++k) {
        for (std::size_t r = 0; r < 3; ++r) {
            const char* relation = relation_names[r];
            s.residual_sd[k][r] = sd_for(tables, family, "residual_sd", kinds[k], relation);
            s.kind_residual_sd[k][r] = sd_for(tables, family, "kind_residual_sd", kinds[k], relation);
            s.acid_slope_sd[k][r] = sd_for(tables, family, "acid_slope_sd", kinds[k], relation);
            s.acid_kind_sd[k][r] = sd_for(tables, family, "acid_kind_sd", kinds[k], relation);
            s.condition_sd[k][r] = sd_for(tables, family, "condition_sd", kinds[k], relation);
        }
        s.common_residual_sd[k] = sd_for(tables, family, "common_residual_sd", kinds[k], nullptr);
        s.condition_common_sd[k] = sd_for(tables, family, "condition_common_sd", kinds[k], nullptr);
    }
    s.enthalpic = model_figure(tables, family, "enthalpic").value != 0;
    s.temperature_reference_C = plain("temperature_reference_C");
    s.acid_reference_percent = plain("acid_reference_percent");
    if (!s.enthalpic) {
        for (std::size_t r = 0; r < 3; ++r)
            s.temperature[r] =
                prior_row(tables, family, fmt::format("temperature_slope:{}", relation_names[r]));
        s.temperature_slope_sd = plain("temperature_slope_sd");
    }
    for (std::size_t i = 0; i < corrections.size(); ++i)
        if (const auto* figure = find_figure(tables, family, fmt::format("correction:{}", corrections[i])))
            s.correction[i] = {figure->value, figure->sd};
    s.discrepancy_sd = plain("discrepancy_sd");
    s.discrepancy_of_conditions_sd = plain("discrepancy_of_conditions_sd");
    for (const auto& reaction : tables.reactions) {
        const auto figure = reaction.figures.find("selectivity");
        s.selectivity.push_back(figure == reaction.figures.end() ? 1.0 : figure->second.value);
    }
    const double stand_in_sd = plain("sigma_stand_in_sd"), like_sd = plain("like_sd");
    s.own_fraction = plain("own_fraction");
    for (std::size_t i = 0; i < tables.substituents.size(); ++i)
        s.groups.push_back(look_up_constants(tables, stand_in_sd, like_sd, static_cast<int>(i)));
    return s;
}

const GroupConstants& group_constants(const Settings& settings, int substituent) {
    const auto& constants = settings.groups[static_cast<std::size_t>(substituent)];
    if (!constants.missing.empty())
        throw Error(ErrorKind::tables, "constants.csv", constants.missing);
    return constants;
}

Prior prior_of(const Settings& s, const Unknown& u) {
    const auto a = static_cast<std::size_t>(u.a), b = static_cast<std::size_t>(u.b);
    const auto kind = [&] { return static_cast<std::size_t>(group_constants(s, u.a).kind); };
    const auto own = [&] { return group_constants(s, u.a).head == u.a ? 1.0 : s.own_fraction; };
    switch (u.type) {
    case Type::rho:
        return s.rho;
    case Type::rho_of_conditions:
        return {0, s.rho_of_conditions_sd};
    case Type::ortho_offset:
        return s.ortho_offset;
    case Type::ortho_steric:
        return s.ortho_steric;
    case Type::ortho_sigma:
        return s.ortho_sigma;
    case Type::ortho_offset_of_conditions:
        return {0, s.ortho_offset_of_conditions_sd};
    case Type::ortho_steric_of_conditions:
        return {0, s.ortho_steric_of_conditions_sd};
    case Type::acceptor_para:
        return s.acceptor_para;
    case Type::kind_residual:
        return {0, s.kind_residual_sd[a][b]};
    case Type::common_residual:
        return {0, own() * s.common_residual_sd[kind()]};
    case Type::residual: {
        const auto& c = group_constants(s, u.a);
        const double sigma_sd = u.b == meta ? c.sd_meta : c.sd_para;
        double sd =
            std::hypot(own() * s.residual_sd[static_cast<std::size_t>(c.kind)][b], s.rho.mean * sigma_sd);
        if (u.b == ortho)
            sd = std::hypot(sd, s.ortho_steric.mean * c.sd_nu);
        return {0, sd};
    }
    case Type::condition_common:
        return {0, own() * s.condition_common_sd[kind()]};
    case Type::condition:
        return {0, own() * s.condition_sd[kind()][b]};
    case Type::acid_kind:
        return {0, s.acid_kind_sd[a][b]};
    case Type::acid_slope:
        return {0, own() * s.acid_slope_sd[kind()][b]};
    case Type::temperature:
        return s.temperature[b];
    case Type::temperature_slope:
        return {0, own() * s.temperature_slope_sd};
    case Type::correction:
        return s.correction[a];
    case Type::discrepancy:
        return {0, s.discrepancy_sd};
    case Type::discrepancy_of_conditions:
        return {0, s.discrepancy_of_conditions_sd};
    }
    return {};
}

void add_contribution(const Settings& s, const Conditions& conditions, int group, Relation relation,
                      double weight, Form& form) {
    const auto& c = group_constants(s, group);
    const int reaction = conditions.reaction;
    const double selectivity = s.selectivity[static_cast<std::size_t>(reaction)];
    const double heat =
        s.enthalpic ? (s.temperature_reference_C + kelvin) / (conditions.temperature_C + kelvin) : 1.0;
    const double w = weight * heat;         // of what the conditions themselves bring
    const double scaled = w * selectivity;  // of what the family shares
    const double sigma = relation == meta ? c.sigma_meta : c.sigma_para;
    form.push_back({{Type::rho, 0, 0, 0}, scaled * sigma});
    form.push_back({{Type::rho_of_conditions, reaction, 0, 0}, w * sigma});
    if (relation == para && c.draws_off)
        form.push_back({{Type::acceptor_para, 0, 0, 0}, scaled});
    if (relation == ortho) {
        form.push_back({{Type::ortho_offset, 0, 0, 0}, w});
        form.push_back({{Type::ortho_steric, 0, 0, 0}, w * c.nu});
        form.push_back({{Type::ortho_sigma, 0, 0, 0}, w * c.sigma_para});
        form.push_back({{Type::ortho_offset_of_conditions, reaction, 0, 0}, w});
        form.push_back({{Type::ortho_steric_of_conditions, reaction, 0, 0}, w * c.nu});
    }
    form.push_back({{Type::kind_residual, c.kind, relation, 0}, scaled});
    const auto k = static_cast<std::size_t>(c.kind);
    const bool has_acid = s.knowledge->tables.reactions[static_cast<std::size_t>(reaction)].has_acid &&
                          s.acid_slope_sd[k][relation] + s.acid_kind_sd[k][relation] > 0;
    const double stronger = has_acid ? (conditions.acid_percent - s.acid_reference_percent) / 10 : 0;
    const double hotter = s.enthalpic ? 0 : (conditions.temperature_C - s.temperature_reference_C) / 10;
    if (has_acid)
        form.push_back({{Type::acid_kind, c.kind, relation, 0}, w * stronger});
    if (!s.enthalpic)
        form.push_back({{Type::temperature, 0, relation, 0}, weight * hotter});
    const auto add_group = [&](int member) {
        form.push_back({{Type::common_residual, member, 0, 0}, scaled});
        form.push_back({{Type::residual, member, relation, 0}, scaled});
        form.push_back({{Type::condition_common, member, 0, reaction}, w});
        form.push_back({{Type::condition, member, relation, reaction}, w});
        if (has_acid)
            form.push_back({{Type::acid_slope, member, relation, 0}, w * stronger});
        if (!s.enthalpic)
            form.push_back({{Type::temperature_slope, member, relation, 0}, weight * hotter});
    };
    add_group(c.head);
    if (c.head != group)
        add_group(group);
}

double correction_count(const Settings& s, std::size_t which, const RingGroups& groups, int position) {
    const auto at = [&](int p) { return groups[static_cast<std::size_t>((p + 6) % 6)]; };
    const auto kind = [&](int p) { return at(p) < 0 ? -1 : group_constants(s, at(p)).kind; };
    if (corrections[which] == std::string_view("flanked"))
        return at(position - 1) >= 0 && at(position + 1) >= 0 ? 1 : 0;
    const auto polar = [&](int p) {
        return kind(p) >= 0 && kinds[static_cast<std::size_t>(kind(p))] != std::string_view("alkyl");
    };
    const auto pressed = [&](int near, int far) { return polar(near) && kind(near) == kind(far) ? 1 : 0; };
    return pressed(position - 1, position - 2) + pressed(position + 1, position + 2);
}

Form site_form(const Settings& s, const Conditions& conditions, const PlacedSite& site, int compound) {
    Form form;
    const auto groups = in_state(*s.knowledge, conditions, site.groups);
    int substituents = 0;
    for (int p = 0; p < 6; ++p) {
        const int group = groups[static_cast<std::size_t>(p)];
        if (group < 0 || p == site.position)
            continue;
        ++substituents;
        add_contribution(s, conditions, group, relation_between(p, site.position), 1, form);
    }
    for (std::size_t which = 0; which < corrections.size(); ++which) {
        if (s.correction[which].sd <= 0)
            continue;
        const double count = correction_count(s, which, groups, site.position);
        if (count != 0)
            form.push_back({{Type::correction, static_cast<int>(which), 0, 0}, count});
    }
    if (substituents > 1) {
        form.push_back({{Type::discrepancy, compound, site.tag, 0}, 1});
        form.push_back({{Type::discrepancy_of_conditions, compound, site.tag, conditions.reaction}, 1});
    }
    compact(form);
    return form;
}

void compact(Form& form) {
    std::sort(form.begin(), form.end(), [](const Term& x, const Term& y) { return x.unknown < y.unknown; });
    Form summed;
    for (const auto& term : form) {
        if (!summed.empty() && summed.back().unknown == term.unknown)
            summed.back().weight += term.weight;
        else
            summed.push_back(term);
    }
    form = std::move(summed);
}

}  // namespace isotally::factors
