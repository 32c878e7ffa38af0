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

/// The table of isomers; a long name goes on below its own row.
std::string isomer_table(const StepAnswer& answer, double level) {
    const bool rings = several_rings(answer);
    std::size_t place = 8, longest = 7;
    for (const auto& share : answer.shares) {
        place = std::max(place, report::locants_text(share, rings).size());
        longest = std::max(longest, product_text(share).size());
    }
    constexpr std::size_t rest = 64;  // shares, interval, bar, evidence and the blanks between
    const auto product = std::min(longest, columns - rest - place);
    const auto row = [&](const std::string& at, const std::string& name, const std::string& share,
                         const std::string& interval, const std::string& bar, const std::string& evidence) {
        return fmt::format("  {:<{}}  {:<{}}  {:>7}  {:>15}  {:<20}  {}\n", at, place, name, product, share,
                           interval, bar, evidence);
    };
    auto out =
        row("position", "product", "share %", fmt::format("{:g} % interval", 100 * level), "", "evidence");
    for (const auto& share : answer.shares) {
        const auto name = product_text(share);
        const auto bar = static_cast<std::size_t>(share.percent.value / 5 + 0.5);
        out += row(report::locants_text(share, rings), name.substr(0, product),
                   percent_text(share.percent.value),
                   percent_text(share.percent.low) + " to " + percent_text(share.percent.high),
                   std::string(bar, '='), report::weakest_evidence(share));
        for (std::size_t from = product; from < name.size(); from += product)
            out += std::string(place + 4, ' ') + name.substr(from, product) + "\n";
    }
    return out;
}

/// A ratio of two traces tells nothing.
bool tells_ratio(const StepAnswer& answer) {
    return std::any_of(answer.shares.begin(), answer.shares.end(), [](const IsomerShare& share) {
        const auto relation = share.contributions.empty() ? meta : share.contributions.front().relation;
        return relation != meta && share.percent.value >= 1;
    });
}

std::string some_of(const std::vector<std::string>& ids) {
    constexpr std::size_t shown = 8;
    std::string text;
    for (std::size_t i = 0; i < std::min(shown, ids.size()); ++i)
        text += (i ? ", " : "") + ids[i];
    return text + (ids.size() > shown ? fmt::format(" and {} more", ids.size() - shown) : "");
}

}  // namespace

std::string step_text(const Tables& tables, const StepAnswer& answer, const Draws& draws,
                      const std::string& assumed) {
    const auto& reaction = tables.reactions[static_cast<std::size_t>(answer.conditions.reaction)];
    std::string first = answer.name.value_or(answer.systematic_name.value_or(answer.smiles));
    if (answer.name && answer.systematic_name && answer.name != answer.systematic_name)
        first += fmt::format(" (numbered as {})", *answer.systematic_name);
    first += fmt::format(", {}, {:g} C", reaction.name, answer.conditions.temperature_C);
    if (reaction.has_acid)
        first += fmt::format(", {:g} % sulfuric acid", answer.conditions.acid_percent);
    std::string out;
    add_paragraph(out, "", first + ": " + assumed);
    out += "\n" + isomer_table(answer, draws.level);
    out += "\n";
    if (answer.ortho_para_ratio && tells_ratio(answer))
        out += fmt::format("  ortho:para ratio  {} ({} to {})\n", plain(answer.ortho_para_ratio->value),
                           plain(answer.ortho_para_ratio->low), plain(answer.ortho_para_ratio->high));
    out += fmt::format("  relative rate     {} ({} to {}), benzene = 1\n", plain(answer.relative_rate.value),
                       plain(answer.relative_rate.low), plain(answer.relative_rate.high));
    if (!answer.measured_by.empty())
        add_paragraph(out, "  measured          ",
                      "this compound in this reaction: " + some_of(answer.measured_by));
    if (!answer.measured_nearby.empty())
        add_paragraph(out, "  measured nearby   ",
                      "this compound, other conditions: " + some_of(answer.measured_nearby));
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
