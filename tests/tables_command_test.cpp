// The command's own functions belong to the program, which tests don't link: they are compiled in here.
#include "cli/tables_command.cpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <sstream>

#include "cli/tables_layout.cpp"
#include "cli/tables_view.cpp"
#include "tables_sample.hpp"

namespace isotally {
namespace {

using testing::HasSubstr;
using testing::Not;
using testing::StartsWith;

struct Outcome {
    int status;
    std::string out, err;
};

Outcome run(const TablesRequest& request, const std::vector<TableFile>& files = sample_files()) {
    std::ostringstream out, err;
    const int status =
        tables_command(request, request.lint ? Tables{} : parse_tables(files), files, out, err);
    return {status, out.str(), err.str()};
}

Json json_of(TablesRequest request) {
    request.json = true;
    return Json::parse(run(request).out);
}

void expect_error(const TablesRequest& request, ErrorKind kind, const std::string& message) {
    try {
        run(request);
        ADD_FAILURE() << "no error";
    } catch (const Error& error) {
        EXPECT_EQ(error.kind, kind);
        EXPECT_THAT(error.what(), HasSubstr(message));
        EXPECT_FALSE(error.where.empty());
    }
}

TEST(TablesCommand, ListsKinds) {
    EXPECT_THAT(run({}).out,
                StartsWith("kind          entries  holds\n"
                           "substituents        3  groups on a benzene ring, and classes of groups\n"
                           "constants           3  "));
    EXPECT_EQ(json_of({})["kinds"].size(), 12u);
}

TEST(TablesCommand, ListsEntries) {
    EXPECT_EQ(run({.kind = "constants"}).out,
              "id  substituent  quantity      value    sd  use  status  source\n"
              "c1  NO2          sigma_m        0.71  0.02  yes  seen    hansch\n"
              "c2  NO2          sigma_m        0.69  0.05  no   memory  handbook\n"
              "c3  Me           sigma_p_plus   -.31  0.02  yes  seen    hansch\n");
    const Json json = json_of({.kind = "measurements"});
    EXPECT_EQ(json["format"], "isotally.tables.1");
    EXPECT_EQ(json["tables"]["version"], "7");
    EXPECT_EQ(json["tables"]["digest"], parse_tables(sample_files()).digest);
    EXPECT_EQ(json["entries"][0]["products"][1]["percent"], 2.7);
    EXPECT_EQ(json["entries"][0]["acid_percent"], nullptr);
    EXPECT_EQ(json["entries"][1]["complete"], false);
}

TEST(TablesCommand, CsvIsTheFileAsItIs) {
    std::vector<TableFile> files = sample_files();
    EXPECT_EQ(run({.kind = "bans", .csv = true}).out, text_of(files, "bans.csv"));
    EXPECT_THAT(
        run({.kind = "measurements", .csv = true}).out,
        StartsWith("id,reaction,temperature_C,acid_percent,substrate,product,percent,sd,complete,use,"));
    EXPECT_THAT(run({.kind = "measurements", .csv = true}).out,
                HasSubstr("\nm1,nitration-x,-30,,Cc1ccccc1,Cc1cccc([N+](=O)[O-])c1,2.7,,yes,yes,"));
    EXPECT_EQ(run({.kind = "sources", .csv = true}).out,
              "id,type,citation\nhansch,article-journal,\"Hansch, Leo & Taft, Chem. Rev. 1991, 91, 165\"\n"
              "handbook,book,A Handbook\n");
}

TEST(TablesCommand, SubstituentWithAllItsConstantsAndSources) {
    const std::string text = run({.kind = "substituents", .id = "NO2"}).out;
    EXPECT_THAT(text, HasSubstr("constants\n"
                                "  quantity  value    sd  use  status  confidence  source    locator\n"
                                "  sigma_m    0.71  0.02  yes  seen    high        hansch    table 1\n"
                                "  sigma_m    0.69  0.05  no   memory  medium      handbook\n"
                                "      rounded\n"));
    EXPECT_THAT(text, HasSubstr("kind:acceptor"));
    EXPECT_THAT(text, HasSubstr("sources\n  hansch    Hansch, Leo & Taft, Chem. Rev. 1991, 91, 165\n"
                                "  handbook  A Handbook\n"));
    EXPECT_EQ(run({.kind = "substituents", .id = "Nitro"}).out, text) << "the name will do";
    const Json json = json_of({.kind = "substituents", .id = "NO2"});
    EXPECT_EQ(json["entries"][0]["constants"].size(), 2u);
    EXPECT_EQ(json["entries"][0]["stands_in_for"][0]["id"], "ester");
    EXPECT_EQ(json["sources"][0]["csl"]["DOI"], "10.1021/cr00002a004");
}

TEST(TablesCommand, OtherEntriesWithWhatBelongsToThem) {
    const std::string reaction = run({.kind = "reactions", .id = "nitration-x"}).out;
    EXPECT_THAT(reaction, HasSubstr("figures\n  quantity               value  status    confidence\n"
                                    "  temperature_default_C     30  practice  high\n"));
    EXPECT_THAT(reaction, HasSubstr("\nbans\n"));
    const std::string measurement = run({.kind = "measurements", .id = "m1"}).out;
    EXPECT_THAT(measurement, HasSubstr("products\n"));
    EXPECT_THAT(measurement, HasSubstr("  Cc1ccccc1[N+](=O)[O-]       55.6  1.5\n"));
    EXPECT_THAT(measurement, HasSubstr("temperature_C  -30 degree Celsius\n"));
    const Json source = json_of({.kind = "sources", .id = "hansch"});
    EXPECT_EQ(source["entries"][0]["cited_by"]["constants"].size(), 2u);
    EXPECT_EQ(source["entries"][0]["cited_by"]["rates"][0]["id"], "r1");
    EXPECT_THAT(run({.kind = "sources", .id = "hansch"}).out, HasSubstr("\nconstants\n"));
    EXPECT_EQ(run({.kind = "measurements", .id = "Toluene"}).out, measurement)
        << "the substrate's name will do";
    EXPECT_THAT(run({.kind = "names", .id = "TOLUENE"}).out, HasSubstr("Cc1ccccc1"));
}

TEST(TablesCommand, NothingIsWiderThanAHundredColumns) {
    std::vector<TableFile> files = sample_files();
    std::string note;
    for (int i = 0; i < 60; ++i)
        note += "caf\xC3\xA9 no. " + std::to_string(i) + " ";
    change(files, "constants.csv", "rounded", note + std::string(150, 'x'));
    change(files, "bans.csv", "burns", note);
    change(files, "names.csv", "toluene,", note + ",");
    for (const TablesRequest& request : std::vector<TablesRequest>{{.kind = "constants"},
                                                                   {.kind = "bans"},
                                                                   {.kind = "names"},
                                                                   {.kind = "bans", .id = "b2"},
                                                                   {.kind = "substituents", .id = "NO2"},
                                                                   {.kind = "reactions", .id = "nitration-x"},
                                                                   {.kind = "sources", .id = "hansch"}}) {
        std::istringstream lines(run(request, files).out);
        for (std::string line; std::getline(lines, line);)
            EXPECT_LE(text_width(line), 100u) << line;
    }
    const std::string text = run({.kind = "substituents", .id = "NO2"}, files).out;
    EXPECT_THAT(text, HasSubstr("no. 59")) << "wrapped, not cut";
}

TEST(TablesCommand, UnknownWordsAreWrongUse) {
    expect_error({.kind = "substituants"}, ErrorKind::usage, "did you mean \"substituents\"?");
    expect_error({.kind = "reaction_figures"}, ErrorKind::usage, "unknown kind");
    expect_error({.kind = "substituents", .id = "NO3"}, ErrorKind::usage, "did you mean \"NO2\"?");
    expect_error({.kind = "constants", .summary = true}, ErrorKind::usage, "only one of");
    expect_error({.json = true, .csv = true}, ErrorKind::usage, "exclude");
    expect_error({.export_folder = "/proc/isotally"}, ErrorKind::output, "can't be created");
}

TEST(TablesCommand, Summary) {
    TablesRequest request{.summary = true};
    const std::string text = run(request).out;
    EXPECT_THAT(text, HasSubstr("kind              entries  seen  memory  practice  derived  invented\n"));
    EXPECT_THAT(text, HasSubstr("constants               3     2       1         0        0         0\n"));
    EXPECT_THAT(text, HasSubstr("use           entries  yes  weak  partial  bound  no\n"
                                "measurements        2    1     0        0      1   0\n"));
    EXPECT_THAT(text, Not(HasSubstr("evidence")));
    request.evidence_counts = [](const Tables& tables) {
        return Counts{{"measured", tables.substituents.size()}};
    };
    EXPECT_THAT(run(request).out, HasSubstr("evidence  entries\nmeasured        3\n"));
    EXPECT_EQ(json_of(request)["evidence"]["measured"], 3);
    EXPECT_EQ(json_of(request)["summary"]["constants"]["status"]["seen"], 2);
}

TEST(TablesCommand, Lint) {
    TablesRequest request{.lint = true};
    EXPECT_EQ(run(request).status, 0);
    std::vector<TableFile> files = sample_files();
    change(files, "constants.csv", "0.71", "much");
    const Outcome faulty = run(request, files);
    EXPECT_EQ(faulty.status, 4);
    EXPECT_THAT(faulty.out, StartsWith("constants.csv:2:value: \"much\" is not a number"));
    EXPECT_EQ(faulty.err, "1 fault in the tables\n");
    request.chemistry_faults = [](const Tables& tables) {
        return std::vector<Fault>{{"names.csv", tables.names[0].smiles}, {"names.csv", "other"}};
    };
    const Outcome chemistry = run(request);
    EXPECT_EQ(chemistry.status, 4);
    EXPECT_THAT(chemistry.out, StartsWith("names.csv: Cc1ccccc1\n"));
    EXPECT_EQ(run(request, files).out, faulty.out) << "chemistry comes after reading";
    EXPECT_EQ(json_of(request)["faults"][0]["where"], "names.csv");
}

TEST(TablesCommand, DatapackageIsTheOneInTheFolder) {
    std::vector<TableFile> files = sample_files();
    EXPECT_EQ(run({.kind = "datapackage"}).out, text_of(files, "datapackage.json"));
}

}  // namespace
}  // namespace isotally
