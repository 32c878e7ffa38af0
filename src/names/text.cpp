#include <algorithm>

#include "names/parts.hpp"

namespace isotally::name_parts {
namespace {

// clang-format off
constexpr Family family_table[] = {
    {.principal = "acid", .retained = "benzoic acid", .suffix = "carboxylic acid"},
    {.prefix = "2-carboxyethenyl", .aryl = true, .suffix = "prop-2-enoic acid", .lead = "3", .joint = "di"},
    {.prefix = "carboxymethoxy", .aryl = true, .single = true, .ring = "phenoxy", .suffix = "acetic acid"},
    {.prefix = "carboxymethyl", .aryl = true, .suffix = "acetic acid"},
    {.principal = "sulfonic-acid", .suffix = "sulfonic acid"},
    {.prefix = "borono", .aryl = true, .suffix = "boronic acid"},
    {.principal = "ester", .retained = "benzoate", .suffix = "carboxylate"},
    {.prefix = "2-methoxy-2-oxoethyl", .aryl = true, .suffix = "acetate", .ester = "methyl "},
    {.prefix = "2-ethoxy-2-oxoethyl", .aryl = true, .suffix = "acetate", .ester = "ethyl "},
    {.prefix = "benzoyloxy", .aryl = true, .suffix = " benzoate"},
    {.prefix = "acetyloxy", .aryl = true, .suffix = " acetate"},
    {.principal = "sulfonic-ester", .suffix = "sulfonate"},
    {.prefix = "methanesulfonyloxy", .aryl = true, .single = true, .suffix = " methanesulfonate"},
    {.principal = "acid-chloride", .retained = "benzoyl chloride", .suffix = "carbonyl", .halide = "chloride"},
    {.principal = "sulfonyl-chloride", .suffix = "sulfonyl", .halide = "chloride"},
    {.principal = "amide", .retained = "benzamide", .suffix = "carboxamide"},
    {.principal = "anilide:benzamide", .aryl = true, .suffix = "benzamide", .lead = "N"},
    {.principal = "anilide:acetamide", .aryl = true, .suffix = "acetamide", .lead = "N", .general = "acetanilide"},
    {.prefix = "N-methylacetamido", .aryl = true, .suffix = "acetamide", .lead = "N", .mate = "N-methyl", .joint = "bis"},
    {.principal = "sulfonamide", .suffix = "sulfonamide"},
    {.prefix = "methanesulfonamido", .aryl = true, .suffix = "methanesulfonamide", .lead = "N", .joint = "di"},
    {.prefix = "1,3-dioxo-1,3-dihydro-2H-isoindol-2-yl", .aryl = true, .single = true,
     .suffix = "-1H-isoindole-1,3(2H)-dione", .lead = "2"},
    {.principal = "nitrile", .retained = "benzonitrile", .suffix = "carbonitrile"},
    {.prefix = "cyanomethyl", .aryl = true, .suffix = "acetonitrile"},
    {.principal = "aldehyde", .retained = "benzaldehyde", .suffix = "carbaldehyde"},
    {.principal = "ketone:propan-1-one", .aryl = true, .suffix = "propan-1-one", .lead = "1", .joint = "di", .general = "propiophenone"},
    {.principal = "ketone:ethan-1-one", .aryl = true, .suffix = "ethan-1-one", .lead = "1", .joint = "di", .general = "acetophenone"},
    {.prefix = "benzoyl", .aryl = true, .suffix = "methanone", .mate = "phenyl", .joint = "bis", .general = "benzophenone"},
    {.principal = "phenol", .retained = "phenol", .suffix = "ol"},
    {.prefix = "hydroxymethyl", .aryl = true, .suffix = "methanol", .general = "benzyl alcohol"},
    {.principal = "thiol", .prefix = "sulfanyl", .suffix = "thiol"},
    {.principal = "amine", .retained = "aniline", .suffix = "amine"},
    {.prefix = "aminomethyl", .aryl = true, .suffix = "methanamine", .lead = "1", .general = "benzylamine"},
    {.prefix = "hydroxyamino", .aryl = true, .suffix = "hydroxylamine", .lead = "N", .joint = "bis"},
    {.prefix = "hydrazinyl", .aryl = true, .suffix = "hydrazine"},
    {.prefix = "trimethylsilyl", .aryl = true, .suffix = "silane", .mate = "trimethyl", .joint = "bis"},
};
// clang-format on

constexpr Stem alias_table[] = {{"methoxysulfonyl", "sulfonic-ester:methyl"},
                                {"methylcarbamoyl", "amide:N-methyl"},
                                {"dimethylcarbamoyl", "amide:N,N-dimethyl"},
                                {"anilino", "amine:N-phenyl"}};

constexpr Stem general_table[] = {{"phenyl", "biphenyl"},
                                  {"methoxy", "anisole"},
                                  {"trifluoromethyl", "benzotrifluoride"},
                                  {"methyl", "toluene"}};

constexpr Stem whole_table[] = {{"methyl", "toluene"},
                                {"methoxy", "anisole"},
                                {"benzyl", "1,1'-methylenedibenzene"},
                                {"2-phenylethyl", "1,1'-(ethane-1,2-diyl)dibenzene"},
                                {"2-phenylethenyl", "1,1'-(ethene-1,2-diyl)dibenzene"},
                                {"phenoxy", "1,1'-oxydibenzene"},
                                {"phenylsulfanyl", "1,1'-sulfanediyldibenzene"},
                                {"benzenesulfonyl", "1,1'-sulfonyldibenzene"},
                                {"phenyldiazenyl", "diphenyldiazene"},
                                {"benzoyl", "diphenylmethanone"}};

constexpr std::string_view multipliers[] = {"", "", "di", "tri", "tetra", "penta", "hexa"};
constexpr std::string_view compound_multipliers[] = {"",         "",         "bis",    "tris",
                                                     "tetrakis", "pentakis", "hexakis"};
constexpr std::string_view italics[] = {"tert-", "sec-"};

// First parts of compound prefixes; a prefix that is one of these as a whole is simple.
constexpr std::string_view first_parts[] = {
    "acetyl",  "amino",     "anilino", "azido",   "benzene", "benzoyl",   "bromo",    "butoxy",
    "butyl",   "carbamoyl", "carboxy", "chloro",  "cyano",   "ethane",    "ethoxy",   "ethyl",
    "fluoro",  "formyl",    "hydroxy", "iodo",    "methane", "methoxy",   "methyl",   "nitro",
    "nitroso", "phenoxy",   "phenyl",  "propoxy", "propyl",  "sulfamoyl", "sulfanyl", "sulfo"};

const Family& family_at(const Plan& plan) {
    return family_table[plan.family];
}

enum class Kind { simple, located, compound };

bool has(std::string_view text, std::string_view part) {
    return text.find(part) != std::string_view::npos;
}

bool opens_with_further_part(std::string_view word) {
    for (std::string_view part : first_parts)
        if (word == part)
            return false;
    for (std::string_view part : first_parts)
        if (word.starts_with(part))
            return true;
    return false;
}

Kind kind_of(std::string_view word) {
    for (std::string_view italic : italics)
        if (word.starts_with(italic))
            word.remove_prefix(italic.size());
    const bool located = has(word, "-");
    if (has(word, "(") || (located && word.ends_with("oxy")))
        return Kind::compound;
    const auto start = word.find_first_of("abcdefghijklmnopqrstuvwxyz");
    std::string_view bare = start == std::string_view::npos ? word : word.substr(start);
    bool compound = opens_with_further_part(bare);
    for (std::string_view many : std::span(multipliers).subspan(2))
        if (bare.starts_with(many)) {
            std::string_view rest = bare.substr(many.size());
            for (std::string_view part : first_parts)
                compound |= rest.starts_with(part);
        }
    return compound ? Kind::compound : located ? Kind::located : Kind::simple;
}

std::string enclose(const std::string& text) {
    if (has(text, "["))
        return "{" + text + "}";
    if (has(text, "("))
        return "[" + text + "]";
    return "(" + text + ")";
}

std::string multiplied(const std::string& word, std::size_t count) {
    const Kind kind = kind_of(word);
    const std::string text = kind == Kind::simple ? word : enclose(word);
    if (count == 1)
        return text;
    if (kind == Kind::compound)
        return std::string(compound_multipliers[count]) + text;
    const bool italic = std::ranges::any_of(italics, [&](auto start) { return word.starts_with(start); });
    return std::string(multipliers[count]) + (kind == Kind::simple && italic ? "-" : "") + text;
}

std::string joined(const std::vector<std::string>& parts, std::string_view between) {
    std::string out;
    for (const std::string& part : parts)
        out += (out.empty() ? "" : std::string(between)) + part;
    return out;
}

std::string locant_list(const std::vector<int>& locants) {
    std::vector<std::string> parts;
    for (int locant : locants)
        parts.push_back(std::to_string(locant));
    return joined(parts, ",");
}

std::string prefix_text(const Cited& cited, const Plan& plan, const Locants& locants, bool with_locants) {
    std::vector<std::string> parts;
    for (int locant : sorted_locants(cited.nitrogen, locants))
        parts.push_back(plan.principal.size() == 1 ? "N" : "N" + std::to_string(locant));
    for (int locant : sorted_locants(cited.ring, locants))
        parts.push_back(std::to_string(locant));
    const std::string text = multiplied(cited.word, parts.size());
    return with_locants ? joined(parts, ",") + "-" + text : text;
}

std::string ester_text(const Plan& plan, const Locants& locants) {
    const bool with_locants = plan.esters.size() > 1 && (plan.principal.size() > 2 || !plan.cited.empty());
    std::string out;
    for (const Cited& ester : plan.esters) {
        if (with_locants)
            out += locant_list(sorted_locants(ester.ring, locants)) + "-";
        out += (ester.ring.size() == 1 ? ester.word : multiplied(ester.word, ester.ring.size())) + " ";
    }
    return out;
}

std::string aryl_text(const Plan& plan, const Locants& locants, const std::string& front) {
    const std::size_t count = plan.principal.size();
    if (count == 1)
        return front + std::string(family_at(plan).ring);
    const std::string where = locant_list(sorted_locants(plan.principal, locants));
    if (count == 2)
        return (front.empty() ? "" : front + "-") + where + "-phenylene";
    return front + "benzene-" + where + "-" + std::string(multipliers[count]) + "yl";
}

std::string aryl_name(const Plan& plan, const Locants& locants, const std::string& front) {
    const Family& family = family_at(plan);
    const std::size_t count = plan.principal.size();
    const std::string ring = aryl_text(plan, locants, front);
    const auto orders = frames(family, count);
    const bool mated = count == 1 && !family.mate.empty();
    std::size_t order = 0;
    if (mated) {
        const std::string mate(family.mate.starts_with("tri") ? family.mate.substr(3) : family.mate);
        order = alphabet_key(mate) <= alphabet_key(ring) ? 0 : 1;
    }
    const bool bare =
        family.suffix.starts_with(" ") || (count == 1 && front.empty() && (!mated || !family.lead.empty()));
    return orders[order].first + (bare ? ring : enclose(ring)) + orders[order].second;
}

std::string ring_parent(const Plan& plan, const Locants& locants, bool substituted) {
    if (plan.family < 0)
        return "benzene";
    const Family& family = family_at(plan);
    const std::size_t count = plan.principal.size();
    if (count == 1 && !family.retained.empty())
        return std::string(family.retained);
    const bool located = count == 1 ? substituted : count < 6;
    return "benzene" + (located ? "-" + locant_list(sorted_locants(plan.principal, locants)) + "-" : "") +
           multiplied_suffix(family, count);
}

}  // namespace

std::vector<int> sorted_locants(const std::vector<int>& positions, const Locants& locants) {
    std::vector<int> out;
    for (int position : positions)
        out.push_back(locants[static_cast<std::size_t>(position)]);
    std::ranges::sort(out);
    return out;
}

std::span<const Family> families() {
    return family_table;
}
std::span<const Stem> aliases() {
    return alias_table;
}
std::span<const Stem> general_stems() {
    return general_table;
}
std::span<const Stem> whole_names() {
    return whole_table;
}

std::string_view multiplier(std::size_t count) {
    return multipliers[count];
}
std::string_view compound_multiplier(std::size_t count) {
    return compound_multipliers[count];
}

std::string multiplied_suffix(const Family& family, std::size_t count) {
    std::string many(multipliers[count]);
    const bool vowel = family.suffix.starts_with("a") || family.suffix.starts_with("o");
    if (many.ends_with("a") && vowel)
        many.pop_back();
    std::string out = many + std::string(family.suffix);
    if (!family.halide.empty())
        out += " " + std::string(multipliers[count]) + std::string(family.halide);
    return out;
}

std::vector<std::pair<std::string, std::string>> frames(const Family& family, std::size_t count) {
    const std::string mate(family.mate), suffix(family.suffix), lead(family.lead);
    const std::string ester =
        family.ester.empty() ? "" : std::string(multipliers[count]) + std::string(family.ester);
    if (count == 1) {
        if (!ester.empty())
            return {{ester, suffix}};
        if (!mate.empty() && !lead.empty())
            return {{mate + "-" + lead + "-", suffix}, {lead + "-", "-" + mate + suffix}};
        if (mate.empty())
            return {{lead.empty() ? "" : lead + "-", suffix}};
        const bool multiplied_mate = kind_of(mate) == Kind::compound;
        return {{mate, suffix}, {"", (multiplied_mate ? mate : enclose(mate)) + suffix}};
    }
    std::string front;
    if (!lead.empty())
        for (std::size_t i = 0; i < count; ++i)
            front += (i ? "," : "") + lead + std::string(i, '\'');
    std::string back;
    if (suffix.starts_with(" "))
        back = " " + std::string(multipliers[count]) + suffix.substr(1);
    else if (family.joint.empty())
        back = std::string(multipliers[count]) + suffix;
    else
        back = std::string((family.joint == "bis" ? compound_multipliers : multipliers)[count]) +
               enclose(mate + suffix);
    return {{ester + (front.empty() ? "" : front + "-"), back}};
}

std::string alphabet_key(std::string_view text) {
    std::string word(text);
    for (std::string_view italic : italics)
        for (auto at = word.find(italic); at != std::string::npos; at = word.find(italic))
            word.erase(at, italic.size());
    std::erase_if(word, [](char c) { return c < 'a' || c > 'z'; });
    return word;
}

std::string compose(const Plan& plan, const Locants& locants) {
    std::size_t on_ring = 0;
    for (const Cited& cited : plan.cited)
        on_ring += cited.ring.size();
    const bool aryl = plan.family >= 0 && family_at(plan).aryl;
    const bool located =
        !plan.stem.empty() || plan.family >= 0 || (on_ring > 1 && (on_ring < 6 || plan.cited.size() > 1));
    std::vector<std::string> parts;
    for (const Cited& cited : plan.cited)
        parts.push_back(prefix_text(cited, plan, locants, located));
    const std::string front = joined(parts, "-");
    if (!plan.stem.empty())
        return ester_text(plan, locants) + front +
               plan.stem.substr(front.empty() && plan.stem.starts_with("-") ? 1 : 0);
    if (aryl)
        return aryl_name(plan, locants, front);
    return ester_text(plan, locants) + front + ring_parent(plan, locants, on_ring > 0);
}

}  // namespace isotally::name_parts
