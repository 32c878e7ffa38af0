#include "isotally/reactivity.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <map>

namespace isotally {
namespace {

const Reaction& reaction_of(const Tables& tables, const Conditions& conditions) {
    return tables.reactions[static_cast<std::size_t>(conditions.reaction)];
}

std::optional<double> figure(const Reaction& reaction, const char* quantity) {
    const auto found = reaction.figures.find(quantity);
    if (found == reaction.figures.end())
        return std::nullopt;
    return found->second.value;
}

/// The nitrogen of nitro on anything but oxygen and nitrogen (those are named energetic groups). Nitroso
/// counts: nitric acid makes nitro of it; so does the aci form.
const std::string nitro = "[$([NX3](=O)(=O)~[!#8;!#7]),$([NX3+](=O)([O-])~[!#8;!#7]),$([NX2](=O)~[!#8;!#7]),"
                          "$([NX3+](=[#6])([O-])[O])]";
/// A sulfo group ortho or para to an oxygen or amino group is displaced by nitro, so it counts as one.
const std::string displaceable_sulfo =
    "[$(c:c-[$([OX2]),$([NX3;+0;!$([NX3](=O)=O)])]),"
    "$(c:c:c:c-[$([OX2]),$([NX3;+0;!$([NX3](=O)=O)])])]-S(=O)(=O)[OX2H,OX1-]";
constexpr int most_nitro = 2;

}  // namespace

Answer<Conditions> choose_conditions(const Tables& tables, int index, std::optional<double> temperature_C,
                                     std::optional<double> acid_percent) {
    const auto& reaction = tables.reactions[static_cast<std::size_t>(index)];
    if (acid_percent && !reaction.has_acid)
        throw Error(ErrorKind::usage, "option --acid-percent",
                    fmt::format("{} has no sulfuric acid whose strength could be given", reaction.id));
    Conditions chosen{index, temperature_C.value_or(figure(reaction, "temperature_default_C").value_or(25)),
                      0};
    if (reaction.has_acid)
        chosen.acid_percent = acid_percent.value_or(figure(reaction, "acid_default_percent").value_or(0));
    // a limit that the tables do not give holds nobody up
    const auto limit = [&](std::string_view quantity) {
        const double none = std::numeric_limits<double>::infinity();
        return figure(reaction, quantity.data())
            .value_or(quantity.find("_min") == quantity.npos ? none : -none);
    };
    const auto outside = [&](double value, const char* low, const char* high) {
        return !(value >= limit(low) && value <= limit(high));
    };
    const bool enthalpic = model_figure(tables, reaction.family, "enthalpic").value != 0;
    const char* low = enthalpic ? "temperature_min_C" : "temperature_series_min_C";
    const char* high = enthalpic ? "temperature_max_C" : "temperature_series_max_C";
    if (!figure(reaction, low))
        low = "temperature_min_C", high = "temperature_max_C";
    if (outside(chosen.temperature_C, low, high))
        return Refusal{
            reaction.id,
            fmt::format("{:g} C lies outside what is known of {} ({:g} to {:g} C); ask inside that "
                        "range, or measure",
                        chosen.temperature_C, reaction.name, limit(low), limit(high))};
    if (reaction.has_acid && outside(chosen.acid_percent, "acid_min_percent", "acid_max_percent")) {
        std::string other;
        for (const auto& candidate : tables.reactions)
            if (candidate.family == reaction.family && candidate.has_acid && candidate.id != reaction.id &&
                chosen.acid_percent >= figure(candidate, "acid_min_percent").value_or(1e9) &&
                chosen.acid_percent <= figure(candidate, "acid_max_percent").value_or(-1e9))
                other = "; that is " + candidate.id;
        return Refusal{reaction.id, fmt::format("{:g} % sulfuric acid lies outside {} ({:g} to {:g} %){}",
                                                chosen.acid_percent, reaction.name, limit("acid_min_percent"),
                                                limit("acid_max_percent"), other)};
    }
    return chosen;
}

namespace {

bool is_energetic(const Ban& ban) {
    return ban.id.starts_with("energetic-");
}

std::vector<const Ban*> energetic_bans(const Tables& tables) {
    std::vector<const Ban*> found;
    for (const auto& ban : tables.bans)
        if (is_energetic(ban))
            found.push_back(&ban);
    return found;
}

std::optional<Refusal> decline(const std::vector<const Ban*>& energetic, Workspace& workspace,
                               const Molecule& molecule) {
    const auto count = [&] { return count_matches(workspace, molecule, nitro, "nitro"); };
    if (most_atoms_for(workspace, molecule, nitro, "nitro") > most_nitro)
        if (const int groups = count(); groups > most_nitro)
            return Refusal{"molecule",
                           fmt::format("{} nitro groups in one molecule: isotally declines more than two, "
                                       "whatever the purpose",
                                       groups)};
    for (const auto* ban : energetic)
        if (occurs(workspace, molecule, ban->smarts, ban->id) && count() > 0)
            return Refusal{"molecule",
                           fmt::format("nitro together with another energetic group ({}): isotally declines",
                                       ban->reason)};
    return std::nullopt;
}

}  // namespace

Rules rules_for(const Tables& tables, int index) {
    Rules rules;
    const auto& reaction = tables.reactions[static_cast<std::size_t>(index)];
    rules.reaction = &reaction;
    rules.energetic = energetic_bans(tables);
    for (const auto& ban : tables.bans)
        if (!is_energetic(ban) && applies_to(ban.reactions, reaction))
            rules.bans.push_back(&ban);
    for (const auto& caution : tables.cautions)
        if (applies_to(caution.reactions, reaction))
            (caution.severity == 0 ? rules.notes : rules.cautions).push_back(&caution);
    return rules;
}

std::optional<Refusal> decline_molecule(const Tables& tables, std::string_view smiles) {
    return decline(energetic_bans(tables), *new_workspace(), *read_molecule(smiles));
}

namespace {

bool brings_nitro(Workspace& workspace, const Reaction& reaction) {
    return occurs(workspace, *read_molecule(reaction.new_group, workspace), nitro, "nitro");
}

}  // namespace

std::optional<Refusal> refuse_by_name(const Rules& rules, Workspace& workspace, const Arene& arene,
                                      const std::vector<Site>& sites) {
    const auto& reaction = *rules.reaction;
    if (auto declined = decline(rules.energetic, workspace, *arene.molecule))
        return declined;
    if (brings_nitro(workspace, reaction)) {
        const int nitro_groups = count_matches(workspace, *arene.molecule, nitro, "nitro");
        const int sulfo_groups = count_matches(workspace, *arene.molecule, displaceable_sulfo, "sulfo");
        if (nitro_groups + sulfo_groups + 1 > most_nitro)
            return Refusal{
                reaction.id,
                fmt::format(
                    "{} would bring a third nitro group{}: isotally declines more than two", reaction.name,
                    sulfo_groups > 0
                        ? " (a sulfo group on a phenol, ether or aniline is displaced and counts as one)"
                        : "")};
    }
    for (const auto* ban : rules.bans) {
        if (!occurs(workspace, *arene.molecule, ban->smarts, ban->id))
            continue;
        if (!ban->unless.empty() && occurs(workspace, *arene.molecule, ban->unless, ban->id))
            continue;
        return Refusal{reaction.id, fmt::format("{} does not go here: {}; people {}", reaction.name,
                                                ban->reason, ban->instead)};
    }
    for (const auto& site : sites)
        if (auto declined = decline(rules.energetic, workspace, *site.molecule))
            return declined;
    return std::nullopt;
}

namespace {

/// "its best position is about 10^5 times slower than one of benzene, the limit of this reaction is about
/// 10^3 times slower".
std::string too_slow(double log10_best, double log10_floor) {
    const auto times = [](double log10_factor) {
        const double apart = std::abs(log10_factor);
        if (apart < 0.5)
            return std::string("about as fast");
        const char* way = log10_factor < 0 ? "slower" : "faster";
        return apart < 3 ? fmt::format("about {:.0f} times {}", std::pow(10.0, apart), way)
                         : fmt::format("about 10^{:.1f} times {}", apart, way);
    };
    return fmt::format("its best position is {} {} one of benzene, the limit of this reaction is {}",
                       times(log10_best), std::abs(log10_best) < 0.5 ? "as" : "than", times(log10_floor));
}

}  // namespace

std::optional<Refusal> refuse_below_floor(const Tables& tables, const Conditions& conditions,
                                          const std::vector<double>& log10_factors) {
    const auto& reaction = reaction_of(tables, conditions);
    const auto floor = figure(reaction, "floor");
    if (!floor)
        return std::nullopt;
    const double best = *std::max_element(log10_factors.begin(), log10_factors.end());
    if (best >= std::log10(*floor))
        return std::nullopt;
    return Refusal{reaction.id, fmt::format("{} does not go on this ring: {}; people {}", reaction.name,
                                            too_slow(best, std::log10(*floor)), reaction.instead)};
}

std::vector<ProductCaution> cautions_for(const Rules& rules, Workspace& workspace, const Arene& arene,
                                         const std::vector<Site>& sites) {
    std::vector<std::pair<int, ProductCaution>> found;
    for (const auto* row : rules.cautions) {
        const auto& caution = *row;
        const std::string& where = caution.code;
        if (!caution.substrate_smarts.empty() &&
            !occurs(workspace, *arene.molecule, caution.substrate_smarts, where))
            continue;
        std::vector<std::string> products;
        if (!caution.product_smarts.empty()) {
            for (const auto& site : sites)
                if (occurs(workspace, *site.molecule, caution.product_smarts, where))
                    products.push_back(site.product);
            if (products.empty())
                continue;
            if (products.size() == sites.size())
                products.clear();
        }
        found.emplace_back(caution.severity, ProductCaution{caution.code, caution.text, std::move(products)});
    }
    std::stable_sort(found.begin(), found.end(),
                     [](const auto& a, const auto& b) { return a.first > b.first; });
    std::vector<ProductCaution> cautions;
    for (auto& entry : found)
        cautions.push_back(std::move(entry.second));
    return cautions;
}

std::vector<std::string> reaction_notes(const Knowledge& knowledge, const Rules& rules, Workspace& workspace,
                                        const Arene& arene, const Conditions& conditions,
                                        double relative_rate) {
    const auto& tables = knowledge.tables;
    const auto& reaction = reaction_of(tables, conditions);
    std::vector<std::string> notes = arene.notes;
    for (const auto& ring : arene.rings)
        for (const int group : ring.groups) {
            const auto* state = group < 0 ? nullptr : state_of(knowledge, conditions, group);
            if (!state || state->state == group)
                continue;
            const auto note = fmt::format(
                "{} reacts as {} in this medium{}", tables.substituents[static_cast<std::size_t>(group)].name,
                tables.substituents[static_cast<std::size_t>(state->state)].name,
                state->both_forms ? "; a trace of the free form reacts too and shifts the shares" : "");
            if (std::find(notes.begin(), notes.end(), note) == notes.end())
                notes.push_back(note);
        }
    if (!reaction.note.empty())
        notes.push_back(reaction.note);
    for (const auto* note : rules.notes)
        if (note->substrate_smarts.empty() ||
            occurs(workspace, *arene.molecule, note->substrate_smarts, note->code))
            notes.push_back(note->text);
    if (const auto limit = figure(reaction, "encounter_limit"); limit && relative_rate > *limit)
        notes.push_back(fmt::format("the relative rate is that of the ring itself; in this medium encounter "
                                    "holds every ring to about "
                                    "{:g} times benzene and leaves the shares as they are",
                                    *limit));
    const double fraction = model_figure(tables, reaction.family, "reach_fraction").value;
    if (const auto reach = figure(reaction, "reach"); reach && relative_rate < fraction * *reach)
        notes.push_back("far slower than what these conditions usually convert: expect to run stronger, "
                        "hotter or longer");
    return notes;
}

}  // namespace isotally
