#include <nlohmann/json.hpp>

#include "isotally/report.hpp"
#include "numbers.hpp"

namespace isotally {
namespace {

using Json = nlohmann::ordered_json;
using report::json_number;

Json or_null(const std::optional<std::string>& text) {
    return text ? Json(*text) : Json(nullptr);
}

Json site_json(const Tables& tables, const IsomerShare& share) {
    Json contributions = Json::array(), corrections = Json::array();
    for (const auto& one : share.contributions)
        contributions.push_back(
            {{"substituent", tables.substituents[static_cast<std::size_t>(one.substituent)].name},
             {"relation", relation_names[one.relation]},
             {"log10_factor", json_number(one.log10_factor)},
             {"sd", json_number(one.sd)},
             {"evidence", one.evidence},
             {"sources", one.sources}});
    for (const auto& one : share.corrections)
        corrections.push_back({{"name", one.name},
                               {"log10_factor", json_number(one.log10_factor)},
                               {"sd", json_number(one.sd)}});
    return {{"ring", share.site.ring + 1},
            {"locants", share.locants},
            {"multiplicity", share.site.multiplicity},
            {"product",
             {{"smiles", share.site.product},
              {"name", or_null(share.product_name)},
              {"systematic_name", or_null(share.product_systematic_name)}}},
            {"percent", json_number(share.percent.value)},
            {"percent_low", json_number(share.percent.low)},
            {"percent_high", json_number(share.percent.high)},
            {"log10_factor", json_number(share.log10_factor)},
            {"log10_factor_sd", json_number(share.log10_factor_sd)},
            {"evidence", report::weakest_evidence(share)},
            {"contributions", contributions},
            {"corrections", corrections}};
}

}  // namespace

std::string step_json(const Tables& tables, const StepAnswer& answer, const Draws& draws, int indent) {
    const auto& reaction = tables.reactions[static_cast<std::size_t>(answer.conditions.reaction)];
    Json sites = Json::array(), cautions = Json::array();
    for (const auto& share : answer.shares)
        sites.push_back(site_json(tables, share));
    for (const auto& caution : answer.cautions) {
        Json one{{"code", caution.code}, {"text", caution.text}};
        if (!caution.products.empty())
            one["products"] = caution.products;
        cautions.push_back(std::move(one));
    }
    Json ratio = nullptr;
    if (answer.ortho_para_ratio)
        ratio = {{"value", json_number(answer.ortho_para_ratio->value)},
                 {"low", json_number(answer.ortho_para_ratio->low)},
                 {"high", json_number(answer.ortho_para_ratio->high)}};
    const Json document{
        {"format", "isotally.step.1"},
        {"tables", {{"version", tables.version}, {"digest", tables.digest}}},
        {"substrate",
         {{"smiles", answer.smiles},
          {"name", or_null(answer.name)},
          {"systematic_name", or_null(answer.systematic_name)}}},
        {"reaction",
         {{"id", reaction.id},
          {"name", reaction.name},
          {"conditions", reaction.conditions},
          {"temperature_C", json_number(answer.conditions.temperature_C)},
          {"acid_percent",
           reaction.has_acid ? Json(json_number(answer.conditions.acid_percent)) : Json(nullptr)}}},
        {"level", json_number(draws.level)},
        {"draws", draws.count},
        {"seed", draws.seed},
        {"sites", sites},
        {"ortho_para_ratio", ratio},
        {"relative_rate",
         {{"value", json_number(answer.relative_rate.value)},
          {"low", json_number(answer.relative_rate.low)},
          {"high", json_number(answer.relative_rate.high)},
          {"reference", "benzene"}}},
        {"measured_by", answer.measured_by},
        {"measured_nearby", answer.measured_nearby},
        {"cautions", cautions},
        {"notes", answer.notes}};
    return report::plain_numbers(document.dump(indent));
}

std::string error_json(int exit_status, const std::string& kind, const std::string& where,
                       const std::string& message) {
    const Json document{{"format", "isotally.error.1"},
                        {"exit", exit_status},
                        {"kind", kind},
                        {"where", where},
                        {"message", message}};
    return document.dump(-1, ' ', false, Json::error_handler_t::replace);
}

}  // namespace isotally
