#include "step_command.hpp"

#include <fmt/format.h>

#include <ostream>

#include "isotally/report.hpp"
#include "molecule_argument.hpp"
#include "status.hpp"
#include "step_list.hpp"

namespace isotally::cli {
namespace {

/// "defaults", or which of the conditions were given.
std::string assumed_text(const StepRequest& request, const Reaction& reaction) {
    const bool acid_given = !reaction.has_acid || request.acid_percent.has_value();
    if (request.temperature_C && acid_given)
        return "as given";
    if (!request.temperature_C && !request.acid_percent)
        return "defaults";
    return request.temperature_C ? "acid strength by default" : "temperature by default";
}

Answer<StepAnswer> answer(const StepRequest& request, const Knowledge& knowledge, int reaction,
                          const Arene& arene) {
    const auto chosen =
        choose_conditions(knowledge.tables, reaction, request.temperature_C, request.acid_percent);
    if (const auto* refused = refusal(chosen))
        return *refused;
    const auto& family = knowledge.tables.reactions[static_cast<std::size_t>(reaction)].family;
    const auto model = fit_family(knowledge, family);
    return answer_step(knowledge, *model, arene, std::get<Conditions>(chosen), request.draws);
}

/// The reactions that go on this ring, one line each; wrong use all the same, as no reaction was named.
int list_reactions(const StepRequest& request, const Knowledge& knowledge, const Arene& arene,
                   std::ostream& out, std::ostream& err) {
    StepRequest quick = request;
    quick.draws.count = 1;
    quick.temperature_C.reset();
    quick.acid_percent.reset();
    std::string lines, ids;
    for (std::size_t i = 0; i < knowledge.tables.reactions.size(); ++i) {
        const auto& reaction = knowledge.tables.reactions[i];
        const auto step = answer(quick, knowledge, static_cast<int>(i), arene);
        if (const auto* found = std::get_if<StepAnswer>(&step)) {
            const auto& lead = found->shares.front();
            lines += fmt::format("  {:<34}{:3.0f} % {}\n", reaction.id, lead.percent.value,
                                 lead.product_name.value_or(lead.site.product));
            ids += (ids.empty() ? "" : ", ") + reaction.id;
        }
    }
    const std::string found = ids.empty() ? "none that is known goes on this ring" : "these go on this ring";
    const Error error(ErrorKind::usage, "option --reaction",
                      "no reaction given; " + found + (request.json && !ids.empty() ? ": " + ids : ""));
    const int status = fail(error, request.json, out, err);
    err << lines;
    return status;
}

}  // namespace

int step_command(const StepRequest& request, const Knowledge& knowledge, std::istream& in, std::ostream& out,
                 std::ostream& err) {
    const auto& tables = knowledge.tables;
    const int reaction = request.reaction.empty() ? -1 : read_reaction(tables, request.reaction);
    if (request.molecule == "-") {
        if (reaction < 0)
            throw Error(ErrorKind::usage, "option --reaction", "a list needs a reaction");
        if (request.csv)
            throw Error(ErrorKind::usage, "option --csv", "a list is answered in JSON lines");
        const auto conditions =
            choose_conditions(tables, reaction, request.temperature_C, request.acid_percent);
        if (const auto* refused = refusal(conditions))
            return refuse(*refused, true, out, err);
        return step_list(request, knowledge, std::get<Conditions>(conditions), in, out, err);
    }
    if (request.skip > 0)
        throw Error(ErrorKind::usage, "option --skip", "only a list (MOLECULE -) has lines to skip");
    const auto arene = read_molecule(knowledge, request.molecule);
    if (const auto* refused = refusal(arene))
        return refuse(*refused, request.json, out, err);
    if (const auto declined = decline_molecule(tables, std::get<Arene>(arene).smiles))
        return refuse(*declined, request.json, out, err);
    if (reaction < 0)
        return list_reactions(request, knowledge, std::get<Arene>(arene), out, err);
    const auto step = answer(request, knowledge, reaction, std::get<Arene>(arene));
    if (const auto* refused = refusal(step))
        return refuse(*refused, request.json, out, err);
    const auto& found = std::get<StepAnswer>(step);
    if (request.json)
        out << step_json(tables, found, request.draws, 2) << '\n';
    else if (request.csv)
        out << step_csv(found);
    else
        out << step_text(tables, found, request.draws,
                         assumed_text(request, tables.reactions[static_cast<std::size_t>(reaction)]));
    return 0;
}

}  // namespace isotally::cli
