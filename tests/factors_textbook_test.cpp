// The posterior of a small invented family against the textbook's formula.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <Eigen/Dense>
#include <algorithm>
#include <cmath>
#include <map>

#include "knowledge.hpp"
#include "small_family.hpp"

namespace isotally {
namespace {

using testing::ElementsAre;

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
        const auto add = [&](const std::string& name, double weight, double centre, double sd) {
            line[name] += weight;
            priors[name] = {centre, sd};
        };
        for (int away = 1; away <= 5; ++away) {
            const std::string group = groups[static_cast<std::size_t>(away - 1)];
            if (group.empty())
                continue;
            const std::string place = away % 4 == 1 ? "ortho" : away == 3 ? "para" : "meta";
            const auto& c = constants_of.at(group == "Et" ? "Me" : group);
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
            const auto add_group = [&](const std::string& member, double part, double constant_sd) {
                add("group " + member, s, 0, part * 0.4);
                double own = std::hypot(part * (place == "ortho" ? 0.3 : 0.2), rho_mean * constant_sd);
                own = place == "ortho" ? std::hypot(own, 1.2 * constant_sd) : own;
                add("group " + member + place, s, 0, own);
                add("conditions " + member + reaction, 1, 0, part * 0.25);
                add("conditions " + member + place + reaction, 1, 0, part * 0.12);
            };
            add_group(group == "Et" ? "Me" : group, 1, sigma_sd);
            if (group == "Et")  // of the series of methyl: shares its unknowns and keeps a part to itself
                add_group("Et", 0.35, std::hypot(sigma_sd, 0.05));
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
        out.push_back(book.site(around, reaction, carried > 1 ? read.smiles + " to " + site.product : ""));
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
    const auto way = [](const char* substrate, const char* product) {
        return canonical_smiles(substrate, "test") + " to " + canonical_smiles(product, "test");
    };
    const auto six =
        at({"Me", "NO2", "", "", ""}, "one", way(ortho_nitrotoluene, "Cc1c(N(=O)=O)cccc1N(=O)=O"));
    const auto four =
        at({"", "NO2", "Me", "", ""}, "one", way(ortho_nitrotoluene, "Cc1ccc(N(=O)=O)cc1N(=O)=O"));
    book.observe({Textbook::minus(six, four)}, {ratio(34, 1, 65, 1)},
                 with_shared({share_sd(34)}, share_sd(65)));
    const auto inner = at({"Me", "", "", "", "Me"}, "one", way("Cc1cccc(C)c1", "Cc1cccc(C)c1N(=O)=O"));
    const auto outer = at({"Me", "", "Me", "", ""}, "one", way("Cc1cccc(C)c1", "Cc1ccc(N(=O)=O)c(C)c1"));
    book.observe({Textbook::minus(inner, outer)}, {ratio(14, 1, 86, 2)},
                 with_shared({share_sd(14)}, share_sd(86)));
    book.observe({at({"", "", "Me", "", ""}, "two", "")}, {std::log10(50)}, with_shared({0.05}, 0));

    const std::vector<std::pair<std::string, std::string>> questions{{"Cc1ccccc1", "one"},
                                                                     {"Cc1ccccc1", "two"},
                                                                     {"O=[N+]([O-])c1ccccc1", "one"},
                                                                     {ortho_nitrotoluene, "one"},
                                                                     {ortho_nitrotoluene, "two"},
                                                                     {"Cc1ccc(N(=O)=O)cc1", "one"},
                                                                     {"Cc1cccc(C)c1", "two"},
                                                                     {"Cc1cc(C)cc(N(=O)=O)c1", "one"},
                                                                     {"CCc1ccccc1", "two"},
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
    const auto of = [&](const FamilyModel& by, const std::string& smiles, Relation relation) {
        for (const auto& site : small_factors(known, by, smiles, "one").contributions)
            if (site.at(0).relation == relation)
                return site.at(0);
        throw std::logic_error("no such position");
    };
    EXPECT_EQ(of(*fitted, "Cc1ccccc1", meta).evidence, "measured");
    EXPECT_THAT(of(*fitted, "Cc1ccccc1", meta).sources, ElementsAre("paper of toluene"));
    EXPECT_THAT(of(*fitted, "Cc1ccccc1", para).sources, ElementsAre("paper of toluene", "paper of factor"));
    EXPECT_EQ(of(*fitted, "Clc1ccccc1", ortho).evidence, "inferred") << "seen beside another group only";
    EXPECT_EQ(of(*fitted, "Clc1ccccc1", meta).evidence, "inferred");
    EXPECT_EQ(of(*fitted, "Clc1ccccc1", para).evidence, "correlated") << "never seen at para";
    EXPECT_EQ(of(*leave_out(*fitted, "Cc1ccccc1Cl"), "Clc1ccccc1", ortho).evidence, "correlated");
    EXPECT_EQ(of(*fitted, "CCc1ccccc1", para).evidence, "assumed") << "no constants of its own";
    EXPECT_THAT(of(*fitted, "CCc1ccccc1", para).sources, ElementsAre("constants"));
    EXPECT_THAT(small_factors(known, *fitted, "Cc1ccccc1", "two").measured_nearby, ElementsAre("toluene"));
}

TEST(FactorsTextbook, BoundCutsOffWhatLiesAboveIt) {
    // o-xylene, "only the 4-isomer": the other has at most 5 %. The truth by quadrature: the prior of the
    // log-ratio times a soft step (normal distribution function, sd 0.3) at the bound.
    Tables small = small_tables();
    small.measurements.clear();
    small.rates.clear();
    const auto moments = [](const Knowledge& known) {
        const auto found = small_factors(known, *fit_family(known, "nitration"), "Cc1ccccc1C", "one");
        const auto read = answered(parse_arene(known.tables, known.groups, "Cc1ccccc1C"), "o-xylene");
        const bool first =
            sites(read, "*[N+](=O)[O-]")[0].product == canonical_smiles("Cc1cccc(N(=O)=O)c1C", "test");
        const double mean = found.mean[0] - found.mean[1];
        const auto& c = found.covariance;
        return std::pair(first ? mean : -mean, c[0] + c[3] - 2 * c[1]);
    };
    const auto [before, variance] = moments(prepare(small));
    small.measurements = {
        small_record("xylene", "one", "Cc1ccccc1C", {{"Cc1ccc(N(=O)=O)cc1C", 100, {}}}, false, "bound")};
    const auto [mean, spread] = moments(prepare(small));
    const double limit = std::log10(5.0 / 2) - std::log10(100.0 / 2);
    double mass = 0, first = 0, second = 0;
    for (int i = -40000; i <= 40000; ++i) {
        const double x = before + i * 2e-4;
        const double w = std::exp(-0.5 * (x - before) * (x - before) / variance) *
                         std::erfc((x - limit) / 0.3 / std::sqrt(2));
        mass += w;
        first += w * x;
        second += w * x * x;
    }
    first /= mass;
    ASSERT_LT(first, before - 0.3) << "the bound must matter here";
    EXPECT_NEAR(mean, first, 0.02);
    EXPECT_NEAR(spread, second / mass - first * first, 0.02);
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
