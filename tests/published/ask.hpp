// Questions to the built-in knowledge, as the tests of published figures ask them.
#pragma once

#include <gtest/gtest.h>

#include <algorithm>
#include <array>
#include <cctype>
#include <limits>
#include <map>
#include <memory>
#include <optional>
#include <string>
#include <variant>

#include "isotally/arene.hpp"
#include "isotally/built_in.hpp"
#include "isotally/factors.hpp"
#include "isotally/names.hpp"
#include "isotally/shares.hpp"

namespace isotally {

inline const Knowledge& known() {
    static const Knowledge knowledge = built_in_knowledge();
    return knowledge;
}

inline const FamilyModel& model_of(const std::string& family) {
    static std::map<std::string, std::shared_ptr<const FamilyModel>> models;
    auto& model = models[family];
    if (!model)
        model = fit_family(known(), family);
    return *model;
}

/// Canonical SMILES of a known name, a name the program writes, or a SMILES.
inline std::string smiles_of(const std::string& text) {
    const auto lower = [](std::string word) {
        for (char& c : word)
            c = static_cast<char>(std::tolower(static_cast<unsigned char>(c)));
        return word;
    };
    for (const auto& name : known().tables.names)
        if (lower(name.name) == lower(text))
            return canonical_smiles(name.smiles, text);
    if (const auto groups = read_ring_name(known().tables, text))
        return canonical_smiles(ring_smiles(known().tables, *groups), text);
    return canonical_smiles(text, text);
}

/// One step; throws Error where the program would fail, and std::out_of_range for an unknown reaction.
inline Answer<StepAnswer> ask(const std::string& molecule, const std::string& reaction,
                              std::optional<double> temperature_C = {},
                              std::optional<double> acid_percent = {}) {
    const auto& tables = known().tables;
    const int index = find_reaction(tables, reaction);
    const auto& family = tables.reactions.at(static_cast<std::size_t>(index)).family;
    const auto arene = parse_arene(tables, known().groups, smiles_of(molecule));
    if (const auto* refused = refusal(arene))
        return *refused;
    const auto conditions = choose_conditions(tables, index, temperature_C, acid_percent);
    if (const auto* refused = refusal(conditions))
        return *refused;
    return answer_step(known(), model_of(family), std::get<Arene>(arene), std::get<Conditions>(conditions), {});
}

/// The answer, which must be one; an empty answer (and a failed test) otherwise.
inline StepAnswer answered(const std::string& molecule, const std::string& reaction,
                           std::optional<double> temperature_C = {}, std::optional<double> acid_percent = {}) {
    const auto answer = ask(molecule, reaction, temperature_C, acid_percent);
    if (const auto* found = std::get_if<StepAnswer>(&answer))
        return *found;
    ADD_FAILURE() << molecule << ", " << reaction << ": " << refusal(answer)->reason;
    return {};
}

/// Share of one product (name or SMILES), NaN (and a failed test) where it is no isomer of the step.
inline Range share_of(const StepAnswer& answer, const std::string& product) {
    const std::string wanted = smiles_of(product);
    for (const auto& share : answer.shares)
        if (share.site.product == wanted)
            return share.percent;
    ADD_FAILURE() << product << " is no product of " << answer.smiles;
    const double none = std::numeric_limits<double>::quiet_NaN();
    return {none, none, none};
}

/// Shares of a ring with one group, by relation: ortho, meta, para.
inline std::array<Range, 3> by_relation(const StepAnswer& answer) {
    std::array<Range, 3> out{};
    for (const auto& share : answer.shares) {
        const int locant = share.locants.front();
        out[static_cast<std::size_t>(std::min(locant, 8 - locant) - 2)] = share.percent;
    }
    return out;
}

}  // namespace isotally
