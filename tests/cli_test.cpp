// The program as a process: exit status, standard output and standard error, as the README promises them.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <nlohmann/json.hpp>
#include <string>
#include <vector>

#include "cli/expect.hpp"
#include "cli/molfiles.hpp"
#include "cli/process.hpp"

namespace isotally::cli_test {
namespace {

using Json = nlohmann::json;
using ::testing::AllOf;
using ::testing::ContainsRegex;
using ::testing::HasSubstr;
using ::testing::Not;
using ::testing::StartsWith;

// Molecules

TEST(CliMolecule, BrokenSmiles) {
    expect_failure(3, step("Cc1ccccc"), "SMILES character 3");
    expect_failure(3, step("C(c1ccccc1"), "SMILES character 2");
    for (const char* broken : {"c1ccccc1)", "[", "[C", "Cc1ccccc1[", "C%", "c1cccc1", "F(Cl)(Br)(I)(C)C",
                               "Cc1ccccc1.", "((((", "1", "="})
        expect_failure(3, step(broken));
}

TEST(CliMolecule, BytesOutsideAscii) {
    expect_failure(3,
                   step("Cc1ccccc1\xE2\x80\x93"
                        "C"),
                   "SMILES character 10");
    for (const char* bytes :
         {"\xFF\xFE", "Cc1ccccc1\xE9", "\xCE\xB1", "Cc1ccccc1\n", "Cc1ccccc1\tC", "Cc1ccc\x1B[31mcc1"})
        EXPECT_THAT(expect_failure(3, step(bytes)).err, Not(HasSubstr("\x1B")))
            << "no control character is echoed";
}

TEST(CliMolecule, NothingThere) {
    expect_failure(3, step(""), "empty");
    expect_failure(3, step(" "));
    expect_failure(2, {"step", "--reaction", nitration}, "molecule");
}

TEST(CliMolecule, AThousandAndAHundredThousandCharacters) {
    for (const std::size_t length : {1000u, 100000u})
        for (const char* part : {"C", "(", "C(", "[", "C1", "c1ccccc1", ".", "a", " ", "%"}) {
            std::string text;
            while (text.size() < length)
                text += part;
            expect_failure(3, step(text.substr(0, length)));
        }
    expect_failure(3, step(std::string(1001, 'C') + "c1ccccc1"), "at most 1000");
    expect_failure(3, step(std::string(400, 'C') + "c1ccccc1"), "at most 300");
}

TEST(CliMolecule, UnknownNamesWithAHint) {
    expect_failure(3, step("toluen"), "\"toluene\"");
    expect_failure(3, step("anisol"), "\"anisole\"");
    expect_failure(3, step("acetanilid"), "\"acetanilide\"");
    expect_failure(3, step("qwertyuiop"), "neither a known name nor a SMILES");
}

TEST(CliMolecule, NamesWhateverTheCase) {
    const auto answer = expect_answer(step("Cc1ccccc1", {"--json"}));
    for (const char* name : {"toluene", "TOLUENE", "Toluene", "C1=CC=CC=C1C"})
        EXPECT_EQ(expect_answer(step(name, {"--json"})).out, answer.out) << name;
}

TEST(CliMolecule, RefusedWithTheReason) {
    expect_failure(1, step("c1ccc2ccccc2c1"), "naphthalene");
    expect_failure(1, step("CCO"), "no benzene ring");
    expect_failure(1, step("Cc1ccccc1.Clc1ccccc1"));
    expect_failure(1, step("[2H]c1ccccc1"), "isotope");
    expect_failure(1, step("Cc1c([N+](=O)[O-])cc([N+](=O)[O-])cc1[N+](=O)[O-]"), "more than two");
    expect_failure(1, step("nitrobenzene", {"--quiet"}, "acetylation-lewis-acid"), "people acylate");
}

TEST(CliMolecule, Molfiles) {
    const Folder folder;
    const auto answer = expect_answer(step("Cc1ccccc1", {"--json"}));
    for (const auto& text : {v2000, v3000, with_crlf(v2000), with_crlf(v3000)})
        EXPECT_EQ(expect_answer(step(folder.write("good.mol", text), {"--json"})).out, answer.out) << text;
}

TEST(CliMolecule, BrokenMolfiles) {
    const Folder folder;
    for (const auto& [fault, text] : broken_molfiles()) {
        SCOPED_TRACE(fault);
        expect_failure(3, step(folder.write("broken.mol", text)), folder / "broken.mol");
    }
}

TEST(CliMolecule, NoFileThere) {
    const Folder folder;
    std::filesystem::create_directory(folder / "folder.mol");
    expect_failure(3, step(folder / "folder.mol"), "folder.mol");
    expect_failure(3, step(folder / "missing.mol"), "missing.mol");
    expect_failure(3, step(".mol"), ".mol");
}

// Use

TEST(CliUse, UnknownWords) {
    expect_failure(2, {"stp", "toluene"}, "stp");
    expect_failure(2, {});
    expect_failure(2, {"step"});
    expect_failure(2, step("toluene", {"--raction"}), "--raction");
    expect_failure(2, {"--raction"}, "--raction");
    expect_failure(2, step("toluene", {"xylene"}), "xylene");
    expect_failure(2, step("toluene", {}, "nitration-mixed-acids"), "nitration-mixed-acid)");
    expect_failure(2, step("toluene", {}, "nitrating"), "nitrating");
    expect_failure(2, {"step", "toluene", "--reaction"}, "--reaction");
    expect_failure(2, {"tables", "substances"}, "substances");
    expect_failure(2, {"tables", "substituents", "NO3"}, "did you mean");
}

TEST(CliUse, WithoutAReactionThoseThatGoAreListed) {
    const auto got = run({"step", "nitrobenzene"});
    EXPECT_EQ(got.exit, 2);
    EXPECT_EQ(got.out, "");
    EXPECT_THAT(got.err, AllOf(StartsWith("isotally: "), HasSubstr("nitration-strong-acid"),
                               HasSubstr("1,3-dinitrobenzene"), Not(HasSubstr("acetylation-lewis-acid"))));
    for (std::size_t i = 1; i < lines_of(got.err).size(); ++i)
        EXPECT_THAT(lines_of(got.err)[i], ContainsRegex("^ +[a-z-]+ +[0-9]+ % "));
}

TEST(CliUse, NumbersThatAreNone) {
    for (const char* value : {"nan", "inf", "-inf", "1e400", "30C", "30,5", "", "thirty"})
        expect_failure(2, step("toluene", {"--temperature", value}), "--temperature");
    for (const char* value : {"nan", "inf", "", "eighty"})
        expect_failure(2, step("toluene", {"--acid-percent", value}), "--acid-percent");
    for (const char* value : {"0", "1", "90", "-0.5", "nan", "inf", "x"})
        expect_failure(2, step("toluene", {"--level", value}), "--level");
    for (const char* value : {"0", "-5", "1.5", "1e3", "nan", "1000000000000", "99999999999999999999999"})
        expect_failure(2, step("toluene", {"--draws", value}), "--draws");
    for (const char* value : {"-1", "1.5", "x", "99999999999999999999999"})
        expect_failure(2, step("toluene", {"--seed", value}), "--seed");
}

TEST(CliUse, ConditionsOutsideWhatIsKnown) {
    expect_failure(1, step("toluene", {"--temperature", "500"}), "0 to 90 C");
    expect_failure(1, step("toluene", {"--temperature", "-300"}));
    expect_failure(1, step("toluene", {"--acid-percent", "60"}), "nitration-dilute-acid");
    expect_failure(1, step("toluene", {"--acid-percent", "150"}));
    expect_failure(1, step("toluene", {"--temperature", "250"}, "sulfonation-sulfuric-acid"));
    expect_failure(2, step("toluene", {"--acid-percent", "80"}, "bromination-lewis-acid"), "--acid-percent");
}

std::string tail_of(const std::string& text) {
    return text.substr(text.size() - std::min<std::size_t>(text.size(), 40));
}

TEST(CliUse, FailuresInJson) {
    const Folder folder;
    struct Case {
        Words words;
        int exit;
        const char* kind;
    };
    const std::vector<Case> cases = {
        {step("nitrobenzene", {"--json"}, "acetylation-lewis-acid"), 1, "refused"},
        {step("nitrobenzene", {"--json", "--quiet"}, "acetylation-lewis-acid"), 1, "refused"},
        {step("toluene", {"--json"}, "nitrating"), 2, "usage"},
        {step("toluene", {"--json", "--draws", "0"}), 2, "usage"},
        {step("toluene", {"--json", "--temperature", "nan"}), 2, "usage"},
        {step("toluene", {"--json", "--csv"}), 2, "usage"},
        {{"step", "toluene", "--json"}, 2, "usage"},
        {{"stp", "--json"}, 2, "usage"},
        {step("Cc1ccccc", {"--json"}), 3, "input"},
        {step("Cc1ccccc1\xE9", {"--json"}), 3, "input"},
        {step(folder / "missing.mol", {"--json"}), 3, "input"},
        {step("toluene", {"--json", "--tables", folder / "missing"}), 4, "tables"},
    };
    for (const auto& [words, exit, kind] : cases) {
        const auto got = run(words);
        EXPECT_EQ(got.exit, exit) << shown(words);
        const auto document = Json::parse(got.out, nullptr, false);
        EXPECT_TRUE(document.is_object()) << shown(words) << ": no document on standard output: " << got.out;
        if (!document.is_object())
            continue;
        EXPECT_EQ(document.value("format", ""), "isotally.error.1") << shown(words);
        EXPECT_EQ(document.value("exit", -1), exit) << shown(words);
        EXPECT_EQ(document.value("kind", ""), kind) << shown(words);
        EXPECT_NE(document.value("where", ""), "") << shown(words);
        EXPECT_NE(document.value("message", ""), "") << shown(words);
        EXPECT_THAT(got.err, StartsWith("isotally: ")) << shown(words);
        EXPECT_THAT(got.err, HasSubstr(tail_of(document.value("message", "")))) << shown(words);
    }
}

TEST(CliUse, HelpAndVersion) {
    for (const Words& words : {Words{"--help"}, Words{"-h"}, Words{"step", "--help"}}) {
        const auto help = expect_answer(words).out;
        EXPECT_THAT(help, HasSubstr("Quote every SMILES")) << shown(words);
        for (std::size_t at = help.find("c1cccc"); at != std::string::npos;
             at = help.find("c1cccc", at + 1)) {
            const auto start = help.find_last_of(" \n(", at) + 1;
            EXPECT_EQ(help[start], '\'') << shown(words) << ": " << help.substr(start, 30);
        }
    }
    EXPECT_THAT(expect_answer({"step", "--help"}).out, HasSubstr("'Cc1ccccc1'"));
    EXPECT_THAT(expect_answer({"--help"}).out, AllOf(HasSubstr("step"), HasSubstr("tables")));
    const auto version = expect_answer({"--version"}).out;
    EXPECT_THAT(version, ContainsRegex("^isotally [0-9]+\\.[0-9]+\\.[0-9]+.* sha256:[0-9a-f]+\n$"));
    const auto answer = Json::parse(expect_answer(step("toluene", {"--json"})).out);
    const std::string digest = answer["tables"]["digest"];
    EXPECT_EQ(digest.size(), 7u + 64u);
    EXPECT_THAT(version, HasSubstr(digest));
}

// Answers

TEST(CliAnswer, OneStep) {
    const auto text = expect_answer(step("toluene")).out;
    EXPECT_THAT(text, StartsWith("toluene, nitration in mixed acid, 30 C, 80 % sulfuric acid: defaults\n"));
    EXPECT_THAT(text, HasSubstr("ortho:para ratio"));
    const auto json = Json::parse(expect_answer(step("toluene", {"--json"})).out);
    EXPECT_EQ(json["format"], "isotally.step.1");
    double sum = 0, before = 100;
    for (const auto& site : json["sites"]) {
        sum += site["percent"].get<double>();
        EXPECT_LE(site["percent"], before);
        EXPECT_LE(site["percent_low"], site["percent"]);
        EXPECT_GE(site["percent_high"], site["percent"]);
        before = site["percent"];
    }
    EXPECT_NEAR(sum, 100, 1e-8);
    const auto csv = lines_of(expect_answer(step("toluene", {"--csv"})).out);
    EXPECT_EQ(csv.size(), 1 + json["sites"].size());
}

TEST(CliAnswer, SameBytesWhateverTheEnvironment) {
    for (const Words& options : {Words{}, Words{"--json"}, Words{"--csv"}}) {
        const auto words = step("COc1ccccc1", options);
        const auto answer = expect_answer(words).out;
        EXPECT_EQ(expect_answer(words).out, answer) << "twice";
        for (const char* locale :
             {"C", "POSIX", "C.UTF-8", "de_DE.UTF-8", "tr_TR.UTF-8", "fa_IR", "nonsense"})
            EXPECT_EQ(expect_answer(words, {.environment = {{"LC_ALL", locale}, {"LANG", locale}}}).out,
                      answer)
                << locale;
        for (const char* zone : {"UTC", "Asia/Kolkata", "Pacific/Kiritimati", "nonsense"})
            EXPECT_EQ(expect_answer(words, {.environment = {{"TZ", zone}}}).out, answer) << zone;
        EXPECT_EQ(
            expect_answer(words, {.environment = {{"NO_COLOR", "1"}, {"TERM", "dumb"}, {"COLUMNS", "20"}}})
                .out,
            answer);
    }
    EXPECT_NE(expect_answer(step("anisole", {"--json"})).out,
              expect_answer(step("anisole", {"--json", "--seed", "2"})).out);
}

TEST(CliList, AnswersInOrder) {
    const std::string input = "\xEF\xBB\xBF"
                              "Cc1ccccc1 from the store room\r\n"
                              "\n"
                              "c1ccc2ccccc2c1\tfused\n"
                              "Cc1ccccc broken\n"
                              "Cc1ccccc1\xE2\x80\x93\n" +
                              std::string("C\0C\n", 4) + std::string(100000, 'C') +
                              "\n   \r\n"
                              "Clc1ccccc1";
    const auto got = run(step("-"), {.input = input});
    EXPECT_EQ(got.exit, 0);
    const auto lines = lines_of(got.out);
    const std::vector<int> exits = {0, 1, 3, 3, 3, 3, 0};
    ASSERT_EQ(lines.size(), exits.size()) << got.out;
    std::size_t failed = 0;
    for (std::size_t i = 0; i < lines.size(); ++i) {
        const auto document = Json::parse(lines[i], nullptr, false);
        ASSERT_TRUE(document.is_object()) << lines[i];
        EXPECT_EQ(document["format"], std::string(exits[i] ? "isotally.error.1" : "isotally.step.1"))
            << lines[i].substr(0, 300);
        if (exits[i] == 0)
            continue;
        EXPECT_EQ(document["exit"], exits[i]) << lines[i];
        EXPECT_THAT(document["message"].get<std::string>(), Not(HasSubstr("\n")));
        EXPECT_GT(document["message"].get<std::string>().size(), 15u) << lines[i];
        ++failed;
    }
    EXPECT_EQ(Json::parse(lines.front())["substrate"]["smiles"], "Cc1ccccc1");
    EXPECT_EQ(Json::parse(lines.back())["substrate"]["smiles"], "Clc1ccccc1");
    EXPECT_EQ(lines_of(got.err).size(), failed) << "each sentence on standard error as well:\n" << got.err;
}

TEST(CliList, EachLineAsIfAskedAlone) {
    const auto lines = lines_of(expect_answer(step("-"), {.input = "Clc1ccccc1\nCc1ccccc1\n"}).out);
    ASSERT_EQ(lines.size(), 2u);
    EXPECT_EQ(Json::parse(lines[1]), Json::parse(expect_answer(step("Cc1ccccc1", {"--json"})).out));
}

TEST(CliList, WrongUse) {
    expect_failure(2, {"step", "-"}, "--reaction", {.input = "Cc1ccccc1\n"});
    expect_failure(2, step("-", {"--csv"}), "--csv", {.input = "Cc1ccccc1\n"});
    expect_failure(2, step("-", {"--temperature", "nan"}), "--temperature", {.input = "Cc1ccccc1\n"});
    const auto nothing = run(step("-"), {.input = ""});
    EXPECT_EQ(nothing.exit, 0);
    EXPECT_EQ(nothing.out + nothing.err, "");
}

// Where the output goes

TEST(CliOutput, AReaderThatGoesAway) {
    std::string input;
    for (int i = 0; i < 60; ++i)
        input += "Cc1ccccc1\n";
    for (const bool ignored : {false, true}) {
        const auto got = run(step("-"), {.input = input, .reader_leaves = true, .ignore_sigpipe = ignored});
        EXPECT_TRUE(got.in_time);
        EXPECT_EQ(got.err, "") << (ignored ? "SIGPIPE ignored by the parent" : "");
    }
}

TEST(CliOutput, ADeviceThatIsFull) {
    const Setting full{.out_file = "/dev/full"};
    for (const Words& words :
         {step("toluene"), step("toluene", {"--json"}), step("toluene", {"--csv"}), Words{"--version"},
          Words{"--help"}, Words{"tables"}, Words{"tables", "sources", "--json"}})
        expect_failure(5, words, "standard output", full);
    Setting list = full;
    list.input = "Cc1ccccc1\n";
    expect_failure(5, step("-"), "standard output", list);
}

// Tables

TEST(CliTables, FaultyFolders) {
    const Folder folder;
    expect_failure(4, step("toluene", {"--tables", folder / "missing"}), "missing");
    std::filesystem::create_directory(folder / "empty");
    expect_failure(4, step("toluene", {"--tables", folder / "empty"}));
    const std::string copy = folder / "copy";
    ASSERT_EQ(run({"tables", "--export", copy}).exit, 0);
    const std::string constants = read_file(copy + "/constants.csv");
    auto lines = lines_of(constants);
    auto& row = lines.at(2);
    auto start = row.find(',');
    start = row.find(',', row.find(',', start + 1) + 1) + 1;
    row.replace(start, row.find(',', start) - start, "much");
    std::string text;
    for (const auto& line : lines)
        text += line + "\n";
    folder.write("copy/constants.csv", text);
    const auto got = expect_failure(4, step("toluene", {"--tables", copy}), "constants.csv:3:value");
    EXPECT_THAT(got.err, HasSubstr("much"));
    folder.write("copy/constants.csv", constants.substr(0, constants.size() / 2));
    expect_failure(4, step("toluene", {"--tables", copy}), "constants.csv:");
    std::filesystem::remove(copy + "/constants.csv");
    expect_failure(4, step("toluene", {"--tables", copy}), "constants.csv");
}

TEST(CliTables, AnExportGivesTheSameBytes) {
    const Folder folder;
    const std::string copy = folder / "copy";
    ASSERT_EQ(run({"tables", "--export", copy}).exit, 0);
    for (const char* reaction :
         {"nitration-mixed-acid", "bromination-lewis-acid", "sulfonation-sulfuric-acid"})
        for (const char* molecule : {"toluene", "CC(=O)Nc1ccccc1", "COc1ccc(Cl)cc1"})
            for (const char* form : {"--json", "--csv"}) {
                const auto built_in = run(step(molecule, {form}, reaction));
                const auto exported = run(step(molecule, {form, "--tables", copy}, reaction));
                EXPECT_EQ(built_in.exit, exported.exit) << molecule << ", " << reaction;
                EXPECT_EQ(built_in.out, exported.out) << molecule << ", " << reaction;
                EXPECT_EQ(built_in.err, exported.err) << molecule << ", " << reaction;
            }
    const auto list = run(step("-", {"--tables", copy}), {.input = "Cc1ccccc1\nClc1ccccc1\n"});
    EXPECT_EQ(list.out, run(step("-"), {.input = "Cc1ccccc1\nClc1ccccc1\n"}).out);
}

}  // namespace
}  // namespace isotally::cli_test
