#include <fmt/format.h>

#include <algorithm>

#include "isotally/report.hpp"
#include "numbers.hpp"

namespace isotally {
namespace {

constexpr std::size_t columns = 100;

bool several_rings(const StepAnswer& answer) {
    for (const auto& share : answer.shares)
        if (share.site.ring > 0)
            return true;
    return false;
}

std::string percent_text(double percent) {
    return percent < 0.05 ? fmt::format("{:.2f}", percent) : fmt::format("{:.1f}", percent);
}

/// Three significant digits, without exponents between a thousandth and a million.
std::string plain(double value) {
    if (value != 0 && (value < 1e-3 || value >= 1e6))
        return fmt::format("{:.1e}", value);
    if (value >= 100)
        return fmt::format("{:.0f}", value);
    return fmt::format("{:.3g}", value);
}

void add_paragraph(std::string& out, const std::string& head, const std::string& text) {
    bool first = true;
    for (const auto& line : report::wrapped(text, columns - head.size())) {
        out += (first ? head : std::string(head.size(), ' ')) + line + "\n";
        first = false;
    }
}

std::string product_text(const IsomerShare& share) {
    return share.product_name.value_or(share.product_systematic_name.value_or(share.site.product));
}

}  // namespace

std::string step_text(const Tables& tables, const StepAnswer& answer, const Draws& draws,
                      const std::string& assumed) {
    const auto& reaction = tables.reactions[static_cast<std::size_t>(answer.conditions.reaction)];
    std::string out = answer.name.value_or(answer.systematic_name.value_or(answer.smiles));
    out += fmt::format(", {}, {:g} C", reaction.name, answer.conditions.temperature_C);
    if (reaction.has_acid)
        out += fmt::format(", {:g} % sulfuric acid", answer.conditions.acid_percent);
    out += ": " + assumed + "\n\n";

    const bool rings = several_rings(answer);
    std::size_t place = 8, product = 7;
    for (const auto& share : answer.shares) {
        place = std::max(place, report::locants_text(share, rings).size());
        product = std::max(product, product_text(share).size());
    }
    product = std::min<std::size_t>(product, 44);
    out += fmt::format("  {:<{}}  {:<{}}  {:>7}  {:>15}  {:<20}  {}\n", "position", place, "product", product,
                       "share %", fmt::format("{:g} % interval", 100 * draws.level), "", "evidence");
    for (const auto& share : answer.shares) {
        const auto bar = static_cast<std::size_t>(share.percent.value / 5 + 0.5);
        out +=
            fmt::format("  {:<{}}  {:<{}}  {:>7}  {:>15}  {:<20}  {}\n", report::locants_text(share, rings),
                        place, product_text(share), product, percent_text(share.percent.value),
                        percent_text(share.percent.low) + " to " + percent_text(share.percent.high),
                        std::string(bar, '='), report::weakest_evidence(share));
    }
    out += "\n";
    if (answer.ortho_para_ratio)
        out += fmt::format("  ortho:para ratio  {} ({} to {})\n", plain(answer.ortho_para_ratio->value),
                           plain(answer.ortho_para_ratio->low), plain(answer.ortho_para_ratio->high));
    out += fmt::format("  relative rate     {} ({} to {}), benzene = 1\n", plain(answer.relative_rate.value),
                       plain(answer.relative_rate.low), plain(answer.relative_rate.high));
    if (!answer.measured_by.empty()) {
        std::string records;
        for (const auto& id : answer.measured_by)
            records += (records.empty() ? "" : ", ") + id;
        add_paragraph(out, "  measured          ", "this compound itself, records " + records);
    }
    out += "\n";
    if (answer.shares.size() == 1)
        add_paragraph(out, "  note: ", "only one isomer is possible");
    for (const auto& note : answer.notes)
        add_paragraph(out, "  note: ", note);
    for (const auto& caution : answer.cautions)
        add_paragraph(out, "  caution: ", caution.text);
    return out;
}

std::string step_csv(const StepAnswer& answer) {
    std::string out = "ring,locants,multiplicity,product,name,percent,percent_low,percent_high,log10_factor,"
                      "log10_factor_sd,evidence\n";
    for (const auto& share : answer.shares) {
        std::string locants;
        for (const int locant : share.locants)
            locants += (locants.empty() ? "" : " ") + std::to_string(locant);
        out += fmt::format("{},{},{},{},{},{},{},{},{},{},{}\n", share.site.ring + 1, locants,
                           share.site.multiplicity, report::csv_field(share.site.product),
                           report::csv_field(share.product_name.value_or("")),
                           report::number(share.percent.value), report::number(share.percent.low),
                           report::number(share.percent.high), report::number(share.log10_factor),
                           report::number(share.log10_factor_sd), report::weakest_evidence(share));
    }
    return out;
}

}  // namespace isotally
