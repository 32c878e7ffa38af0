// Lists: order, resuming, memory, any number of threads, and the program as a filter among others.
#include <cstdlib>
#include <fstream>
#include <nlohmann/json.hpp>
#include <sstream>
#include <thread>

#include "cli/expect.hpp"

namespace isotally {
namespace {

using namespace cli_test;
using Json = nlohmann::json;

/// Some hundred different lines: answers, refusals and faults.
std::string many_lines() {
    std::string text;
    const std::vector<std::string> groups{"C",  "CC",    "C(C)C",   "F",       "Cl",      "Br",
                                          "OC", "N(C)C", "C(=O)OC", "NC(=O)C", "C(F)(F)F"};
    for (const auto& one : groups)
        for (const auto& other : groups) {
            text += "c1ccc(" + one + ")cc1" + other + " " + one + " and " + other + "\n";
            text += "c1cc(" + one + ")ccc1" + other + "\n";
        }
    return text + "c1ccc2ccccc2c1 fused\nC1CC broken\n";
}

std::string shell(const std::string& command) {
    FILE* pipe = popen(("bash -c '" + command + "' 2>/dev/null").c_str(), "r");
    std::string out;
    char buffer[65536];
    while (const auto count = fread(buffer, 1, sizeof buffer, pipe))
        out.append(buffer, count);
    EXPECT_EQ(pclose(pipe), 0) << command;
    return out;
}

TEST(CliList, TheSameBytesOnAnyNumberOfThreads) {
    const auto input = many_lines();
    const auto alone = run(step("-", {"--threads", "1"}), {.input = input});
    EXPECT_EQ(alone.exit, 0);
    EXPECT_EQ(lines_of(alone.out).size(), lines_of(input).size());
    for (const std::string threads : {"2", "3", "8", "0"}) {
        const auto many = run(step("-", {"--threads", threads}), {.input = input});
        EXPECT_TRUE(many.out == alone.out) << threads << " threads";
        EXPECT_TRUE(many.err == alone.err) << threads << " threads";
    }
}

TEST(CliList, WhatHasBeenAnsweredIsSkipped) {
    const auto input = "\n" + many_lines();
    const auto all = lines_of(run(step("-"), {.input = input}).out);
    for (const std::size_t skip :
         {std::size_t{1}, std::size_t{100}, all.size() - 1, all.size(), all.size() + 5}) {
        const auto rest = lines_of(run(step("-", {"--skip", std::to_string(skip)}), {.input = input}).out);
        const auto from = static_cast<std::ptrdiff_t>(std::min(skip, all.size()));
        EXPECT_EQ(rest, Words(all.begin() + from, all.end())) << skip;
    }
    expect_failure(2, step("toluene", {"--skip", "1"}), "--skip");
    expect_failure(2, step("-", {"--threads", "2000"}), "--threads");
}

TEST(CliList, ALineKeepsItsName) {
    const auto lines = lines_of(run(step("-"), {.input = "  Cc1ccccc1\t drum 12, \"old\" \r\nC1CC x\n"}).out);
    ASSERT_EQ(lines.size(), 2u);
    EXPECT_EQ(Json::parse(lines[0])["label"], "drum 12, \"old\"");
    EXPECT_EQ(Json::parse(lines[1])["label"], "x");
}

TEST(CliList, ALineWithoutEnd) {
    const std::string endless(5'000'000, 'C');
    const auto got = run(step("-"), {.input = endless + "\nCc1ccccc1\n" + endless});
    const auto lines = lines_of(got.out);
    ASSERT_EQ(lines.size(), 3u);
    EXPECT_EQ(Json::parse(lines[0])["exit"], 3);
    EXPECT_EQ(Json::parse(lines[1])["format"], "isotally.step.1");
    EXPECT_EQ(Json::parse(lines[2])["exit"], 3);
    EXPECT_LT(got.err.size(), 1000u);
}

TEST(CliList, KilledAndResumedItGivesTheSameBytes) {
    const Folder folder;
    std::string input;
    for (int i = 0; i < 10; ++i)
        input += many_lines();
    const auto list = folder.write("list.smi", input), out = folder / "out.jsonl";
    const std::string program = ISOTALLY_PROGRAM " step - --reaction " + nitration + " --threads 2 ";
    const auto whole = shell(program + "< " + list);
    for (const char* after : {"0.15", "0.3", "0.6"}) {
        // complete lines are what counts; a line cut by the kill is thrown away
        shell("timeout -s KILL " + std::string(after) + " " + program + "< " + list + " > " + out + "; " +
              "n=$(wc -l < " + out + "); head -n $n " + out + " > " + out + ".kept; " + program +
              "--skip $n < " + list + " >> " + out + ".kept");
        std::ifstream kept(out + ".kept");
        const std::string both((std::istreambuf_iterator<char>(kept)), {});
        EXPECT_TRUE(both == whole) << "killed after " << after << " s";
    }
}

TEST(CliList, InterruptedItSaysWhereToGoOn) {
    const Folder folder;
    std::string input;
    for (int i = 0; i < 40; ++i)
        input += many_lines();
    const auto list = folder.write("list.smi", input);
    const auto said = shell("timeout --foreground -s INT 0.4 " ISOTALLY_PROGRAM " step - --reaction " +
                            nitration + " < " + list + " 2>" + (folder / "err") + " > " + (folder / "out") +
                            "; echo $?; wc -l < " + (folder / "out") + "; tail -n 1 " + (folder / "err"));
    const auto lines = lines_of(said);
    ASSERT_EQ(lines.size(), 3u) << said;
    EXPECT_EQ(lines[0], "124") << "timeout's word for it";
    EXPECT_THAT(lines[2], ::testing::HasSubstr("--skip " + lines[1]));
}

TEST(CliList, SplitOverGnuParallelItGivesTheSameBytes) {
    const Folder folder;
    const auto list = folder.write("list.smi", many_lines());
    const std::string program = ISOTALLY_PROGRAM " step - --reaction " + nitration + " --threads 1";
    const auto whole = shell(program + " < " + list);
    const auto split = shell("parallel --will-cite --pipe --keep-order -N 20 -j 2 " + program + " < " + list);
    EXPECT_TRUE(split == whole);
}

}  // namespace
}  // namespace isotally
