#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "linear.hpp"
#include "states.hpp"
#include "terms.hpp"

namespace isotally {
namespace {

using factors::Settings;

/// Numbers that turn printed percentages into log-ratios with noise (model.csv).
struct Noise {
    double points, log10, minor, weak, softness, unlisted_percent, named_percent, stray_percent;
};

Noise read_noise(const Tables& tables, std::string_view family) {
    const auto value = [&](const char* quantity) { return model_figure(tables, family, quantity).value; };
    return {value("laboratory_sd_points"), value("laboratory_sd_log10"), value("laboratory_sd_minor_log10"),
            value("weak_widening"),        value("bound_softness"),      value("unlisted_percent"),
            value("named_percent"),        value("stray_percent")};
}

struct Placed {
    Arene arene;
    std::vector<Site> sites;
};

Placed place(const Knowledge& knowledge, const std::string& substrate, const Reaction& reaction,
             const std::string& where) {
    auto arene = [&] {
        try {
            return parse_arene(knowledge.tables, knowledge.groups, substrate);
        } catch (const Error& e) {
            throw Error(ErrorKind::tables, where + ":substrate", fmt::format("{}: {}", e.where, e.what()));
        }
    }();
    if (const auto* refused = refusal(arene))
        throw Error(ErrorKind::tables, where + ":substrate",
                    fmt::format("{}: {}", substrate, refused->reason));
    Placed placed{std::get<Arene>(std::move(arene)), {}};
    placed.sites = sites(placed.arene, reaction.new_group);
    return placed;
}

/// log10 of a share per position, with the sd that a laboratory's scatter gives it.
struct LogShare {
    double value, sd;
};

LogShare log_share(double percent, double sd_points, int multiplicity, double widening, const Noise& noise) {
    const double points = std::hypot(sd_points, noise.points);
    const double sd = std::min(noise.minor, std::hypot(points / (percent * std::log(10.0)), noise.log10));
    return {std::log10(percent / multiplicity), sd * widening};
}

/// A small share that a donor does not lead to (odd positions from it) may come from another species,
/// protonated or coordinated: an upper bound of what the neutral ring gives.
bool is_stray(const Tables& tables, const PlacedSite& site, double percent, const Noise& noise) {
    if (percent > noise.stray_percent)
        return false;
    bool donor = false, led = false;
    for (int p = 0; p < 6; ++p) {
        const int group = site.groups[static_cast<std::size_t>(p)];
        if (group < 0 || tables.substituents[static_cast<std::size_t>(group)].kind != "donor")
            continue;
        donor = true;
        led |= (p - site.position) % 2 != 0;
    }
    return donor && !led;
}

/// Log-ratios of the listed isomers to the largest; isomers that were not listed enter as bounds where the
/// record claims to be complete, or where it names a product that must be nearly all.
void add_share_rows(const Tables& tables, const Measurement& record, const std::vector<Site>& sites,
                    const Noise& noise, Observation& out) {
    const double widening = record.use == "weak" || record.from.confidence == "low" ? noise.weak : 1;
    std::vector<double> percent(sites.size(), 0), sd(sites.size(), 0);
    for (const auto& product : record.products) {
        const auto site = std::find_if(sites.begin(), sites.end(),
                                       [&](const Site& s) { return s.product == product.smiles; });
        percent[static_cast<std::size_t>(site - sites.begin())] += product.percent;
        sd[static_cast<std::size_t>(site - sites.begin())] = product.sd.value_or(0);
    }
    const auto top =
        static_cast<std::size_t>(std::max_element(percent.begin(), percent.end()) - percent.begin());
    if (percent[top] <= 0)
        return;
    const auto reference = log_share(percent[top], sd[top], sites[top].multiplicity, widening, noise);
    using Kind = ObservedRow::Kind;
    const auto row = [&](std::size_t site, double value, double row_sd, Kind kind) {
        out.rows.push_back(
            {{{static_cast<int>(site), 1.0}, {static_cast<int>(top), -1.0}}, value, row_sd, kind, 0, 0});
    };
    const auto at_most = [&](std::size_t site, double limit) {
        const double ratio = std::log10(limit / sites[site].multiplicity) - reference.value;
        row(site, ratio, noise.softness, Kind::at_most);
        out.rows.back().limit = ratio;
        out.rows.back().softness = noise.softness;
    };
    out.shared_sd = reference.sd;
    for (std::size_t i = 0; i < sites.size(); ++i) {
        if (i == top)
            continue;
        if (record.use == "bound") {
            at_most(i, std::max(noise.unlisted_percent, 100 - std::min(percent[top], noise.named_percent)));
        } else if (percent[i] > 0 && is_stray(tables, out.sites[i], percent[i], noise)) {
            at_most(i, percent[i]);
        } else if (percent[i] > 0) {
            const auto share = log_share(percent[i], sd[i], sites[i].multiplicity, widening, noise);
            row(i, share.value - reference.value, share.sd, Kind::figure);
        } else if (record.complete) {
            at_most(i, noise.unlisted_percent);
        }
    }
}

Conditions conditions_of(const Tables& tables, int reaction, std::optional<double> temperature_C,
                         std::optional<double> acid_percent) {
    const auto& figures = tables.reactions[static_cast<std::size_t>(reaction)].figures;
    const auto standard = [&](const char* quantity, double otherwise) {
        const auto found = figures.find(quantity);
        return found == figures.end() ? otherwise : found->second.value;
    };
    return {reaction, temperature_C.value_or(standard("temperature_default_C", 25)),
            acid_percent.value_or(standard("acid_default_percent", 0))};
}

Observation start(const Placed& placed, const std::string& id, const Conditions& conditions,
                  const Provenance& from) {
    Observation out;
    out.id = id;
    out.compound = placed.arene.smiles;
    out.source = from.source;
    out.status = from.status;
    out.confidence = from.confidence;
    out.conditions = conditions;
    out.sites = placed_sites(placed.arene, placed.sites);
    return out;
}

void add_measurement(Knowledge& knowledge, Measurement& record) {
    const auto& tables = knowledge.tables;
    const std::string where = fmt::format("measurements.json:{}", record.from.line);
    const int reaction = find_reaction(tables, record.reaction);
    const auto& row = tables.reactions[static_cast<std::size_t>(reaction)];
    const auto placed = place(knowledge, record.substrate, row, where);
    record.substrate = placed.arene.smiles;
    for (auto& product : record.products) {
        product.smiles = canonical_smiles(product.smiles, where + ":products");
        if (std::none_of(placed.sites.begin(), placed.sites.end(),
                         [&](const Site& s) { return s.product == product.smiles; }))
            throw Error(
                ErrorKind::tables, where + ":products",
                fmt::format("{} is no product of {} in {}", product.smiles, record.substrate, row.id));
    }
    if (record.use == "no")
        return;
    auto out = start(placed, record.id,
                     conditions_of(tables, reaction, record.temperature_C, record.acid_percent), record.from);
    const auto noise = read_noise(tables, row.family);
    // what one lone isomer below "nearly all" leaves open can't be put as a ratio
    if (!(record.products.size() == 1 && record.use != "bound" && placed.sites.size() > 1 &&
          record.products[0].percent < noise.named_percent))
        add_share_rows(tables, record, placed.sites, noise, out);
    if (!out.rows.empty())
        knowledge.observations.push_back(std::move(out));
}

/// Relation of the only group of a monosubstituted benzene to a site of it.
Relation relation_to_group(const PlacedSite& site) {
    const auto group = std::find_if(site.groups.begin(), site.groups.end(), [](int g) { return g >= 0; });
    return relation_between(static_cast<int>(group - site.groups.begin()), site.position);
}

void add_rate(Knowledge& knowledge, RateFigure& record) {
    const auto& tables = knowledge.tables;
    const std::string where =
        fmt::format("{}:{}", record.relation.empty() ? "rates.csv" : "factors.csv", record.from.line);
    const int reaction = find_reaction(tables, record.reaction);
    const auto& row = tables.reactions[static_cast<std::size_t>(reaction)];
    const auto placed = place(knowledge, record.substrate, row, where);
    record.substrate = placed.arene.smiles;
    if (record.use == "no" || record.use == "bound")
        return;
    auto out = start(placed, record.id,
                     conditions_of(tables, reaction, record.temperature_C, record.acid_percent), record.from);
    const double sd = record.sd_log10 * (record.use == "weak" ? read_noise(tables, row.family).weak : 1);
    ObservedRow observed{{}, std::log10(record.value), sd, ObservedRow::Kind::figure, 0, 0};
    out.kind = record.relation.empty() ? Observation::Kind::rate : Observation::Kind::factor;
    if (out.kind == Observation::Kind::factor) {
        for (std::size_t i = 0; i < out.sites.size(); ++i)
            if (record.relation == relation_names[relation_to_group(out.sites[i])])
                observed.weights = {{static_cast<int>(i), 1.0}};
        if (observed.weights.empty())
            throw Error(ErrorKind::tables, where + ":relation", "no such position on this ring");
    }
    out.rows.push_back(std::move(observed));
    knowledge.observations.push_back(std::move(out));
}

/// Rule of the trade for the ortho and para factors of toluene and tert-butylbenzene in each reaction.
void add_ortho_para_ratios(Knowledge& knowledge) {
    auto& tables = knowledge.tables;
    const std::pair<const char*, const char*> rows[] = {{"ortho_para_methyl", "Cc1ccccc1"},
                                                        {"ortho_para_tert_butyl", "CC(C)(C)c1ccccc1"}};
    for (std::size_t r = 0; r < tables.reactions.size(); ++r)
        for (const auto& [quantity, substrate] : rows) {
            const auto& reaction = tables.reactions[r];
            const auto figure = reaction.figures.find(quantity);
            if (figure == reaction.figures.end() || figure->second.value <= 0)
                continue;
            const std::string where = fmt::format("{}:{}", reaction.id, quantity);
            const auto placed = place(knowledge, substrate, reaction, where);
            auto out =
                start(placed, where, conditions_of(tables, static_cast<int>(r), {}, {}), figure->second.from);
            out.kind = Observation::Kind::rule;
            ObservedRow observed{{},
                                 std::log10(figure->second.value),
                                 model_figure(tables, reaction.family, "ortho_para_rule_sd").value,
                                 ObservedRow::Kind::rule};
            for (std::size_t i = 0; i < out.sites.size(); ++i) {
                const auto relation = relation_to_group(out.sites[i]);
                if (relation != meta)
                    observed.weights.emplace_back(static_cast<int>(i), relation == ortho ? 1.0 : -1.0);
            }
            out.rows.push_back(std::move(observed));
            knowledge.observations.push_back(std::move(out));
        }
}

}  // namespace

std::vector<PlacedSite> placed_sites(const Arene& arene, const std::vector<Site>& sites) {
    std::vector<PlacedSite> placed;
    for (const auto& site : sites)
        placed.push_back({arene.rings[static_cast<std::size_t>(site.ring)].groups, site.positions.front(),
                          site.multiplicity, 6 * site.ring + site.positions.front()});
    return placed;
}

namespace {

/// Everything but what make_linear does. Faults are thrown, or collected where a list is given.
Knowledge resolve(Tables tables, std::vector<Fault>* faults) {
    Knowledge knowledge;
    knowledge.tables = std::move(tables);
    const auto attempt = [&](auto&& step) {
        try {
            step();
        } catch (const Error& e) {
            if (!faults)
                throw;
            faults->push_back({e.where, e.what()});
        }
    };
    attempt([&] { knowledge.groups = index_groups(knowledge.tables); });
    if (faults && !faults->empty())
        return knowledge;
    knowledge.states = factors::resolve_states(knowledge.tables);
    for (auto& name : knowledge.tables.names)
        attempt([&] {
            name.smiles = canonical_smiles(name.smiles, fmt::format("names.csv:{}:smiles", name.from.line));
        });
    for (const auto& ban : knowledge.tables.bans)
        for (const auto& [column, smarts] :
             {std::pair{"smarts", &ban.smarts}, std::pair{"unless", &ban.unless}})
            if (!smarts->empty())
                attempt([&, c = column, p = smarts] {
                    read_pattern(*p, fmt::format("bans.csv:{}:{}", ban.from.line, c));
                });
    for (const auto& caution : knowledge.tables.cautions)
        for (const auto& [column, smarts] : {std::pair{"substrate_smarts", &caution.substrate_smarts},
                                             std::pair{"product_smarts", &caution.product_smarts}})
            if (!smarts->empty())
                attempt([&, c = column, p = smarts] {
                    read_pattern(*p, fmt::format("cautions.csv:{}:{}", caution.from.line, c));
                });
    for (auto& record : knowledge.tables.measurements)
        attempt([&] { add_measurement(knowledge, record); });
    for (auto& record : knowledge.tables.rates)
        attempt([&] { add_rate(knowledge, record); });
    attempt([&] { add_ortho_para_ratios(knowledge); });
    return knowledge;
}

}  // namespace

Knowledge prepare(Tables tables) {
    auto knowledge = resolve(std::move(tables), nullptr);
    factors::make_linear(knowledge);
    return knowledge;
}

std::vector<Fault> lint_chemistry(const Tables& tables) {
    std::vector<Fault> faults;
    auto knowledge = resolve(tables, &faults);
    if (!faults.empty())
        return faults;
    try {
        factors::make_linear(knowledge);
    } catch (const Error& e) {
        faults.push_back({e.where, e.what()});
    }
    return faults;
}

}  // namespace isotally
