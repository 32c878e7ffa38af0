// The posterior of a small invented family against the textbook's formula.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <Eigen/Dense>
#include <algorithm>
#include <cmath>
#include <map>

#include "knowledge.hpp"

namespace isotally {
namespace {

using testing::ElementsAre;

// A family of two reactions and four groups, every figure invented.
constexpr double rho_mean = -6.5, sigma_sd = 0.02;

struct Constants {
    double para, meta, nu;
};
const std::map<std::string, Constants> constants_of{{"Me", {-0.31, -0.07, 0.52}},
                                                    {"NO2", {0.79, 0.67, 1.39}}};

Substituent small_group(const std::string& id, const std::string& smiles, const std::string& kind) {
    Substituent out;
    out.id = out.name = id;
    out.smiles = smiles;
    out.kind = kind;
    const auto known = constants_of.find(id);
    if (known == constants_of.end())
        return out;
    Provenance from;
    from.source = "constants";
    out.constants = {{"sigma_p_plus", {known->second.para, sigma_sd, from}},
                     {"sigma_m_plus", {known->second.meta, sigma_sd, from}},
                     {"charton_nu", {known->second.nu, sigma_sd, from}}};
    return out;
}

Measurement small_record(const std::string& id, const std::string& reaction, const std::string& substrate,
                         const std::vector<ProductShare>& products, bool complete,
                         const std::string& use = "yes") {
    Measurement out;
    out.id = id;
    out.reaction = reaction;
    out.substrate = substrate;
    out.products = products;
    out.complete = complete;
    out.use = use;
    out.from.source = "paper of " + id;
    out.from.status = "invented";
    return out;
}

constexpr const char* ortho_nitrotoluene = "Cc1ccccc1[N+](=O)[O-]";

Tables small_tables() {
    Tables out;
    out.substituents = {small_group("Me", "*C", "alkyl"), small_group("NO2", "*[N+](=O)[O-]", "acceptor"),
                        small_group("Et", "*CC", "alkyl"), small_group("Cl", "*Cl", "halogen")};
    out.substituents[2].like = "Me";
    out.substituents[3].constants = out.substituents[0].constants;
    Reaction one;
    one.id = "one";
    one.family = "nitration";
    one.new_group = "*[N+](=O)[O-]";
    Reaction two = one;
    two.id = "two";
    two.figures["selectivity"].value = 0.8;
    out.reactions = {one, two};
    const std::map<std::string, std::pair<double, double>> figures{
        {"rho", {rho_mean, 0.8}},
        {"ortho_offset", {0.5, 0.4}},
        {"ortho_steric", {-1.2, 0.4}},
        {"ortho_sigma", {1.0, 0.8}},
        {"acceptor_para", {-0.5, 0.5}},
        {"rho_of_conditions_sd", {0.3, 0}},
        {"ortho_offset_of_conditions_sd", {0.15, 0}},
        {"ortho_steric_of_conditions_sd", {0.1, 0}},
        {"kind_residual_sd", {0.15, 0}},
        {"common_residual_sd", {0.4, 0}},
        {"residual_sd", {0.2, 0}},
        {"residual_sd:ortho", {0.3, 0}},
        {"condition_common_sd", {0.25, 0}},
        {"condition_sd", {0.12, 0}},
        {"acid_slope_sd", {0.1, 0}},
        {"acid_kind_sd", {0.1, 0}},
        {"enthalpic", {1, 0}},
        {"temperature_reference_C", {25, 0}},
        {"acid_reference_percent", {80, 0}},
        {"correction:flanked", {-0.3, 0.15}},
        {"discrepancy_sd", {0.2, 0}},
        {"discrepancy_of_conditions_sd", {0.08, 0}},
        {"sigma_stand_in_sd", {0.1, 0}},
        {"like_sd", {0.05, 0}},
        {"laboratory_sd_points", {1.2, 0}},
        {"laboratory_sd_log10", {0.03, 0}},
        {"laboratory_sd_minor_log10", {0.3, 0}},
        {"weak_widening", {2, 0}},
        {"bound_fraction", {0.35, 0}},
        {"bound_sd", {0.5, 0}},
        {"unlisted_percent", {1, 0}},
        {"stray_percent", {3, 0}},
        {"stray_sd", {0.7, 0}},
        {"ortho_para_rule_sd", {0.3, 0}}};
    for (const auto& [quantity, figure] : figures)
        out.model.push_back({"all", quantity, {figure.first, figure.second, {}}});
    out.measurements = {
        small_record(
            "toluene", "one", "Cc1ccccc1",
            {{ortho_nitrotoluene, 57, {}}, {"Cc1cccc(N(=O)=O)c1", 3, 1.5}, {"Cc1ccc(N(=O)=O)cc1", 40, {}}},
            true),
        small_record("nitrobenzene", "two", "O=[N+]([O-])c1ccccc1",
                     {{"O=N(=O)c1ccccc1N(=O)=O", 6, {}}, {"O=N(=O)c1cccc(N(=O)=O)c1", 93, {}}}, false,
                     "weak"),
        small_record("nitrotoluene", "one", ortho_nitrotoluene,
                     {{"Cc1ccc(N(=O)=O)cc1N(=O)=O", 65, {}}, {"Cc1c(N(=O)=O)cccc1N(=O)=O", 34, {}}}, false),
        small_record("xylene", "one", "Cc1cccc(C)c1",
                     {{"Cc1cccc(C)c1N(=O)=O", 14, {}}, {"Cc1ccc(N(=O)=O)c(C)c1", 86, {}}}, true)};
    RateFigure factor;
    factor.id = "factor";
    factor.reaction = "two";
    factor.substrate = "Cc1ccccc1";
    factor.relation = "para";
    factor.value = 50;
    factor.sd_log10 = 0.05;
    factor.use = "yes";
    factor.from.source = "paper of factor";
    out.rates = {factor};
    return out;
}

/// The model as the design states it, unknowns by name; solved in the space of the unknowns:
/// covariance = (P^-1 + H' R^-1 H)^-1, mean = covariance (P^-1 m + H' R^-1 y).
class Textbook {
public:
    using Line = std::map<std::string, double>;

    /// log10 F of the position whose neighbours, one to five steps round the ring, are these groups.
    Line site(const std::array<std::string, 5>& groups, const std::string& reaction,
              const std::string& compound) {
        const double s = reaction == "two" ? 0.8 : 1.0;
        Line line;
        const auto add = [&](const std::string& name, double weight, double mean, double sd) {
            line[name] += weight;
            priors[name] = {mean, sd};
        };
        for (int away = 1; away <= 5; ++away) {
            const std::string group = groups[static_cast<std::size_t>(away - 1)];
            if (group.empty())
                continue;
            const std::string place = away % 4 == 1 ? "ortho" : away == 3 ? "para" : "meta";
            const auto& c = constants_of.at(group);
            const double sigma = place == "meta" ? c.meta : c.para;
            const std::string kind = group == "NO2" ? "acceptor" : "alkyl";
            add("rho", s * sigma, rho_mean, 0.8);
            add("rho " + reaction, sigma, 0, 0.3);
            if (place == "ortho") {
                add("a", 1, 0.5, 0.4);
                add("b", c.nu, -1.2, 0.4);
                add("c", c.para, 1.0, 0.8);
                add("a " + reaction, 1, 0, 0.15);
                add("b " + reaction, c.nu, 0, 0.1);
            }
            if (place == "para" && kind == "acceptor")
                add("acceptor at para", s, -0.5, 0.5);
            add("kind " + kind + place, s, 0, 0.15);
            add("group " + group, s, 0, 0.4);
            const double own = std::hypot(place == "ortho" ? 0.3 : 0.2, rho_mean * sigma_sd);
            add("group " + group + place, s, 0, place == "ortho" ? std::hypot(own, 1.2 * sigma_sd) : own);
            add("conditions " + group + reaction, 1, 0, 0.25);
            add("conditions " + group + place + reaction, 1, 0, 0.12);
        }
        if (!groups[0].empty() && !groups[4].empty())
            add("flanked", 1, -0.3, 0.15);
        if (!compound.empty()) {
            add("deviation " + compound, 1, 0, 0.2);
            add("deviation " + compound + reaction, 1, 0, 0.08);
        }
        return line;
    }

    static Line minus(Line one, const Line& other) {
        for (const auto& [name, weight] : other)
            one[name] -= weight;
        return one;
    }

    void observe(const std::vector<Line>& lines, const std::vector<double>& values,
                 const Eigen::MatrixXd& noise) {
        blocks.push_back({lines, values, noise});
    }

    void solve() {
        for (const auto& [name, prior] : priors)
            index.emplace(name, static_cast<Eigen::Index>(index.size()));
        const auto n = static_cast<Eigen::Index>(index.size());
        Eigen::MatrixXd precision = Eigen::MatrixXd::Zero(n, n);
        Eigen::VectorXd pull = Eigen::VectorXd::Zero(n);
        for (const auto& [name, prior] : priors) {
            const double weight = 1 / (prior.second * prior.second);
            precision(index.at(name), index.at(name)) += weight;
            pull(index.at(name)) += weight * prior.first;
        }
        for (const auto& block : blocks) {
            const Eigen::MatrixXd h = rows(block.lines);
            const Eigen::MatrixXd r = block.noise.inverse();
            precision += h.transpose() * r * h;
            pull += h.transpose() * r *
                    Eigen::Map<const Eigen::VectorXd>(block.values.data(),
                                                      static_cast<Eigen::Index>(block.values.size()));
        }
        covariance = precision.inverse();
        mean = covariance * pull;
    }

    Eigen::MatrixXd rows(const std::vector<Line>& lines) const {
        Eigen::MatrixXd h = Eigen::MatrixXd::Zero(static_cast<Eigen::Index>(lines.size()),
                                                  static_cast<Eigen::Index>(index.size()));
        for (std::size_t i = 0; i < lines.size(); ++i)
            for (const auto& [name, weight] : lines[i])
                h(static_cast<Eigen::Index>(i), index.at(name)) += weight;
        return h;
    }

    struct Block {
        std::vector<Line> lines;
        std::vector<double> values;
        Eigen::MatrixXd noise;
    };
    std::map<std::string, std::pair<double, double>> priors;
    std::vector<Block> blocks;
    std::map<std::string, Eigen::Index> index;
    Eigen::VectorXd mean;
    Eigen::MatrixXd covariance;
};

/// sd of log10 of a share: 1.2 points (and the record's own) and 3 % against its size, at most 0.3.
double share_sd(double percent, double own_points = 0) {
    return std::min(0.3, std::hypot(std::hypot(1.2, own_points) / (percent * std::log(10)), 0.03));
}

Eigen::MatrixXd with_shared(const std::vector<double>& own, double shared) {
    const auto n = static_cast<Eigen::Index>(own.size());
    Eigen::MatrixXd noise = Eigen::MatrixXd::Constant(n, n, shared * shared);
    for (Eigen::Index i = 0; i < n; ++i)
        noise(i, i) += own[static_cast<std::size_t>(i)] * own[static_cast<std::size_t>(i)];
    return noise;
}

/// Forms of the sites of a compound in the order of sites(), groups read off the ring.
std::vector<Textbook::Line> forms(Textbook& book, const Knowledge& small, const std::string& smiles,
                                  const std::string& reaction) {
    const auto read = answered(parse_arene(small.tables, small.groups, smiles), smiles);
    std::vector<Textbook::Line> out;
    for (const auto& site : sites(read, "*[N+](=O)[O-]")) {
        std::array<std::string, 5> around;
        int carried = 0;
        for (int away = 1; away <= 5; ++away) {
            const int group = read.rings[0].groups[static_cast<std::size_t>((site.positions[0] + away) % 6)];
            if (group >= 0)
                around[static_cast<std::size_t>(away - 1)] =
                    small.tables.substituents[static_cast<std::size_t>(group)].id;
            carried += group >= 0;
        }
        out.push_back(book.site(around, reaction, carried > 1 ? site.product : ""));
    }
    return out;
}

SiteFactors small_factors(const Knowledge& small, const FamilyModel& fitted, const std::string& smiles,
                          const std::string& reaction) {
    const auto read = answered(parse_arene(small.tables, small.groups, smiles), smiles);
    const Conditions conditions{find_reaction(small.tables, reaction), 25, 0};
    return site_factors(fitted, conditions, read.smiles, placed_sites(read, sites(read, "*[N+](=O)[O-]")),
                        true);
}

TEST(FactorsTextbook, PosteriorIsThatOfTheTextbook) {
    // Linear Gaussian regression in information form, e.g. Bishop, Pattern Recognition and Machine Learning
    // (2006), eqs. 3.50 and 3.51; the library solves the same in the space of the observations.
    const Knowledge small = prepare(small_tables());
    Textbook book;
    const std::string none;
    const auto at = [&](const std::array<std::string, 5>& groups, const std::string& reaction,
                        const std::string& own) { return book.site(groups, reaction, own); };
    const auto ratio = [](double percent, int n, double top, int n_top) {
        return std::log10(percent / n) - std::log10(top / n_top);
    };
    const auto para = at({"", "", "Me", "", ""}, "one", ""),
               meta_site = at({"", "Me", "", "", ""}, "one", "");
    const auto ortho_site = at({"Me", "", "", "", ""}, "one", "");
    book.observe({Textbook::minus(meta_site, ortho_site), Textbook::minus(para, ortho_site)},
                 {ratio(3, 2, 57, 2), ratio(40, 1, 57, 2)},
                 with_shared({share_sd(3, 1.5), share_sd(40)}, share_sd(57)));
    book.observe(
        {Textbook::minus(at({"NO2", "", "", "", ""}, "two", ""), at({"", "NO2", "", "", ""}, "two", ""))},
        {ratio(6, 2, 93, 2)}, with_shared({2 * share_sd(6)}, 2 * share_sd(93)));
    const auto product = [](const char* smiles) { return canonical_smiles(smiles, "test"); };
    book.observe(
        {Textbook::minus(at({"Me", "NO2", "", "", ""}, "one", product("Cc1c(N(=O)=O)cccc1N(=O)=O")),
                         at({"", "NO2", "Me", "", ""}, "one", product("Cc1ccc(N(=O)=O)cc1N(=O)=O")))},
        {ratio(34, 1, 65, 1)}, with_shared({share_sd(34)}, share_sd(65)));
    const auto four = at({"Me", "", "Me", "", ""}, "one", product("Cc1ccc(N(=O)=O)c(C)c1"));
    book.observe(
        {Textbook::minus(at({"Me", "", "", "", "Me"}, "one", product("Cc1cccc(C)c1N(=O)=O")), four),
         Textbook::minus(at({"", "Me", "", "Me", ""}, "one", product("Cc1cc(C)cc(N(=O)=O)c1")), four)},
        {ratio(14, 1, 86, 2), ratio(0.35, 1, 86, 2)}, with_shared({share_sd(14), 0.5}, share_sd(86)));
    book.observe({at({"", "", "Me", "", ""}, "two", "")}, {std::log10(50)}, with_shared({0.05}, 0));

    const std::vector<std::pair<std::string, std::string>> questions{{"Cc1ccccc1", "one"},
                                                                     {"Cc1ccccc1", "two"},
                                                                     {"O=[N+]([O-])c1ccccc1", "one"},
                                                                     {ortho_nitrotoluene, "one"},
                                                                     {ortho_nitrotoluene, "two"},
                                                                     {"Cc1ccc(N(=O)=O)cc1", "one"},
                                                                     {"Cc1cccc(C)c1", "two"},
                                                                     {"Cc1cc(C)cc(N(=O)=O)c1", "one"},
                                                                     {"c1ccccc1", "one"}};
    std::vector<std::vector<Textbook::Line>> asked;
    for (const auto& [smiles, reaction] : questions)
        asked.push_back(forms(book, small, smiles, reaction));
    book.solve();
    const auto fitted = fit_family(small, "nitration");
    for (std::size_t q = 0; q < questions.size(); ++q) {
        const auto found = small_factors(small, *fitted, questions[q].first, questions[q].second);
        const Eigen::MatrixXd h = book.rows(asked[q]);
        const Eigen::VectorXd mean = h * book.mean;
        const Eigen::MatrixXd covariance = h * book.covariance * h.transpose();
        ASSERT_EQ(found.mean.size(), static_cast<std::size_t>(mean.size()));
        for (Eigen::Index i = 0; i < mean.size(); ++i) {
            EXPECT_NEAR(found.mean[static_cast<std::size_t>(i)], mean(i), 1e-9) << questions[q].first;
            for (Eigen::Index j = 0; j < mean.size(); ++j)
                EXPECT_NEAR(found.covariance[static_cast<std::size_t>(i * mean.size() + j)], covariance(i, j),
                            1e-9)
                    << questions[q].first;
        }
    }
}

TEST(FactorsTextbook, EvidenceOfEachFigure) {
    Tables small = small_tables();
    small.measurements.push_back(
        small_record("chloro", "one", "Cc1ccccc1Cl",
                     {{"Cc1ccc(N(=O)=O)cc1Cl", 60, {}}, {"Cc1cccc(N(=O)=O)c1Cl", 40, {}}}, false));
    const Knowledge known = prepare(small);
    const auto fitted = fit_family(known, "nitration");
    const auto of = [&](const FamilyModel& by, const std::string& smiles) {
        return small_factors(known, by, smiles, "one").contributions.at(0).at(0);
    };
    EXPECT_EQ(of(*fitted, "Cc1ccccc1").evidence, "measured");
    EXPECT_THAT(of(*fitted, "Cc1ccccc1").sources, ElementsAre("paper of toluene", "paper of factor"));
    EXPECT_EQ(of(*fitted, "Clc1ccccc1").evidence, "inferred") << "seen beside another group only";
    EXPECT_EQ(of(*fitted, "CCc1ccccc1").evidence, "assumed") << "no constants of its own";
    EXPECT_THAT(of(*fitted, "CCc1ccccc1").sources, ElementsAre("constants"));
    EXPECT_EQ(of(*leave_out(*fitted, "Cc1ccccc1Cl"), "Clc1ccccc1").evidence, "correlated");
    EXPECT_THAT(small_factors(known, *fitted, "Cc1ccccc1", "two").measured_by, ElementsAre("toluene"));
}

TEST(FactorsTextbook, RateIsReproducedWhereNothingElseIsKnown) {
    Tables small = small_tables();
    small.measurements.clear();
    small.rates[0].relation.clear();
    small.rates[0].value = 25;
    small.rates[0].sd_log10 = 0.001;
    const Knowledge known = prepare(small);
    const auto found = small_factors(known, *fit_family(known, "nitration"), "Cc1ccccc1", "two");
    const auto toluene = answered(parse_arene(known.tables, known.groups, "Cc1ccccc1"), "toluene");
    const auto places = sites(toluene, "*[N+](=O)[O-]");
    double rate = 0;
    for (std::size_t i = 0; i < places.size(); ++i)
        rate += places[i].multiplicity * std::pow(10, found.mean[i]) / 6;
    EXPECT_NEAR(rate, 25, 0.5);
}

}  // namespace
}  // namespace isotally
