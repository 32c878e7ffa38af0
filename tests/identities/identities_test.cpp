// What must hold whatever the figures: every group of the tables in every reaction, and a grid of rings
// with two groups.
#include <GraphMol/SmilesParse/SmilesParse.h>
#include <GraphMol/SmilesParse/SmilesWrite.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <memory>
#include <numeric>

#include "../knowledge.hpp"
#include "isotally/report.hpp"

namespace isotally {
namespace {

using testing::ElementsAre;
using testing::SizeIs;

const Draws few{0.90, 60, 1};

const std::vector<std::string>& grid_groups() {
    static const std::vector<std::string> ids{"Me",   "tBu",  "F",    "Cl",  "I",     "OMe",
                                              "OH",   "NH2",  "NHAc", "CF3", "CN",    "NO2",
                                              "COMe", "CO2H", "SO3H", "Ph",  "SiMe3", "NMe3+"};
    return ids;
}

const std::vector<std::string>& grid_reactions() {
    static const std::vector<std::string> ids{"nitration-mixed-acid",    "nitration-acetyl-nitrate",
                                              "chlorination-lewis-acid", "sulfonation-sulfuric-acid",
                                              "acetylation-lewis-acid",  "bromination-excess-lewis-acid"};
    return ids;
}

const std::string& smiles_of_group(const std::string& id) {
    return tables().substituents[static_cast<std::size_t>(group(id))].smiles;
}

std::string ring_with(const std::string& one, const std::string& other, int apart) {
    RingGroups groups{-1, -1, -1, -1, -1, -1};
    groups[0] = group(one);
    groups[static_cast<std::size_t>(apart)] = group(other);
    return ring_smiles(tables(), groups);
}

void expect_range(const Range& range, const std::string& where) {
    EXPECT_TRUE(std::isfinite(range.value) && std::isfinite(range.low) && std::isfinite(range.high)) << where;
    EXPECT_LE(range.low, range.value) << where;
    EXPECT_GE(range.high, range.value) << where;
    EXPECT_GE(range.low, 0) << where;
}

/// All that holds for any answer.
void expect_sound(const Arene& read, const StepAnswer& answer, const std::string& where) {
    double percent = 0;
    int positions = 0;
    for (const auto& share : answer.shares) {
        percent += share.percent.value;
        positions += share.site.multiplicity;
        expect_range(share.percent, where);
        EXPECT_LE(share.percent.high, 100 + 1e-9) << where;
        EXPECT_TRUE(std::isfinite(share.log10_factor)) << where;
        EXPECT_TRUE(std::isfinite(share.log10_factor_sd)) << where;
        double sum = 0;
        for (const auto& one : share.contributions) {
            sum += one.log10_factor;
            EXPECT_TRUE(std::isfinite(one.sd) && one.sd >= 0) << where;
            EXPECT_FALSE(one.evidence.empty()) << where;
        }
        for (const auto& one : share.corrections) {
            sum += one.log10_factor;
            EXPECT_TRUE(std::isfinite(one.sd) && one.sd >= 0) << where;
        }
        EXPECT_NEAR(sum, share.log10_factor, 1e-9) << where;
    }
    EXPECT_NEAR(percent, 100, 1e-9) << where;
    expect_range(answer.relative_rate, where);
    if (answer.ortho_para_ratio)
        expect_range(*answer.ortho_para_ratio, where);
    long free = 0;
    for (const auto& ring : read.rings)
        free += std::count(ring.groups.begin(), ring.groups.end(), -1);
    EXPECT_EQ(positions, free) << where;
}

/// Positions next to a group, two away, opposite: one entry each on a ring that carries nothing else.
void expect_mirrored(const Arene& read, const std::vector<Site>& found, const std::string& where) {
    for (std::size_t r = 0; r < read.rings.size(); ++r) {
        const auto& groups = read.rings[r].groups;
        if (std::count(groups.begin(), groups.end(), -1) != 5)
            continue;
        const auto at =
            std::find_if(groups.begin(), groups.end(), [](int g) { return g >= 0; }) - groups.begin();
        for (const auto& site : found) {
            if (site.ring != static_cast<int>(r))
                continue;
            std::vector<long> mirrored;
            for (const int position : site.positions)
                mirrored.push_back((2 * at - position + 6) % 6);
            EXPECT_THAT(mirrored, testing::UnorderedElementsAreArray(site.positions)) << where;
        }
    }
}

TEST(Identities, EveryGroupInEveryReaction) {
    int groups = 0, refused = 0, answers = 0, unread = 0;
    for (const auto& row : tables().substituents) {
        if (row.smiles.empty())
            continue;
        ++groups;
        const auto read = read_arene("c1ccccc1" + row.smiles.substr(1));
        if (refusal(read)) {
            ++unread;
            continue;
        }
        const Arene& ring = std::get<Arene>(read);
        for (const auto& reaction : tables().reactions) {
            const std::string where = row.id + ", " + reaction.id;
            try {
                const auto answer = ask(ring.smiles, reaction.id, {{}, {}, few});
                if (refusal(answer)) {
                    ++refused;
                    EXPECT_FALSE(refusal(answer)->reason.empty()) << where;
                    EXPECT_FALSE(refusal(answer)->where.empty()) << where;
                    continue;
                }
                ++answers;
                expect_sound(ring, std::get<StepAnswer>(answer), where);
                expect_mirrored(ring, sites(ring, reaction.new_group), where);
            } catch (const std::exception& error) {
                ADD_FAILURE() << where << ": " << error.what();
            }
        }
    }
    RecordProperty("answers", answers);
    RecordProperty("refused", refused);
    EXPECT_GE(groups, 100);
    EXPECT_LE(unread, 2) << "phthalimide, whose own ring is bridged, and what exists in acid only";
    const auto asked = static_cast<int>(tables().reactions.size()) * (groups - unread);
    EXPECT_EQ(answers + refused, asked);
    EXPECT_GT(answers, asked / 3);
    EXPECT_GT(refused, asked / 20);
}

TEST(Identities, TwoGroupsOnARing) {
    int refused = 0, answers = 0;
    for (const auto& one : grid_groups())
        for (const auto& other : grid_groups())
            for (int apart = 1; apart <= 3; ++apart) {
                if (other < one)
                    continue;
                const auto smiles = ring_with(one, other, apart);
                for (const auto& id : grid_reactions()) {
                    const auto answer = ask(smiles, id, {{}, {}, few});
                    refusal(answer) ? ++refused : ++answers;
                    if (!refusal(answer))
                        expect_sound(arene(smiles), std::get<StepAnswer>(answer), smiles + ", " + id);
                }
            }
    RecordProperty("answers", answers);
    RecordProperty("refused", refused);
    EXPECT_GT(answers, 1000);
    EXPECT_GT(refused, 100);
}

TEST(Identities, SameBytesInWhateverOrderTheAtomsStand) {
    int compared = 0;
    unsigned seed = 1;
    for (const auto& one : grid_groups())
        for (int apart = 1; apart <= 3; ++apart) {
            const auto smiles = ring_with(one, grid_groups()[seed % grid_groups().size()], apart);
            const std::unique_ptr<RDKit::ROMol> mol(RDKit::SmilesToMol(smiles));
            for (const auto& id : grid_reactions()) {
                const auto answer = ask(smiles, id, {{}, {}, few});
                const auto text = refusal(answer)
                                      ? refusal(answer)->reason
                                      : step_json(tables(), std::get<StepAnswer>(answer), few, -1);
                for (const auto& shuffled : RDKit::MolToRandomSmilesVect(*mol, 2, ++seed)) {
                    const auto again = ask(shuffled, id, {{}, {}, few});
                    const auto other = refusal(again)
                                           ? refusal(again)->reason
                                           : step_json(tables(), std::get<StepAnswer>(again), few, -1);
                    EXPECT_TRUE(other == text) << shuffled << ", " << id;
                    ++compared;
                }
            }
        }
    EXPECT_GT(compared, 500);
}

TEST(Identities, RingsMayBeTurnedAndMirrored) {
    // The twelve operations of a regular hexagon leave the factor of a position as it is.
    for (const auto& id : grid_reactions()) {
        const Conditions conditions = answered(choose_conditions(tables(), reaction(id), {}, {}), id);
        const auto& family = model(reaction_row(id).family);
        const std::array<std::vector<std::string>, 3> rings{{{"Me", "", "NO2", "", "Cl", ""},
                                                             {"OMe", "Me", "", "", "COMe", ""},
                                                             {"CF3", "", "", "NHAc", "", ""}}};
        for (const auto& ids : rings)
            for (int position = 0; position < 6; ++position) {
                if (!ids[static_cast<std::size_t>(position)].empty())
                    continue;
                std::vector<PlacedSite> images;
                for (int turn = 0; turn < 6; ++turn)
                    for (const int way : {1, -1}) {
                        PlacedSite site;
                        const auto moved = [&](int p) { return ((way * p + turn) % 6 + 6) % 6; };
                        for (int p = 0; p < 6; ++p) {
                            const auto& name = ids[static_cast<std::size_t>(p)];
                            site.groups[static_cast<std::size_t>(moved(p))] = name.empty() ? -1 : group(name);
                        }
                        site.position = moved(position);
                        images.push_back(site);
                    }
                const auto found = site_factors(family, conditions, "a ring of its own", images, true);
                ASSERT_THAT(found.mean, SizeIs(12));
                for (std::size_t i = 1; i < 12; ++i) {
                    EXPECT_NEAR(found.mean[i], found.mean[0], 1e-10) << id;
                    EXPECT_NEAR(found.covariance[i * 12 + i], found.covariance[0], 1e-10) << id;
                    EXPECT_NEAR(found.covariance[i], found.covariance[0], 1e-10)
                        << "one and the same position";
                }
            }
    }
}

TEST(Identities, EquivalentPositionsAreOneProduct) {
    for (const auto& id : grid_groups()) {
        if (id == "Ph" || id == "NO2")
            continue;  // terphenyls have outer rings, trinitrobenzene is declined
        const std::string branch = "(" + smiles_of_group(id).substr(1) + ")";
        const auto para = sites(arene("c1" + branch + "ccc" + branch + "cc1"), "*Br");
        ASSERT_THAT(para, SizeIs(1)) << id;
        EXPECT_EQ(para[0].multiplicity, 4) << id;
        const auto three = sites(arene("c1" + branch + "cc" + branch + "cc" + branch + "c1"), "*Br");
        ASSERT_THAT(three, SizeIs(1)) << id;
        EXPECT_EQ(three[0].multiplicity, 3) << id;
    }
}

TEST(Identities, NoCorrelationBeyondOne) {
    for (const auto& id : grid_reactions())
        for (const auto& one : grid_groups()) {
            const Arene read = arene(ring_with(one, "Me", 2));
            const Conditions conditions = answered(choose_conditions(tables(), reaction(id), {}, {}), id);
            const auto found =
                site_factors(model(reaction_row(id).family), conditions, read.smiles,
                             placed_sites(read, sites(read, reaction_row(id).new_group)), false);
            const auto n = found.mean.size();
            for (std::size_t i = 0; i < n; ++i) {
                EXPECT_GT(found.covariance[i * n + i], 0) << read.smiles;
                for (std::size_t j = 0; j < i; ++j) {
                    EXPECT_NEAR(found.covariance[i * n + j], found.covariance[j * n + i], 1e-10)
                        << read.smiles;
                    EXPECT_LE(std::abs(found.covariance[i * n + j]),
                              std::sqrt(found.covariance[i * n + i] * found.covariance[j * n + j]) + 1e-10)
                        << read.smiles;
                }
            }
        }
}

}  // namespace
}  // namespace isotally
