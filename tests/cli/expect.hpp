// What every answer and every failure of the program has in common.
#pragma once

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <sstream>
#include <string>
#include <vector>

#include "process.hpp"

namespace isotally::cli_test {

using Words = std::vector<std::string>;

inline const std::string nitration = "nitration-mixed-acid";

inline Words step(const std::string& molecule, const Words& options = {},
                  const std::string& reaction = nitration) {
    Words words{"step", molecule, "--reaction", reaction};
    words.insert(words.end(), options.begin(), options.end());
    return words;
}

inline Words lines_of(const std::string& text) {
    Words lines;
    std::istringstream in(text);
    for (std::string line; std::getline(in, line);)
        lines.push_back(line);
    return lines;
}

inline std::string shown(const Words& words) {
    std::string text;
    for (const auto& word : words)
        text += (text.empty() ? "" : " ") + (word.size() > 60 ? word.substr(0, 60) + "..." : word);
    return text;
}

/// A failure or refusal: the status, one sentence on standard error and nothing on standard output.
inline Finished expect_failure(int status, const Words& words, const std::string& says = "",
                               const Setting& setting = {}) {
    const auto got = run(words, setting);
    EXPECT_TRUE(got.in_time) << shown(words) << ": still running";
    EXPECT_EQ(got.exit, status) << shown(words) << ": " << got.err << (got.signal ? "ended by a signal" : "");
    EXPECT_TRUE(got.out.empty()) << shown(words) << ": standard output holds " << got.out.substr(0, 200);
    EXPECT_EQ(lines_of(got.err).size(), 1u) << shown(words) << ": " << got.err;
    EXPECT_THAT(got.err, ::testing::AllOf(::testing::StartsWith("isotally: "), ::testing::HasSubstr(says),
                                          ::testing::Not(::testing::HasSubstr("->"))))
        << shown(words);
    EXPECT_LT(got.err.size(), 600u) << shown(words);
    return got;
}

inline Finished expect_answer(const Words& words, const Setting& setting = {}) {
    auto got = run(words, setting);
    EXPECT_EQ(got.exit, 0) << shown(words) << ": " << got.err;
    EXPECT_EQ(got.err, "") << shown(words);
    EXPECT_NE(got.out, "") << shown(words);
    return got;
}

}  // namespace isotally::cli_test
