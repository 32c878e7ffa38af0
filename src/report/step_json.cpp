#include <algorithm>
#include <cstdint>
#include <nlohmann/json.hpp>
#include <string_view>

#include "isotally/report.hpp"
#include "numbers.hpp"

namespace isotally {
namespace {

using Json = nlohmann::ordered_json;

/// Writes one JSON line into a text: a list is long, and a tree of values for each answer costs more than the
/// chemistry.
class Line {
public:
    explicit Line(std::string& out) : out_(out) {}

    Line& raw(std::string_view json) {
        out_ += json;
        return *this;
    }
    Line& text(std::string_view value) {
        const bool plain = std::all_of(value.begin(), value.end(),
                                       [](char c) { return c >= ' ' && c <= '~' && c != '"' && c != '\\'; });
        if (plain)
            (out_ += '"').append(value) += '"';
        else
            out_ += Json(std::string(value)).dump(-1, ' ', false, Json::error_handler_t::replace);
        return *this;
    }
    Line& text(const std::optional<std::string>& value) {
        return value ? text(std::string_view(*value)) : raw("null");
    }
    Line& number(double value) { return raw(report::number(value)); }
    Line& whole(std::uint64_t value) { return raw(std::to_string(value)); }
    Line& range(const Range& range) {
        raw(R"({"value":)").number(range.value).raw(R"(,"low":)").number(range.low);
        return raw(R"(,"high":)").number(range.high);  // the caller closes it
    }
    template <class Items, class Write>
    Line& list(const Items& items, Write write) {
        raw("[");
        bool first = true;
        for (const auto& item : items) {
            raw(first ? "" : ",");
            first = false;
            write(item);
        }
        return raw("]");
    }
    Line& texts(const std::vector<std::string>& items) {
        return list(items, [&](const std::string& item) { text(std::string_view(item)); });
    }

private:
    std::string& out_;
};

void write_site(Line& out, const Tables& tables, const IsomerShare& share) {
    out.raw(R"({"ring":)").whole(static_cast<std::uint64_t>(share.site.ring + 1)).raw(R"(,"locants":)");
    out.list(share.locants, [&](int locant) { out.whole(static_cast<std::uint64_t>(locant)); });
    out.raw(R"(,"multiplicity":)").whole(static_cast<std::uint64_t>(share.site.multiplicity));
    out.raw(R"(,"product":{"smiles":)").text(std::string_view(share.site.product));
    out.raw(R"(,"name":)").text(share.product_name);
    out.raw(R"(,"systematic_name":)").text(share.product_systematic_name);
    out.raw(R"(},"percent":)").number(share.percent.value);
    out.raw(R"(,"percent_low":)").number(share.percent.low);
    out.raw(R"(,"percent_high":)").number(share.percent.high);
    out.raw(R"(,"log10_factor":)").number(share.log10_factor);
    out.raw(R"(,"log10_factor_sd":)").number(share.log10_factor_sd);
    out.raw(R"(,"evidence":)").text(std::string_view(report::weakest_evidence(share)));
    out.raw(R"(,"contributions":)").list(share.contributions, [&](const Contribution& one) {
        const auto& group = tables.substituents[static_cast<std::size_t>(one.substituent)];
        out.raw(R"({"substituent":)").text(std::string_view(group.name));
        out.raw(R"(,"relation":)").text(std::string_view(relation_names[one.relation]));
        out.raw(R"(,"log10_factor":)").number(one.log10_factor).raw(R"(,"sd":)").number(one.sd);
        out.raw(R"(,"evidence":)").text(std::string_view(one.evidence));
        out.raw(R"(,"sources":)").texts(one.sources).raw("}");
    });
    out.raw(R"(,"corrections":)").list(share.corrections, [&](const Correction& one) {
        out.raw(R"({"name":)").text(std::string_view(one.name));
        out.raw(R"(,"log10_factor":)").number(one.log10_factor).raw(R"(,"sd":)").number(one.sd).raw("}");
    });
    out.raw("}");
}

}  // namespace

void append_step_json(const Tables& tables, const StepAnswer& answer, const Draws& draws,
                      const std::string& label, std::string& text) {
    const auto& reaction = tables.reactions[static_cast<std::size_t>(answer.conditions.reaction)];
    Line out(text);
    out.raw(R"({"format":"isotally.step.1","tables":{"version":)").text(std::string_view(tables.version));
    out.raw(R"(,"digest":)").text(std::string_view(tables.digest));
    out.raw(R"(},"substrate":{"smiles":)").text(std::string_view(answer.smiles));
    out.raw(R"(,"name":)").text(answer.name).raw(R"(,"systematic_name":)").text(answer.systematic_name);
    out.raw(R"(},"reaction":{"id":)").text(std::string_view(reaction.id));
    out.raw(R"(,"name":)").text(std::string_view(reaction.name));
    out.raw(R"(,"conditions":)").text(std::string_view(reaction.conditions));
    out.raw(R"(,"temperature_C":)").number(answer.conditions.temperature_C).raw(R"(,"acid_percent":)");
    reaction.has_acid ? out.number(answer.conditions.acid_percent) : out.raw("null");
    out.raw(R"(},"level":)").number(draws.level);
    out.raw(R"(,"draws":)")
        .whole(static_cast<std::uint64_t>(draws.count))
        .raw(R"(,"seed":)")
        .whole(draws.seed);
    out.raw(R"(,"sites":)").list(answer.shares, [&](const IsomerShare& share) {
        write_site(out, tables, share);
    });
    out.raw(R"(,"ortho_para_ratio":)");
    answer.ortho_para_ratio ? out.range(*answer.ortho_para_ratio).raw("}") : out.raw("null");
    out.raw(R"(,"relative_rate":)").range(answer.relative_rate).raw(R"(,"reference":"benzene"})");
    out.raw(R"(,"measured_by":)").texts(answer.measured_by);
    out.raw(R"(,"measured_nearby":)").texts(answer.measured_nearby);
    out.raw(R"(,"cautions":)").list(answer.cautions, [&](const ProductCaution& caution) {
        out.raw(R"({"code":)").text(std::string_view(caution.code));
        out.raw(R"(,"text":)").text(std::string_view(caution.text));
        if (!caution.products.empty())
            out.raw(R"(,"products":)").texts(caution.products);
        out.raw("}");
    });
    out.raw(R"(,"notes":)").texts(answer.notes);
    if (!label.empty())
        out.raw(R"(,"label":)").text(std::string_view(label));
    out.raw("}");
}

std::string step_json(const Tables& tables, const StepAnswer& answer, const Draws& draws, int indent) {
    std::string line;
    append_step_json(tables, answer, draws, {}, line);
    return indent < 0 ? line : Json::parse(line).dump(indent);
}

std::string error_json(int exit_status, const std::string& kind, const std::string& where,
                       const std::string& message, const std::string& label) {
    Json document{{"format", "isotally.error.1"},
                  {"exit", exit_status},
                  {"kind", kind},
                  {"where", where},
                  {"message", message}};
    if (!label.empty())
        document["label"] = label;
    return document.dump(-1, ' ', false, Json::error_handler_t::replace);
}

}  // namespace isotally
