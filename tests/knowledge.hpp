// The repository's tables, read once, and one-line questions to them.
#pragma once

#include <map>
#include <memory>
#include <optional>
#include <stdexcept>
#include <string>
#include <tuple>
#include <variant>

#include "isotally/arene.hpp"
#include "isotally/factors.hpp"
#include "isotally/reactivity.hpp"
#include "isotally/shares.hpp"
#include "isotally/tables.hpp"

namespace isotally {

inline const Knowledge& knowledge() {
    static const Knowledge read = prepare(parse_tables(read_table_folder(ISOTALLY_SOURCE_DIR "/tables")));
    return read;
}

inline const Tables& tables() {
    return knowledge().tables;
}

inline const FamilyModel& model(const std::string& family) {
    static std::map<std::string, std::shared_ptr<const FamilyModel>> fitted;
    auto& found = fitted[family];
    if (!found)
        found = fit_family(knowledge(), family);
    return *found;
}

inline int group(const std::string& id) {
    const int found = find_substituent(tables(), id);
    if (found < 0)
        throw std::logic_error("no group " + id);
    return found;
}

inline int reaction(const std::string& id) {
    const int found = find_reaction(tables(), id);
    if (found < 0)
        throw std::logic_error("no reaction " + id);
    return found;
}

inline const Reaction& reaction_row(const std::string& id) {
    return tables().reactions[static_cast<std::size_t>(reaction(id))];
}

/// SMILES of a known name; any other text as it is.
inline std::string smiles_of(const std::string& molecule) {
    for (const auto& name : tables().names)
        if (name.name == molecule)
            return name.smiles;
    return molecule;
}

/// What is expected to be answered; a refusal is a std::logic_error with its reason.
template <class T>
T answered(Answer<T> answer, const std::string& question) {
    if (const auto* refused = refusal(answer))
        throw std::logic_error(question + " refused: " + refused->reason);
    return std::get<T>(std::move(answer));
}

inline Answer<Arene> read_arene(const std::string& molecule) {
    return parse_arene(tables(), knowledge().groups, smiles_of(molecule));
}

inline Arene arene(const std::string& molecule) {
    return answered(read_arene(molecule), molecule);
}

/// Conditions and draws of a question; what is not given is the default.
struct Asked {
    std::optional<double> temperature_C, acid_percent;
    Draws draws;
};

inline Answer<StepAnswer> ask(const std::string& molecule, const std::string& id, const Asked& asked = {}) {
    const auto read = read_arene(molecule);
    if (const auto* refused = refusal(read))
        return *refused;
    const auto chosen = choose_conditions(tables(), reaction(id), asked.temperature_C, asked.acid_percent);
    if (const auto* refused = refusal(chosen))
        return *refused;
    // one worker for each question: thousands of molecules are asked, also under the sanitizers
    const auto& at = std::get<Conditions>(chosen);
    static std::map<std::tuple<int, double, double, double, int, std::uint64_t>, StepWorker> workers;
    const std::tuple key(at.reaction, at.temperature_C, at.acid_percent, asked.draws.level, asked.draws.count,
                         asked.draws.seed);
    auto worker = workers.find(key);
    if (worker == workers.end())
        worker = workers
                     .emplace(key, step_worker(knowledge(),
                                               {std::shared_ptr<void>(), &model(reaction_row(id).family)}, at,
                                               asked.draws))
                     .first;
    return answer_step(worker->second, std::get<Arene>(read));
}

inline StepAnswer step(const std::string& molecule, const std::string& id, const Asked& asked = {}) {
    return answered(ask(molecule, id, asked), molecule + ", " + id);
}

/// Why it is refused; empty where it is answered.
inline std::string refused_because(const std::string& molecule, const std::string& id,
                                   const Asked& asked = {}) {
    const auto answer = ask(molecule, id, asked);
    const auto* refused = refusal(answer);
    return refused ? refused->reason : "";
}

/// Isomer share of the product with this SMILES (any form of it).
inline Range share_of(const StepAnswer& answer, const std::string& product) {
    const std::string wanted = canonical_smiles(smiles_of(product), "product");
    for (const auto& share : answer.shares)
        if (share.site.product == wanted)
            return share.percent;
    throw std::logic_error(wanted + " is no product of " + answer.smiles);
}

}  // namespace isotally
