#include "isotally/report.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cctype>
#include <functional>
#include <nlohmann/json.hpp>
#include <regex>
#include <sstream>

#include "knowledge.hpp"
#include "report/numbers.hpp"

namespace isotally {
namespace {

using nlohmann::json;
using testing::AllOf;
using testing::Contains;
using testing::ElementsAre;
using testing::HasSubstr;
using testing::IsSupersetOf;
using testing::Not;

json json_of(const std::string& molecule, const std::string& id, int indent = -1, const Asked& asked = {}) {
    return json::parse(step_json(tables(), step(molecule, id, asked), asked.draws, indent));
}

std::vector<std::string> keys(const json& object) {
    std::vector<std::string> out;
    for (const auto& [key, value] : object.items())
        out.push_back(key);
    return out;
}

std::vector<std::string> lines(const std::string& text) {
    std::vector<std::string> out;
    std::istringstream in(text);
    for (std::string line; std::getline(in, line);)
        out.push_back(line);
    return out;
}

/// RFC 4180, as it stands there.
std::vector<std::vector<std::string>> parse_csv(const std::string& text) {
    std::vector<std::vector<std::string>> rows(1, {""});
    bool quoted = false;
    for (std::size_t i = 0; i < text.size(); ++i) {
        const char c = text[i];
        if (quoted && c == '"' && i + 1 < text.size() && text[i + 1] == '"')
            rows.back().back() += text[++i];
        else if (c == '"')
            quoted = !quoted;
        else if (quoted || (c != ',' && c != '\n'))
            rows.back().back() += c;
        else if (c == ',')
            rows.back().emplace_back();
        else
            rows.push_back({""});
    }
    EXPECT_FALSE(quoted);
    rows.pop_back();
    return rows;
}

int significant_digits(std::string number) {
    number = number.substr(0, number.find_first_of("eE"));
    std::string digits;
    for (const char c : number)
        if (std::isdigit(static_cast<unsigned char>(c)))
            digits += c;
    digits.erase(0, digits.find_first_not_of('0'));
    return static_cast<int>(digits.size());
}

void for_each_number(const json& value, const std::function<void(const json&)>& look) {
    if (value.is_structured())
        for (const auto& item : value)
            for_each_number(item, look);
    else if (value.is_number())
        look(value);
}

const char* const several[][2] = {{"toluene", "nitration-mixed-acid"},
                                  {"benzene", "chlorination-lewis-acid"},
                                  {"nitrobenzene", "nitration-strong-acid"},
                                  {"COc1ccc(C(=O)OCC)cc1C", "bromination-acetic-acid"},
                                  {"Cc1ccc(-c2ccccc2)cc1", "bromination-lewis-acid"},
                                  {"C[N+](C)(C)c1ccccc1", "nitration-strong-acid"},
                                  {"CCCCCCCCCCCCc1ccccc1", "sulfonation-sulfuric-acid"},
                                  {"CC(C)(C)c1cc(C(F)(F)F)ccc1NC(=O)c1ccccc1", "nitration-mixed-acid"},
                                  {"Oc1ccccc1[N+](=O)[O-]", "nitration-mixed-acid"},
                                  {"O=C(Oc1ccccc1)c1ccccc1", "nitration-mixed-acid"}};

TEST(ReportJson, HasTheFieldsThatScriptsRelyOn) {
    const json answer = json_of("toluene", "nitration-mixed-acid");
    EXPECT_THAT(keys(answer),
                IsSupersetOf({"format", "tables", "substrate", "reaction", "level", "draws", "seed", "sites",
                              "ortho_para_ratio", "relative_rate", "cautions", "notes"}));
    EXPECT_EQ(answer["format"], "isotally.step.1");
    EXPECT_TRUE(answer["tables"]["version"].is_string());
    EXPECT_THAT(answer["tables"]["digest"].get<std::string>(), testing::MatchesRegex("sha256:[0-9a-f]+"));
    EXPECT_EQ(answer["substrate"],
              (json{{"smiles", "Cc1ccccc1"}, {"name", "toluene"}, {"systematic_name", "toluene"}}));
    const json& asked = answer["reaction"];
    EXPECT_EQ(asked["id"], "nitration-mixed-acid");
    EXPECT_TRUE(asked["name"].is_string());
    EXPECT_TRUE(asked["conditions"].is_string());
    EXPECT_EQ(asked["temperature_C"], 30);
    EXPECT_EQ(asked["acid_percent"], 80);
    EXPECT_EQ(answer["level"], 0.9);
    EXPECT_EQ(answer["draws"], 1000);
    EXPECT_EQ(answer["seed"], 1);
    ASSERT_EQ(answer["sites"].size(), 3u);
    for (const json& site : answer["sites"]) {
        EXPECT_EQ(site["ring"], 1);
        EXPECT_TRUE(site["locants"].is_array());
        EXPECT_EQ(site["multiplicity"], site["locants"].size());
        for (const auto* text : {"smiles", "name", "systematic_name"})
            EXPECT_TRUE(site["product"][text].is_string()) << text;
        for (const auto* number :
             {"percent", "percent_low", "percent_high", "log10_factor", "log10_factor_sd"})
            EXPECT_TRUE(site[number].is_number()) << number;
        ASSERT_EQ(site["contributions"].size(), 1u);
        const json& one = site["contributions"][0];
        EXPECT_EQ(one["substituent"], "methyl");
        EXPECT_THAT(one["relation"].get<std::string>(), testing::AnyOf("ortho", "meta", "para"));
        EXPECT_TRUE(one["log10_factor"].is_number());
        EXPECT_TRUE(one["sd"].is_number());
        EXPECT_EQ(one["evidence"], "measured");
        EXPECT_TRUE(one["sources"].is_array() && one["sources"][0].is_string());
        EXPECT_TRUE(site["corrections"].is_array());
    }
    EXPECT_EQ(answer["sites"][0]["product"]["name"], "2-nitrotoluene");
    EXPECT_EQ(answer["sites"][0]["product"]["systematic_name"], "1-methyl-2-nitrobenzene");
    EXPECT_THAT(keys(answer["ortho_para_ratio"]), IsSupersetOf({"value", "low", "high"}));
    EXPECT_EQ(answer["relative_rate"]["reference"], "benzene");
    for (const json& caution : answer["cautions"]) {
        EXPECT_TRUE(caution["code"].is_string());
        EXPECT_TRUE(caution["text"].is_string());
    }
    for (const json& note : answer["notes"])
        EXPECT_TRUE(note.is_string());
}

TEST(ReportJson, NullsStandWhereNothingCanBeSaid) {
    const json xylene = json_of("Cc1cccc(C)c1", "chlorination-lewis-acid");
    EXPECT_TRUE(xylene["ortho_para_ratio"].is_null());
    EXPECT_TRUE(xylene["reaction"]["acid_percent"].is_null());
    const json cation = json_of("C[N+](C)(C)c1ccccc1", "nitration-strong-acid");
    EXPECT_TRUE(cation["sites"][0]["product"]["systematic_name"].is_null());
    for (const json& site : json(json_of("Cc1ccc(-c2ccccc2)cc1", "bromination-lewis-acid")["sites"]))
        EXPECT_THAT(site["ring"].get<int>(), testing::AnyOf(1, 2));
}

TEST(ReportJson, CorrectionsAndContributionsAddUpAsPrinted) {
    for (const auto& [molecule, id] : several)
        for (const json& site : json(json_of(molecule, id)["sites"])) {
            double sum = 0;
            for (const json& one : site["contributions"])
                sum += one["log10_factor"].get<double>();
            for (const json& one : site["corrections"])
                sum += one["log10_factor"].get<double>();
            EXPECT_NEAR(sum, site["log10_factor"].get<double>(), 1e-9) << molecule;
        }
}

TEST(ReportJson, TwelveSignificantDigitsAndNoMore) {
    int long_ones = 0;
    const std::regex number(":(-?[0-9][-+.0-9e]*)");  // after a key; texts are quoted
    for (const auto& [molecule, id] : several) {
        const auto text = step_json(tables(), step(molecule, id), {}, -1);
        for (std::sregex_iterator at(text.begin(), text.end(), number), end; at != end; ++at) {
            const int digits = significant_digits((*at)[1]);
            EXPECT_LE(digits, 12) << molecule << ": " << (*at)[1];
            long_ones += digits == 12;
        }
    }
    EXPECT_GT(long_ones, 50);
    EXPECT_EQ(report::plain_numbers("{\"third\":\"\\u0001" + report::number(1.0 / 3) + "\\u0001\"}"),
              "{\"third\":0.333333333333}");
    EXPECT_EQ(report::number(2.0 / 3), "0.666666666667");
    EXPECT_EQ(report::number(-0.0), "0");
    EXPECT_EQ(report::number(1e-20), "1e-20");
}

TEST(ReportJson, OneLineOrIndented) {
    const auto answer = step("toluene", "nitration-mixed-acid");
    const auto one = step_json(tables(), answer, {}, -1);
    EXPECT_EQ(one.find('\n'), std::string::npos);
    EXPECT_GT(lines(step_json(tables(), answer, {}, 2)).size(), 50u);
    EXPECT_EQ(json::parse(one), json::parse(step_json(tables(), answer, {}, 2)));
}

TEST(ReportJson, LevelDrawsAndSeedAreThoseAskedFor) {
    const json answer =
        json_of("toluene", "nitration-mixed-acid", -1, {45, 82, {0.5, 200, 18446744073709551615u}});
    EXPECT_EQ(answer["level"], 0.5);
    EXPECT_EQ(answer["draws"], 200);
    EXPECT_EQ(answer["seed"], 18446744073709551615u);
    EXPECT_EQ(answer["reaction"]["temperature_C"], 45);
    EXPECT_EQ(answer["reaction"]["acid_percent"], 82);
}

TEST(ReportCsv, IsTheTableOfTheJson) {
    for (const auto& [molecule, id] : several) {
        const json answer = json_of(molecule, id);
        const auto rows = parse_csv(step_csv(step(molecule, id)));
        ASSERT_EQ(rows.size(), answer["sites"].size() + 1);
        EXPECT_THAT(rows[0], IsSupersetOf({"ring", "locants", "multiplicity", "product", "name", "percent",
                                           "percent_low", "percent_high", "log10_factor", "log10_factor_sd",
                                           "evidence"}));
        for (std::size_t i = 1; i < rows.size(); ++i) {
            const json& site = answer["sites"][i - 1];
            ASSERT_EQ(rows[i].size(), rows[0].size()) << molecule;
            for (std::size_t c = 0; c < rows[0].size(); ++c) {
                const auto& [column, field] = std::pair{rows[0][c], rows[i][c]};
                if (column == "product") {
                    EXPECT_EQ(field, site["product"]["smiles"]);
                } else if (column == "name") {
                    EXPECT_EQ(field, site["product"]["name"].is_null() ? "" : site["product"]["name"]);
                } else if (column == "percent" || column == "percent_low" || column == "log10_factor") {
                    EXPECT_EQ(std::stod(field), site[column].get<double>()) << molecule;
                    EXPECT_LE(significant_digits(field), 12);
                } else if (column == "evidence") {
                    EXPECT_EQ(field, site["evidence"]);
                }
            }
        }
    }
}

TEST(ReportCsv, QuotesAsRfc4180Asks) {
    EXPECT_EQ(report::csv_field("plain"), "plain");
    EXPECT_EQ(report::csv_field("2,4-dinitrotoluene"), "\"2,4-dinitrotoluene\"");
    EXPECT_EQ(report::csv_field("a \"b\""), "\"a \"\"b\"\"\"");
    EXPECT_EQ(report::csv_field("a\nb"), "\"a\nb\"");
}

TEST(ReportText, FirstLineRepeatsWhatWasAssumed) {
    const auto text = step_text(tables(), step("toluene", "nitration-mixed-acid"), {}, "defaults");
    EXPECT_EQ(lines(text)[0], "toluene, nitration in mixed acid, 30 C, 80 % sulfuric acid: defaults");
    EXPECT_THAT(lines(text), Contains(AllOf(HasSubstr("2,6"), HasSubstr("2-nitrotoluene"), HasSubstr("==="),
                                            HasSubstr("measured"))));
    EXPECT_THAT(lines(text), Contains(HasSubstr("ortho:para ratio")));
    EXPECT_THAT(lines(text), Contains(AllOf(HasSubstr("relative rate"), HasSubstr("benzene = 1"))));
    EXPECT_THAT(lines(text), Contains(HasSubstr("90 % interval")));
    const auto other =
        step_text(tables(), step("Cc1cccc(C)c1", "chlorination-lewis-acid"), {0.5, 1000, 1}, "as given");
    EXPECT_THAT(lines(other)[0], AllOf(HasSubstr("chlorination with a Lewis acid"), HasSubstr("as given"),
                                       Not(HasSubstr("sulfuric"))));
    EXPECT_THAT(lines(other), Not(Contains(HasSubstr("ortho:para"))));
    EXPECT_THAT(lines(other), Contains(HasSubstr("50 % interval")));
}

TEST(ReportText, NoLineIsLongerThanAHundredColumns) {
    for (const auto& [molecule, id] : several)
        for (const auto& line :
             lines(step_text(tables(), step(molecule, id), {}, "temperature by default"))) {
            EXPECT_LE(line.size(), 100u) << line;
            for (const char c : line)
                EXPECT_TRUE(c >= 0x20 && c <= 0x7e) << line;
        }
}

TEST(ReportText, WrapsAtBlanks) {
    EXPECT_THAT(report::wrapped("aa bb cc", 5), ElementsAre("aa bb", "cc"));
    EXPECT_THAT(report::wrapped("aaaaaaaa b", 5), ElementsAre("aaaaaaaa", "b"));
    EXPECT_THAT(report::wrapped("", 5), ElementsAre(""));
}

TEST(ReportText, WeakestEvidenceStands) {
    IsomerShare share;
    EXPECT_EQ(report::weakest_evidence(share), "measured") << "benzene itself";
    for (const auto* evidence : {"measured", "correlated", "inferred"}) {
        Contribution one;
        one.evidence = evidence;
        share.contributions.push_back(one);
    }
    EXPECT_EQ(report::weakest_evidence(share), "correlated");
    share.contributions[2].evidence = "assumed";
    EXPECT_EQ(report::weakest_evidence(share), "assumed");
}

TEST(ReportError, IsOneJsonObject) {
    const json error = json::parse(error_json(3, "input", "SMILES character 5", "a \"quoted\" reason"));
    EXPECT_EQ(error, (json{{"format", "isotally.error.1"},
                           {"exit", 3},
                           {"kind", "input"},
                           {"where", "SMILES character 5"},
                           {"message", "a \"quoted\" reason"}}));
    const auto broken = error_json(3, "input", "SMILES", "byte \xff in it\nand a line");
    EXPECT_EQ(broken.find('\n'), std::string::npos);
    EXPECT_THAT(json::parse(broken)["message"].get<std::string>(), HasSubstr("in it"));
}

}  // namespace
}  // namespace isotally
