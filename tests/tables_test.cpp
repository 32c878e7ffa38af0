#include "isotally/tables.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <filesystem>
#include <fstream>
#include <functional>
#include <iterator>
#include <nlohmann/json.hpp>

#include "tables/citation.hpp"
#include "tables/columns.hpp"
#include "tables/digest.hpp"
#include "tables/folder.hpp"
#include "tables/plain_text.hpp"
#include "tables_sample.hpp"

namespace isotally {
namespace {

using testing::ElementsAre;
using testing::HasSubstr;
using testing::IsEmpty;
using testing::SizeIs;

TEST(Tables, SampleIsWithoutFault) {
    EXPECT_THAT(lint_tables(sample_files()), IsEmpty());
}

TEST(Tables, ReadsEveryField) {
    const Tables tables = parse_tables(sample_files());
    EXPECT_EQ(tables.version, "7");
    ASSERT_THAT(tables.substituents, SizeIs(3));
    const Substituent& nitro = tables.substituents[static_cast<std::size_t>(find_substituent(tables, "NO2"))];
    EXPECT_EQ(nitro.smiles, "*[N+](=O)[O-]");
    EXPECT_EQ(nitro.prefix, "nitro");
    EXPECT_DOUBLE_EQ(nitro.constants.at("sigma_m").value, 0.71);
    EXPECT_DOUBLE_EQ(nitro.constants.at("sigma_m").sd, 0.02);
    EXPECT_EQ(nitro.constants.at("sigma_m").from.source, "hansch");
    const Substituent& ester = tables.substituents[2];
    EXPECT_EQ(ester.smarts, "[#0]C(=O)O[#6]");
    EXPECT_EQ(ester.rank, 40);
    EXPECT_EQ(ester.like, "NO2");
    EXPECT_THAT(ester.constants, IsEmpty()) << "like is resolved elsewhere";
    EXPECT_THAT(tables.constants, SizeIs(3));

    ASSERT_THAT(tables.reactions, SizeIs(2));
    const Reaction& mixed = tables.reactions[static_cast<std::size_t>(find_reaction(tables, "nitration-x"))];
    EXPECT_TRUE(mixed.has_acid);
    EXPECT_EQ(mixed.instead, "chlorinate");
    EXPECT_EQ(tables.reactions[1].note, "slow");
    EXPECT_DOUBLE_EQ(mixed.figures.at("temperature_default_C").value, 30);
    EXPECT_TRUE(std::isnan(mixed.figures.at("temperature_default_C").sd));
    EXPECT_EQ(find_reaction(tables, "nitration-y"), -1);
    EXPECT_EQ(find_substituent(tables, ""), -1);

    ASSERT_THAT(tables.states, SizeIs(1));
    EXPECT_EQ(tables.states[0].group, "kind:acceptor");
    EXPECT_DOUBLE_EQ(tables.states[0].acid_to, 90);
    EXPECT_THAT(tables.bans[0].reactions, ElementsAre("nitration", "chlorination-x"));
    EXPECT_EQ(tables.bans[0].reason, "goes off, \"with a bang\"\nand smoke");
    EXPECT_EQ(tables.cautions[0].severity, 90);

    ASSERT_THAT(tables.measurements, SizeIs(2));
    const Measurement& toluene = tables.measurements[0];
    EXPECT_DOUBLE_EQ(*toluene.temperature_C, -30);
    EXPECT_FALSE(toluene.acid_percent);
    ASSERT_THAT(toluene.products, SizeIs(3));
    EXPECT_DOUBLE_EQ(toluene.products[1].percent, 2.7);
    EXPECT_DOUBLE_EQ(*toluene.products[0].sd, 1.5);
    EXPECT_FALSE(toluene.products[1].sd);
    EXPECT_TRUE(toluene.complete);
    EXPECT_FALSE(tables.measurements[1].complete);

    ASSERT_THAT(tables.rates, SizeIs(2));
    EXPECT_EQ(tables.rates[0].relation, "para");
    EXPECT_DOUBLE_EQ(tables.rates[0].value, 60);
    EXPECT_EQ(tables.rates[1].relation, "");
    EXPECT_TRUE(tables.names[0].preferred);
    EXPECT_EQ(tables.sources[0].citation, "Hansch, Leo & Taft, Chem. Rev. 1991, 91, 165");
    EXPECT_EQ(nlohmann::json::parse(tables.sources[0].json)["DOI"], "10.1021/cr00002a004");
}

TEST(Tables, ModelFigureOfFamilyThenOfAll) {
    const Tables tables = parse_tables(sample_files());
    EXPECT_DOUBLE_EQ(model_figure(tables, "nitration", "rho").value, -6.2);
    EXPECT_DOUBLE_EQ(model_figure(tables, "chlorination", "rho").value, -8);
    try {
        model_figure(tables, "nitration", "roh");
        FAIL();
    } catch (const Error& error) {
        EXPECT_EQ(error.kind, ErrorKind::tables);
        EXPECT_EQ(error.where, "model.csv");
        EXPECT_THAT(error.what(), HasSubstr("did you mean \"rho\""));
    }
}

TEST(Tables, ParseThrowsTheFirstFault) {
    std::vector<TableFile> files = sample_files();
    change(files, "constants.csv", "0.71", "0,71x");
    EXPECT_THROW(parse_tables(files), Error);
    change(files, "constants.csv", "0,71x", "abc");
    try {
        parse_tables(files);
        FAIL();
    } catch (const Error& error) {
        EXPECT_EQ(error.kind, ErrorKind::tables);
        EXPECT_EQ(error.where, "constants.csv:2:value");
        EXPECT_THAT(error.what(), HasSubstr("\"abc\" is not a number"));
    }
}

TEST(Tables, DigestAgainstPublishedValue) {
    // FIPS 180-4, example of one block: "abc".
    EXPECT_EQ(sha256_hex("abc"), "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
}

TEST(Tables, DigestIsThatOfCoreutils) {
    // printf abc > a; printf '' > b; LC_ALL=C sha256sum * | sha256sum  (GNU coreutils 9.1)
    const std::string expected = "sha256:09c7e0b8a02d027d95ec0375a600ed4ad4d6b26a1c93f16d9150cab5fec761a6";
    EXPECT_EQ(digest_of({{"a", "abc"}, {"b", ""}}), expected);
    EXPECT_EQ(digest_of({{"b", ""}, {"a", "abc"}}), expected) << "whatever the order";
    EXPECT_NE(digest_of({{"b", "abc"}, {"a", ""}}), expected);
    EXPECT_EQ(parse_tables(sample_files()).digest, digest_of(sample_files()));
}

TEST(Tables, NearestWord) {
    const std::vector<std::string> known{"nitration-mixed-acid", "nitration-dilute-acid", "meta", "para"};
    EXPECT_EQ(nearest_word("nitration-mixd-acid", known), "nitration-mixed-acid");
    EXPECT_EQ(nearest_word("NITRATION-DILUTE-ACID", known), "nitration-dilute-acid");
    EXPECT_EQ(nearest_word("mtea", known), "meta") << "neighbours swapped";
    EXPECT_EQ(nearest_word("nitration", known), "nitration-mixed-acid") << "the beginning of a word";
    EXPECT_EQ(nearest_word("mercuration", known), "");
    EXPECT_EQ(nearest_word("", known), "");
    EXPECT_EQ(nearest_word(std::string(100000, 'm'), known), "");
}

TEST(Tables, Citations) {
    EXPECT_EQ(citation_of(R"({"id": "a", "type": "article-journal", "author": [{"family": "Knowles"},
        {"family": "Norman"}, {"family": "Radda"}], "container-title": "J. Chem. Soc.",
        "issued": {"date-parts": [["1960"]]}, "page": "4885"})"),
              "Knowles, Norman & Radda, J. Chem. Soc. 1960, 4885");
    EXPECT_EQ(citation_of(R"({"type": "book", "author": [{"literal": "A"}, {"literal": "B"}, {"literal": "C"},
        {"literal": "D"}, {"literal": "E"}], "title": "T", "publisher": "P", "issued": {"literal": "1910"}})"),
              "A et al., T, P, 1910");
    EXPECT_EQ(citation_of(R"({"type": "webpage", "title": "T", "URL": "https://example.org/"})"),
              "T, https://example.org/");
    EXPECT_EQ(citation_of(R"({"type": "document", "note": "told\nby hand"})"), "told by hand");
    EXPECT_EQ(citation_of(R"({"type": "document"})"), "");
}

TEST(Tables, DatapackageSaysWhatTheReaderExpects) {
    const auto package = nlohmann::json::parse(datapackage_text("7"));
    std::size_t checked = 0;
    for (const auto& resource : package["resources"]) {
        std::vector<TableFile> files = sample_files();
        const std::string file = resource["path"];
        if (!file.ends_with(".csv"))
            continue;
        std::string header;
        for (const auto& field : resource["schema"]["fields"])
            header += (header.empty() ? "" : ",") + field["name"].get<std::string>();
        EXPECT_EQ(text_of(files, file).substr(0, header.size() + 1), header + "\n") << file;
        ++checked;
    }
    EXPECT_EQ(checked, 11u);
}

class TablesFolder : public testing::Test {
protected:
    void SetUp() override {
        folder = std::filesystem::path(testing::TempDir()) /
                 ("isotally_tables_" + std::to_string(testing::UnitTest::GetInstance()->random_seed()) + "_" +
                  testing::UnitTest::GetInstance()->current_test_info()->name());
        std::filesystem::remove_all(folder);
    }
    void TearDown() override { std::filesystem::remove_all(folder); }

    ErrorKind kind_of_failure(const std::function<void()>& action) {
        try {
            action();
        } catch (const Error& error) {
            EXPECT_FALSE(error.where.empty());
            return error.kind;
        }
        ADD_FAILURE() << "no error";
        return ErrorKind::defect;
    }

    std::filesystem::path folder;
};

TEST_F(TablesFolder, ExportReadBackIsTheSameBytes) {
    std::vector<TableFile> files = sample_files();
    text_of(files, "README.md") = std::string("\r\n\0\xFF", 4);
    write_table_folder(files, (folder / "deep" / "er").string());
    const std::vector<TableFile> read = read_table_folder((folder / "deep" / "er").string());
    ASSERT_EQ(read.size(), files.size());
    for (std::size_t i = 0; i < files.size(); ++i) {
        EXPECT_EQ(read[i].name, files[i].name);
        EXPECT_EQ(read[i].text, files[i].text) << files[i].name;
    }
}

TEST_F(TablesFolder, ExportRefusesAFolderThatHoldsSomething) {
    std::filesystem::create_directories(folder);
    std::ofstream(folder / "mine") << "keep";
    EXPECT_EQ(kind_of_failure([&] { write_table_folder(sample_files(), folder.string()); }),
              ErrorKind::output);
    EXPECT_EQ(kind_of_failure([&] { write_table_folder(sample_files(), (folder / "mine").string()); }),
              ErrorKind::output);
    EXPECT_EQ(kind_of_failure([&] { write_table_folder(sample_files(), (folder / "mine" / "x").string()); }),
              ErrorKind::output);
    EXPECT_EQ(std::distance(std::filesystem::directory_iterator(folder), {}), 1);
}

TEST_F(TablesFolder, FoldersThatAreNotTables) {
    EXPECT_EQ(kind_of_failure([&] { read_table_folder(folder.string()); }), ErrorKind::tables);
    std::filesystem::create_directories(folder / "sub");
    EXPECT_EQ(kind_of_failure([&] { read_table_folder(folder.string()); }), ErrorKind::tables);
    std::filesystem::remove(folder / "sub");
    EXPECT_THAT(read_table_folder(folder.string()), IsEmpty());
    std::ofstream(folder / "file") << "x";
    EXPECT_EQ(kind_of_failure([&] { read_table_folder((folder / "file").string()); }), ErrorKind::tables);
}

TEST(Tables, RepositoryFolderIsWithoutFault) {
    const std::vector<TableFile> files = read_table_folder(ISOTALLY_SOURCE_DIR "/tables");
    for (const Fault& found : lint_tables(files))
        ADD_FAILURE() << found.where << ": " << found.message;
}

}  // namespace
}  // namespace isotally
