// Answers that a process chemist has read one by one (verdicts.csv): each figure must still hold within the
// tolerance that stands beside it, and what was refused must be refused. A row with an empty product is a
// refusal.
#include <gtest/gtest.h>

#include <charconv>
#include <cmath>
#include <fstream>
#include <iterator>
#include <map>
#include <optional>
#include <set>
#include <string>

#include "named.hpp"
#include "tables/csv_table.hpp"

namespace isotally {
namespace {

struct Verdict {
    std::size_t line = 0;
    std::string molecule, reaction, product, verdict, reason;
    std::optional<double> temperature_C, acid_percent, percent, tolerance;
};

std::optional<double> number(const std::string& text, const std::string& where) {
    if (text.empty())
        return {};
    double value = std::numeric_limits<double>::quiet_NaN();
    const auto [end, problem] = std::from_chars(text.data(), text.data() + text.size(), value);
    EXPECT_TRUE(problem == std::errc() && end == text.data() + text.size() && std::isfinite(value))
        << where << ": \"" << text << "\" is not a number";
    return value;
}

const std::vector<Verdict>& verdicts() {
    static const std::vector<Verdict> all = [] {
        const std::string file = ISOTALLY_SOURCE_DIR "/tests/published/verdicts.csv";
        std::ifstream in(file, std::ios::binary);
        EXPECT_TRUE(in) << file << " can't be read";
        const std::string text((std::istreambuf_iterator<char>(in)), {});
        FaultList faults;
        const auto table = read_csv("verdicts.csv", text, faults);
        EXPECT_TRUE(table.complete) << "a row of verdicts.csv is broken";
        std::map<std::string, std::size_t> column;
        for (std::size_t i = 0; i < table.header.size(); ++i)
            column[table.header[i]] = i;
        std::vector<Verdict> rows;
        for (const auto& row : table.rows) {
            const std::string where = "verdicts.csv:" + std::to_string(row.line);
            const auto field = [&](const char* name) {
                const auto found = column.find(name);
                EXPECT_NE(found, column.end()) << "no column " << name;
                return found == column.end() ? std::string() : row.fields.at(found->second);
            };
            rows.push_back({row.line, field("molecule"), field("reaction"), field("product"),
                            field("verdict"), field("reason"), number(field("temperature_C"), where),
                            number(field("acid_percent"), where), number(field("percent"), where),
                            number(field("tolerance"), where)});
        }
        return rows;
    }();
    return all;
}

TEST(Verdicts, TwentyMoleculesOverSixReactions) {
    std::set<std::string> molecules, reactions;
    for (const auto& row : verdicts()) {
        molecules.insert(canonical_smiles(named(row.molecule), row.molecule));
        reactions.insert(row.reaction);
        EXPECT_FALSE(row.verdict.empty()) << "verdicts.csv:" << row.line;
        EXPECT_FALSE(row.reason.empty()) << "verdicts.csv:" << row.line;
    }
    EXPECT_GE(verdicts().size(), 20u);
    EXPECT_GE(molecules.size(), 20u);
    EXPECT_GE(reactions.size(), 6u);
}

TEST(Verdicts, EveryFigureHolds) {
    for (const auto& row : verdicts()) {
        const std::string where =
            "verdicts.csv:" + std::to_string(row.line) + ", " + row.molecule + ", " + row.reaction;
        ASSERT_GE(find_reaction(tables(), row.reaction), 0) << where;
        const auto answer = ask(named(row.molecule), row.reaction, at(row.temperature_C, row.acid_percent));
        if (row.product.empty()) {
            EXPECT_FALSE(row.percent.has_value()) << where << ": a percentage of no product";
            EXPECT_NE(refusal(answer), nullptr) << where << " was answered";
            continue;
        }
        ASSERT_TRUE(row.percent && row.tolerance) << where << ": percent and tolerance expected";
        EXPECT_GT(*row.tolerance, 0) << where;
        EXPECT_LE(*row.tolerance, 15) << where << ": so wide a tolerance checks nothing";
        if (const auto* refused = refusal(answer)) {
            ADD_FAILURE() << where << " was refused: " << refused->reason;
            continue;
        }
        const auto share = share_of(std::get<StepAnswer>(answer), named(row.product));
        EXPECT_NEAR(share.value, *row.percent, *row.tolerance) << where << ", " << row.product;
    }
}

}  // namespace
}  // namespace isotally
