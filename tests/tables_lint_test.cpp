// Every kind of fault with its exact place.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>

#include "tables_sample.hpp"

namespace isotally {
namespace {

using testing::AllOf;
using testing::ElementsAre;
using testing::Field;
using testing::HasSubstr;
using testing::IsEmpty;
using testing::SizeIs;

auto fault(const std::string& where, const std::string& message) {
    return AllOf(Field(&Fault::where, where), Field(&Fault::message, HasSubstr(message)));
}

/// Faults of the sample after one text of one file has been replaced.
std::vector<Fault> faults_after(const std::string& file, const std::string& from, const std::string& to) {
    std::vector<TableFile> files = sample_files();
    change(files, file, from, to);
    return lint_tables(files);
}

// ---- what spreadsheets do to files

TEST(TablesLint, ByteOrderMarkCarriageReturnsAndEmptyLinesAreAccepted) {
    const Tables plain = parse_tables(sample_files());
    std::vector<TableFile> files = sample_files();
    for (TableFile& file : files) {
        std::string text = "\xEF\xBB\xBF";
        for (const char c : file.text)
            text += c == '\n' ? std::string("\r\n") : std::string(1, c);
        file.text = text + "\r\n";
    }
    change(files, "factors.csv", "\r\nf1", "\r\n\r\n,,,,,,,,,,,,,,\r\nf1");
    EXPECT_THAT(lint_tables(files), IsEmpty());
    const Tables same = parse_tables(files);
    EXPECT_EQ(same.rates.size(), plain.rates.size());
    EXPECT_EQ(same.bans[0].reason, plain.bans[0].reason);
    EXPECT_EQ(same.measurements[1].substrate, plain.measurements[1].substrate);
}

TEST(TablesLint, SemicolonsAreNamed) {
    std::vector<TableFile> files = sample_files();
    std::string& text = text_of(files, "rates.csv");
    std::replace(text.begin(), text.end(), ',', ';');
    EXPECT_THAT(lint_tables(files),
                ElementsAre(fault("rates.csv:1", "separated by semicolons, expected commas")));
}

TEST(TablesLint, DecimalCommaIsNamed) {
    EXPECT_THAT(faults_after("constants.csv", "0.71", "\"0,71\""),
                ElementsAre(fault("constants.csv:2:value", "decimal comma (write 0.71)")));
    EXPECT_THAT(faults_after("constants.csv", "0.71", "0,71"),
                ElementsAre(fault("constants.csv:2", "12 fields, expected 11 (a decimal comma")));
}

TEST(TablesLint, BrokenQuotesCostOneRowOnly) {
    EXPECT_THAT(faults_after("names.csv", "toluene,", "\"toluene,"),
                ElementsAre(fault("names.csv:2", "opened and never closed")));
    EXPECT_THAT(faults_after("names.csv", "toluene,", "\"tol\"uene,"),
                ElementsAre(fault("names.csv:2", "text after a closing quote")));
    EXPECT_THAT(faults_after("names.csv", "toluene,", "tol\"uene,"),
                ElementsAre(fault("names.csv:2", "a quote inside a field")));
}

TEST(TablesLint, LineIsTheOneWhereTheRecordBegins) {
    // The first ban has a line break inside its quotes, so the second begins on line 4.
    EXPECT_THAT(faults_after("bans.csv", "b2,*", "b2,nitratoin"),
                ElementsAre(fault("bans.csv:4:reactions", "did you mean \"nitration\"")));
}

TEST(TablesLint, EncodingsAndLimits) {
    EXPECT_THAT(faults_after("names.csv", "toluene,", "tolu\xE8ne,"),
                ElementsAre(fault("names.csv:2", "not UTF-8")));
    EXPECT_THAT(faults_after("names.csv", "toluene,", std::string("tolu\0ene,", 9)),
                ElementsAre(fault("names.csv:2", "control character (byte 0)")));
    std::vector<TableFile> files = sample_files();
    text_of(files, "names.csv") = std::string("\xFF\xFEn\0a\0", 6);
    EXPECT_THAT(lint_tables(files), ElementsAre(fault("names.csv:1", "UTF-16")));
    EXPECT_THAT(faults_after("names.csv", "toluene,", std::string(65537, 'x') + ","),
                ElementsAre(fault("names.csv:2", "longer than 64 KiB")));
    EXPECT_THAT(faults_after("names.csv", "toluene,", "\"" + std::string(65537, 'x') + "\","),
                ElementsAre(fault("names.csv:2", "longer than 64 KiB")));
    files = sample_files();
    text_of(files, "README.md") = std::string((std::size_t{16} << 20) + 1, 'x');
    EXPECT_THAT(lint_tables(files), ElementsAre(fault("README.md", "larger than 16 MiB")));
}

TEST(TablesLint, ManyFaultsOfOneFileAreCounted) {
    std::vector<TableFile> files = sample_files();
    for (int i = 0; i < 1500; ++i)
        text_of(files, "names.csv") += "x\n";
    const std::vector<Fault> faults = lint_tables(files);
    ASSERT_THAT(faults, SizeIs(1001));
    EXPECT_THAT(faults.back(), fault("names.csv", "500 further faults"));
}

// ---- JSON

TEST(TablesLint, BrokenJsonNamesItsLine) {
    EXPECT_THAT(faults_after("measurements.json", "\"complete\": false,", "\"complete\": fal,"),
                ElementsAre(fault("measurements.json:14", "not valid JSON")));
    EXPECT_THAT(faults_after("measurements.json", "\"complete\": false,", "\"complete\": fal,")[0].message,
                HasSubstr("begins on line 10"));
}

TEST(TablesLint, TruncatedJsonIsOneFaultWhereverItIsCut) {
    std::vector<TableFile> sample = sample_files();
    const std::string whole = text_of(sample, "measurements.json");
    for (std::size_t size = 0; size + 2 < whole.size(); size += 5) {
        std::vector<TableFile> files = sample_files();
        text_of(files, "measurements.json") = whole.substr(0, size);
        const std::vector<Fault> faults = lint_tables(files);
        ASSERT_THAT(faults, SizeIs(1)) << size;
        const auto lines =
            1 + std::count(whole.begin(), whole.begin() + static_cast<std::ptrdiff_t>(size), '\n');
        EXPECT_EQ(faults[0].where, "measurements.json:" + std::to_string(lines)) << size;
    }
}

TEST(TablesLint, RecordsBeforeTheBreakAreStillChecked) {
    std::vector<TableFile> files = sample_files();
    change(files, "measurements.json", "\"use\": \"yes\"", "\"use\": \"yess\"");
    change(files, "measurements.json", "\"complete\": false,", "\"complete\" false,");
    EXPECT_THAT(lint_tables(files), ElementsAre(fault("measurements.json:2:use", "did you mean \"yes\""),
                                                fault("measurements.json:14", "not valid JSON")));
}

TEST(TablesLint, JsonIsReadStrictly) {
    EXPECT_THAT(
        faults_after("measurements.json", "\"temperature_C\": -30", "\"temperature_C\": \"-30\""),
        ElementsAre(fault("measurements.json:2:temperature_C", "expected a number from -150 to 500 (degree "
                                                               "Celsius) without quotes")));
    EXPECT_THAT(faults_after("measurements.json", "\"complete\": true", "\"complete\": \"yes\""),
                ElementsAre(fault("measurements.json:2:complete", "expected true or false")));
    EXPECT_THAT(
        faults_after("measurements.json", "\"complete\": true", "\"complete\": true, \"complete\": true"),
        ElementsAre(fault("measurements.json:2", "\"complete\" stands twice")));
    EXPECT_THAT(faults_after("measurements.json", "\"temperature_C\": -30", "\"temprature_C\": -30"),
                ElementsAre(fault("measurements.json:2:temprature_C", "did you mean \"temperature_C\"")));
    EXPECT_THAT(faults_after("measurements.json", "\"percent\": 2.7", "\"percent\": 1e999"),
                ElementsAre(fault("measurements.json:7", "not valid JSON")));
    EXPECT_THAT(faults_after("measurements.json", "[\n", "[ 5,\n"),
                ElementsAre(fault("measurements.json:1", "expected a record")));
    std::vector<TableFile> files = sample_files();
    text_of(files, "measurements.json") = "{}";
    EXPECT_THAT(lint_tables(files), ElementsAre(fault("measurements.json:1", "expected an array")));
    text_of(files, "measurements.json") = std::string(1000000, '[');
    EXPECT_THAT(lint_tables(files), ElementsAre(fault("measurements.json:1", "nested deeper")));
}

TEST(TablesLint, ProductsAndTheirPercents) {
    EXPECT_THAT(
        faults_after("measurements.json", ", \"percent\": 2.7", ""),
        ElementsAre(fault("measurements.json:2:products.percent", "entry 2: empty, expected a number")));
    EXPECT_THAT(faults_after("measurements.json", "\"percent\": 2.7", "\"percent\": -1"),
                ElementsAre(fault("measurements.json:2:products.percent",
                                  "entry 2: found -1, expected a number from 0")));
    EXPECT_THAT(faults_after("measurements.json", "\"percent\": 2.7", "\"percent\": 9.7"),
                ElementsAre(fault("measurements.json:2:products.percent", "add up to 107")));
    EXPECT_THAT(faults_after("measurements.json", "\"percent\": 2.7", "\"percent\": 5.7"), IsEmpty())
        << "3 points";
    EXPECT_THAT(faults_after("measurements.json", "\"percent\": 2.7", "\"percent\": 9.7, \"sd\": 2.5"),
                IsEmpty())
        << "3 standard deviations";
    EXPECT_THAT(faults_after("measurements.json", "Cc1cccc([N+](=O)[O-])c1", "Cc1ccccc1[N+](=O)[O-]"),
                ElementsAre(fault("measurements.json:2:products.smiles", "stands twice")));
    EXPECT_THAT(faults_after("measurements.json", "\"percent\": 95", "\"percent\": 0"),
                ElementsAre(fault("measurements.json:10:products.percent", "add up to nothing")));
    EXPECT_THAT(faults_after("measurements.json", "\"percent\": 95}",
                             "\"percent\": 95}, {\"smiles\": \"Y\", \"percent\": 10}"),
                ElementsAre(fault("measurements.json:10:products.percent", "add up to 105")));
    EXPECT_THAT(faults_after("measurements.json", "{\"smiles\": \"X\", \"percent\": 95}", ""),
                ElementsAre(fault("measurements.json:10:products", "expected a list of objects")));
}

// ---- one fault of each kind

TEST(TablesLint, Columns) {
    EXPECT_THAT(faults_after("substituents.csv", "principal,", "principle,"),
                ElementsAre(fault("substituents.csv:1:principle", "did you mean \"principal\""),
                            fault("substituents.csv:1:principal", "the column \"principal\" is missing")));
    EXPECT_THAT(faults_after("model.csv", "confidence,note", "note,note"),
                ElementsAre(fault("model.csv:1:note", "stands twice"),
                            fault("model.csv:1:confidence", "is missing")));
    EXPECT_THAT(faults_after("names.csv", "practice,high,", "practice,high"),
                ElementsAre(fault("names.csv:2", "7 fields, expected 8")));
    EXPECT_THAT(
        faults_after("datapackage.json", "\"name\": \"like\"", "\"name\": \"lik\""),
        ElementsAre(fault("datapackage.json:1:substituents.csv", "does not describe the column \"like\""),
                    fault("datapackage.json:1:substituents.csv", "did you mean \"like\"")));
}

TEST(TablesLint, DatapackageDescribesEveryFile) {
    EXPECT_THAT(faults_after("datapackage.json", "\"path\": \"names.csv\"", "\"path\": \"nmes.csv\""),
                ElementsAre(fault("datapackage.json:1:resources", "unknown file \"nmes.csv\""),
                            fault("datapackage.json:1:resources", "does not describe the file names.csv")));
    EXPECT_THAT(faults_after("datapackage.json", "\"version\"", "\"edition\""),
                ElementsAre(fault("datapackage.json:1:version", "missing")));
    std::vector<TableFile> files = sample_files();
    text_of(files, "datapackage.json").resize(100);
    EXPECT_THAT(lint_tables(files), ElementsAre(fault("datapackage.json:3", "not valid JSON")));
}

TEST(TablesLint, Files) {
    std::vector<TableFile> files = sample_files();
    files.push_back({"constant.csv", ""});
    EXPECT_THAT(lint_tables(files),
                ElementsAre(AllOf(fault("constant.csv", "unknown file, expected one of README.md, bans.csv"),
                                  fault("constant.csv", "did you mean \"constants.csv\"?"))));
    files = sample_files();
    std::erase_if(files, [](const TableFile& file) { return file.name == "sources.json"; });
    EXPECT_THAT(lint_tables(files), ElementsAre(fault("sources.json", "missing")))
        << "no flood of references";
    files = sample_files();
    text_of(files, "model.csv") = "";
    EXPECT_THAT(lint_tables(files), ElementsAre(fault("model.csv:1", "empty")));
}

TEST(TablesLint, Words) {
    EXPECT_THAT(
        faults_after("constants.csv", "sigma_m,0.71", "sigma_mm,0.71"),
        ElementsAre(fault("constants.csv:2:quantity",
                          "found \"sigma_mm\", expected one of sigma_m, sigma_p, sigma_m_plus, sigma_p_plus, "
                          "charton_nu; did you mean \"sigma_m\"?")));
    EXPECT_THAT(faults_after("constants.csv", "0.02,yes", "0.02,true"),
                ElementsAre(fault("constants.csv:2:use", "found \"true\", expected yes or no")));
    EXPECT_THAT(faults_after("names.csv", "practice,high", "practised,high"),
                ElementsAre(fault("names.csv:2:status", "did you mean \"practice\"")));
    EXPECT_THAT(faults_after("factors.csv", "para", "papa"),
                ElementsAre(fault("factors.csv:2:relation", "did you mean \"para\"")));
    EXPECT_THAT(faults_after("names.csv", "toluene,Cc1ccccc1", "toluene,Cc1\xE2\x80\x93"),
                ElementsAre(fault("names.csv:2:smiles", "printable ASCII without blanks")));
}

TEST(TablesLint, Numbers) {
    const auto value = [](const std::string& text) { return faults_after("constants.csv", "0.71", text); };
    EXPECT_THAT(value("+0.71"), IsEmpty());
    EXPECT_THAT(value(" .71 "), IsEmpty());
    EXPECT_THAT(value("7.1e-1"), IsEmpty());
    for (const char* text : {"0x10", "0.71 V", "0.7.1", "--1", "+", "+-1", "1e", "."})
        EXPECT_THAT(value(text),
                    ElementsAre(fault("constants.csv:2:value", "is not a number, expected a number")))
            << text;
    for (const char* text : {"inf", "-inf", "nan", "NAN", "infinity"})
        EXPECT_THAT(value(text), ElementsAre(fault("constants.csv:2:value", "not a finite number"))) << text;
    EXPECT_THAT(value("1e999"), ElementsAre(fault("constants.csv:2:value", "out of the range")));
    EXPECT_THAT(value("\xE2\x88\x92"
                      "0.7"),
                ElementsAre(fault("constants.csv:2:value", "typographic minus")));
    EXPECT_THAT(value(""), ElementsAre(fault("constants.csv:2:value", "empty, expected a number")));
    EXPECT_THAT(faults_after("constants.csv", "0.02,yes", "0,yes"),
                ElementsAre(fault("constants.csv:2:sd", "found 0, expected a number over 0")));
    EXPECT_THAT(faults_after("rates.csv", "25,80", "25,180"),
                ElementsAre(fault("rates.csv:2:acid_percent", "found 180, expected a number from 0 to 150")));
    EXPECT_THAT(faults_after("substituents.csv", ",40,", ",4.5,"),
                ElementsAre(fault("substituents.csv:4:rank", "found 4.5, expected a whole number")));
    EXPECT_THAT(faults_after("states.csv", "70,90", "90,70"),
                ElementsAre(fault("states.csv:2:acid_to", "found 70, expected not less than acid_from, 90")));
    EXPECT_THAT(faults_after("states.csv", "70,90", "70,"),
                ElementsAre(fault("states.csv:2:acid_to", "empty")));
}

TEST(TablesLint, Duplicates) {
    EXPECT_THAT(faults_after("constants.csv", "c2,", "c1,"),
                ElementsAre(fault("constants.csv:3:id", "\"c1\" stands already on line 2")));
    EXPECT_THAT(faults_after("measurements.json", "m2", "m1"),
                ElementsAre(fault("measurements.json:10:id", "stands already on line 2")));
    EXPECT_THAT(faults_after("names.csv", "toluene,", "toluene,C,no,,,practice,,\nToluene,"),
                ElementsAre(fault("names.csv:3:name", "\"Toluene\" stands already on line 2")));
    EXPECT_THAT(faults_after("model.csv", "all,rho", "nitration,rho"),
                ElementsAre(fault("model.csv:3:family", "expected one entry for family, quantity")));
    EXPECT_THAT(faults_after("rates.csv", "r1,", "f1,"),
                ElementsAre(fault("rates.csv:2:id", "stands already in factors.csv, line 2")));
    EXPECT_THAT(faults_after("constants.csv", "0.05,no", "0.05,yes"),
                ElementsAre(fault("constants.csv:3:use", "the first is on line 2")));
}

TEST(TablesLint, References) {
    EXPECT_THAT(faults_after("constants.csv", "hansch", "hanch"),
                ElementsAre(fault(
                    "constants.csv:2:source",
                    "unknown id \"hanch\", expected an id from sources.json; did you mean \"hansch\"?")));
    EXPECT_THAT(faults_after("constants.csv", "c3,Me", "c3,me"),
                ElementsAre(fault("constants.csv:4:substituent", "did you mean \"Me\"")));
    EXPECT_THAT(faults_after("rates.csv", "nitration-x", "nitration-xx"),
                ElementsAre(fault("rates.csv:2:reaction", "did you mean \"nitration-x\"")));
    EXPECT_THAT(faults_after("substituents.csv", "40,NO2", "40,N02"),
                ElementsAre(fault("substituents.csv:4:like", "did you mean \"NO2\"")));
    EXPECT_THAT(faults_after("states.csv", "kind:acceptor", "kind:aceptor"),
                ElementsAre(fault("states.csv:2:group", "did you mean \"acceptor\"")));
    EXPECT_THAT(faults_after("states.csv", "kind:acceptor", "principal:ester"), IsEmpty());
    EXPECT_THAT(faults_after("states.csv", "kind:acceptor", "principal:easter"),
                ElementsAre(fault("states.csv:2:group", "did you mean \"ester\"")));
    EXPECT_THAT(faults_after("states.csv", "kind:acceptor", "NO3"),
                ElementsAre(fault("states.csv:2:group", "did you mean \"NO2\"")));
    EXPECT_THAT(faults_after("states.csv", "acceptor,NO2", "acceptor,NO3"),
                ElementsAre(fault("states.csv:2:state", "did you mean \"NO2\"")));
    EXPECT_THAT(faults_after("model.csv", "nitration,", "nitraton,"),
                ElementsAre(fault("model.csv:2:family", "did you mean \"nitration\"")));
}

TEST(TablesLint, Provenance) {
    EXPECT_THAT(faults_after("constants.csv", "hansch", ""),
                ElementsAre(fault("constants.csv:2:source", "empty, expected an id from sources.json")));
    EXPECT_THAT(faults_after("names.csv", ",,,practice", ",,,seen"),
                ElementsAre(fault("names.csv:2:source", "empty")));
    EXPECT_THAT(faults_after("names.csv", ",,,practice", ",,,derived"),
                ElementsAre(fault("names.csv:2:locator", "the command that derives")));
    EXPECT_THAT(faults_after("sources.json", "\"title\": \"A Handbook\"", "\"author\": \"Smith\""),
                ElementsAre(fault("sources.json:6:author", "expected a list"),
                            fault("sources.json:6:title", "names neither")));
    EXPECT_THAT(faults_after("sources.json", "{\"date-parts\": [[1991]]}", "1991"),
                ElementsAre(fault("sources.json:2:issued", "date-parts")));
}

TEST(TablesLint, Substituents) {
    EXPECT_THAT(faults_after("substituents.csv", "*C,", "C,"),
                ElementsAre(fault("substituents.csv:3:smiles", "attachment first")));
    EXPECT_THAT(faults_after("substituents.csv", "*C,", ","),
                ElementsAre(fault("substituents.csv:3:smiles", "either smiles (a group) or smarts")));
    EXPECT_THAT(faults_after("substituents.csv", ",[#0]C(=O)O[#6],40", ",C(=O)O,40"),
                ElementsAre(fault("substituents.csv:4:smarts", "[#0]")));
    EXPECT_THAT(faults_after("substituents.csv", ",40,", ",,"),
                ElementsAre(fault("substituents.csv:4:rank", "empty")));
    EXPECT_THAT(faults_after("substituents.csv", ",,,acceptor", ",,ester,acceptor"),
                ElementsAre(fault("substituents.csv:2:like", "leads back"),
                            fault("substituents.csv:4:like", "leads back")));
}

TEST(TablesLint, EveryFaultAtOnce) {
    std::vector<TableFile> files = sample_files();
    change(files, "bans.csv", "practice", "habit");
    change(files, "cautions.csv", "90", "900");
    change(files, "constants.csv", "0.71", "zero");
    change(files, "constants.csv", "c3,Me", "c3,Met");
    change(files, "factors.csv", "25,,", "hot,,");
    change(files, "measurements.json", "2.7", "27");
    change(files, "names.csv", "yes", "y");
    change(files, "rates.csv", "24.5", "-24.5");
    change(files, "states.csv", "no,", "never,");
    change(files, "substituents.csv", "alkyl", "alkil");
    std::vector<std::string> places;
    for (const Fault& found : lint_tables(files))
        places.push_back(found.where);
    EXPECT_THAT(places,
                ElementsAre("bans.csv:2:status", "cautions.csv:2:severity", "constants.csv:2:value",
                            "constants.csv:4:substituent", "factors.csv:2:temperature_C",
                            "measurements.json:2:products.percent", "names.csv:2:preferred",
                            "rates.csv:2:value", "states.csv:2:both_forms", "substituents.csv:3:kind"));
}

}  // namespace
}  // namespace isotally
