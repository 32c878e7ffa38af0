#include "isotally/built_in.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <filesystem>

#include "isotally/report.hpp"
#include "knowledge.hpp"
#include "packing.hpp"
#include "tables/folder.hpp"

namespace isotally {
namespace {

const std::string folder = ISOTALLY_SOURCE_DIR "/tables";

/// Every byte of the answers to some questions; refusals by their reason.
std::vector<std::string> answers(const Knowledge& by) {
    std::vector<std::string> out;
    for (const auto& row : by.tables.reactions) {
        const auto fitted = fit_family(by, row.family);
        const auto conditions =
            answered(choose_conditions(by.tables, find_reaction(by.tables, row.id), {}, {}), row.id);
        for (const auto* molecule : {"Cc1ccccc1", "COc1ccccc1", "O=[N+]([O-])c1ccccc1", "Nc1ccccc1",
                                     "Cc1ccc(Cl)cc1", "c1ccccc1-c1ccccc1", "CC(C)Oc1ccccc1"}) {
            const auto read = answered(parse_arene(by.tables, by.groups, molecule), molecule);
            const auto answer = answer_step(by, *fitted, read, conditions, {});
            out.push_back(refusal(answer) ? refusal(answer)->reason
                                          : step_json(by.tables, std::get<StepAnswer>(answer), {}, -1));
        }
    }
    return out;
}

void expect_same_files(const std::vector<TableFile>& one, const std::vector<TableFile>& other) {
    ASSERT_EQ(one.size(), other.size());
    for (std::size_t i = 0; i < one.size(); ++i) {
        EXPECT_EQ(one[i].name, other[i].name);
        EXPECT_TRUE(one[i].text == other[i].text) << one[i].name;
    }
}

TEST(BuiltIn, AnswersAreThoseOfTheFolder) {
    const auto from_folder = answers(knowledge());
    EXPECT_EQ(answers(built_in_knowledge()), from_folder);
    int answered_ones = 0;
    for (const auto& text : from_folder)
        answered_ones += text.starts_with("{");
    EXPECT_GT(answered_ones, 100);
}

TEST(BuiltIn, OtherTablesCanNotLiftWhatDeclinesEnergeticMolecules) {
    auto other = built_in_knowledge().tables;
    EXPECT_TRUE(missing_safety_rows(other).empty());
    const auto azide = std::find_if(other.bans.begin(), other.bans.end(),
                                    [](const Ban& ban) { return ban.id == "energetic-azide"; });
    ASSERT_NE(azide, other.bans.end());
    azide->smarts = "[Xe]";
    std::erase_if(other.bans, [](const Ban& ban) { return ban.id == "energetic-peroxide"; });
    EXPECT_EQ(missing_safety_rows(other).size(), 2);
}

TEST(BuiltIn, FilesAreThoseOfTheFolder) {
    expect_same_files(built_in_files(), read_table_folder(folder));
    EXPECT_EQ(built_in_knowledge().tables.digest, parse_tables(built_in_files()).digest);
}

TEST(BuiltIn, ExportReadBackIsTheSame) {
    const std::string exported = testing::TempDir() + "isotally_built_in_export_" +
                                 std::to_string(testing::UnitTest::GetInstance()->random_seed());
    std::filesystem::remove_all(exported);
    write_table_folder(built_in_files(), exported);
    const auto read = read_table_folder(exported);
    std::filesystem::remove_all(exported);
    expect_same_files(read, built_in_files());
    EXPECT_EQ(parse_tables(read).digest, built_in_knowledge().tables.digest);
}

TEST(BuiltIn, PackingKeepsEverything) {
    const auto files = read_table_folder(folder);
    const std::string packed = pack(knowledge(), files);
    expect_same_files(unpack_files(packed), files);
    const auto unpacked = unpack_knowledge(packed);
    EXPECT_EQ(answers(unpacked), answers(knowledge()));
    EXPECT_TRUE(pack(unpacked, files).size() == packed.size());
    EXPECT_EQ(unpacked.observations.size(), knowledge().observations.size());
    EXPECT_EQ(unpacked.tables.sources.size(), tables().sources.size());
    EXPECT_EQ(unpacked.groups.exact, knowledge().groups.exact);
    EXPECT_EQ(unpacked.groups.generic, knowledge().groups.generic);
}

TEST(BuiltIn, CutPackIsAnError) {
    const std::string packed = pack(knowledge(), {});
    EXPECT_ANY_THROW(unpack_knowledge(std::string_view(packed).substr(0, packed.size() / 2)));
}

}  // namespace
}  // namespace isotally
