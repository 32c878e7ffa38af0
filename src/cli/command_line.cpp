#include "command_line.hpp"

#include <CLI/CLI.hpp>
#include <algorithm>
#include <charconv>
#include <cmath>
#include <istream>
#include <ostream>

#include "check_command.hpp"
#include "isotally/built_in.hpp"
#include "isotally/error.hpp"
#include "status.hpp"
#include "step_command.hpp"
#include "tables_command.hpp"

namespace isotally {
namespace {

constexpr const char* quoting =
    "Quote every SMILES: the shell takes brackets, parentheses and # for itself ('Cc1ccccc1').";
constexpr const char* standing = "An estimate replaces neither calorimetry nor a qualified person; local "
                                 "rules and licensed practice come first.";

/// CLI11 leaves "nan", "inf" and signs of whole numbers through; the program does not.
template <class Number>
std::string check_number(const std::string& text, const char* expected) {
    Number value{};
    const auto [end, problem] = std::from_chars(text.data(), text.data() + text.size(), value);
    if (problem == std::errc() && end == text.data() + text.size() &&
        std::isfinite(static_cast<double>(value)))
        return "";
    return "found \"" + cli::printable(text) + "\", expected " + expected;
}

const CLI::Validator finite_number(
    [](const std::string& text) { return check_number<double>(text, "a number such as 30 or 79.5"); }, "");
const CLI::Validator whole_number(
    [](const std::string& text) {
        return check_number<std::uint64_t>(text, "a whole number of at most 20 digits");
    },
    "");

struct Options {
    cli::StepRequest step;
    cli::CheckRequest check;
    TablesRequest tables;
    std::string tables_folder;
    bool quiet = false;
};

void add_common(CLI::App& command, Options& options) {
    command.add_option("--tables", options.tables_folder, "Folder that replaces the built-in tables")
        ->type_name("DIR");
    command.add_flag("--quiet", options.quiet, "No notes and no progress on standard error");
}

void add_step(CLI::App& program, Options& options) {
    auto& request = options.step;
    auto* step = program.add_subcommand(
        "step", "One substitution: share of every isomer, ortho:para ratio, relative rate");
    step->add_option("molecule", request.molecule,
                     "Name, SMILES, path of a .mol file, or - for one SMILES a line")
        ->required()
        ->type_name("MOLECULE");
    step->add_option("--reaction", request.reaction, "Reaction id (isotally tables reactions lists them)")
        ->type_name("ID");
    step->add_option("--temperature", request.temperature_C, "Temperature")
        ->check(finite_number)
        ->type_name("C");
    step->add_option("--acid-percent", request.acid_percent,
                     "Sulfuric acid, weight percent without the nitric acid")
        ->check(finite_number)
        ->type_name("W");
    step->add_option("--level", request.draws.level, "How often the intervals should hold")
        ->check(finite_number)
        ->check(CLI::Range(0.01, 0.999))
        ->capture_default_str()
        ->type_name("P");
    step->add_option("--draws", request.draws.count, "Draws behind the intervals")
        ->check(CLI::Range(10, 100000))
        ->capture_default_str()
        ->type_name("N");
    step->add_option("--seed", request.draws.seed, "Seed of the draws")
        ->check(whole_number)
        ->capture_default_str()
        ->type_name("N");
    step->add_option("--skip", request.skip, "Lines of a list already answered: go on after them")
        ->check(whole_number)
        ->type_name("N");
    step->add_option("--threads", request.threads, "Threads for a list; 0: one for each processor")
        ->check(whole_number)
        ->check(CLI::Range(0, 1024))
        ->capture_default_str()
        ->type_name("N");
    auto* json = step->add_flag("--json", request.json, "One JSON document on standard output");
    step->add_flag("--csv", request.csv, "The table of isomers as CSV")->excludes(json);
    add_common(*step, options);
    step->footer(std::string("Example: isotally step toluene --reaction nitration-mixed-acid\n") + quoting +
                 "\n" + standing);
}

void add_tables(CLI::App& program, Options& options) {
    auto& request = options.tables;
    auto* tables =
        program.add_subcommand("tables", "What is known, with value, uncertainty, source and status");
    tables
        ->add_option("kind", request.kind,
                     "substituents, constants, reactions, model, measurements, factors, rates, states, "
                     "bans, cautions, names, sources")
        ->type_name("KIND");
    tables->add_option("id", request.id, "One entry with all its sources")->type_name("ID");
    auto* json = tables->add_flag("--json", request.json, "One JSON document on standard output");
    tables->add_flag("--csv", request.csv, "The table as CSV")->excludes(json);
    tables->add_flag("--lint", request.lint, "Every fault of the tables, each with file, line and field");
    tables->add_flag("--summary", request.summary, "Entries counted by status and evidence");
    tables->add_option("--export", request.export_folder, "Write the tables into a new folder")
        ->type_name("DIR");
    add_common(*tables, options);
}

void add_check(CLI::App& program, Options& options) {
    auto& request = options.check;
    auto* check =
        program.add_subcommand("check", "Predictions against literature, each compound left out in turn");
    check->add_option("set", request.sets, "Families or sets such as nitration-poly; nitration by default")
        ->type_name("SET");
    check->add_flag("--all", request.all, "Every family");
    check->add_option("--draws", request.draws.count, "Draws behind the intervals")
        ->check(CLI::Range(10, 100000))
        ->capture_default_str()
        ->type_name("N");
    check->add_option("--seed", request.draws.seed, "Seed of the draws")
        ->check(whole_number)
        ->capture_default_str()
        ->type_name("N");
    auto* json = check->add_flag("--json", request.json, "One JSON document on standard output");
    check->add_flag("--csv", request.csv, "One line an isomer as CSV")->excludes(json);
    check->add_option("--svg", request.svg_file, "Predicted against observed, and calibration, as a picture")
        ->type_name("FILE");
    add_common(*check, options);
}

Knowledge load(const Options& options) {
    if (options.tables_folder.empty())
        return built_in_knowledge();
    auto tables = parse_tables(read_table_folder(options.tables_folder));
    if (const auto faults = missing_safety_rows(tables); !faults.empty())
        throw Error(ErrorKind::tables, faults.front().where, faults.front().message);
    return prepare(std::move(tables));
}

bool wants_json(int argc, char** argv) {
    for (int i = 1; i < argc; ++i)
        if (std::string_view(argv[i]) == "--json")
            return true;
    return false;
}

/// CLI11's complaint as one sentence; an unknown command is named, with the nearest known one.
Error usage_error(const CLI::ParseError& e, const CLI::App& program, int argc, char** argv) {
    std::vector<std::string> commands;
    for (const auto* command : program.get_subcommands({}))
        commands.push_back(command->get_name());
    if (argc > 1 && std::find(commands.begin(), commands.end(), argv[1]) == commands.end()) {
        const std::string word = cli::printable(argv[1]), nearest = nearest_word(word, commands);
        return {ErrorKind::usage, "command line",
                "unknown " + std::string(word.starts_with("-") ? "option" : "command") + " \"" + word + "\"" +
                    (nearest.empty() ? "" : ", is " + nearest + " meant?") + " (isotally --help tells more)"};
    }
    return {ErrorKind::usage, "command line", cli::printable(e.what()) + " (isotally --help tells more)"};
}

int run(int argc, char** argv, std::istream& in, std::ostream& out, std::ostream& err, bool do_it) {
    Options options;
    CLI::App program(
        "isotally: shares of isomers in electrophilic substitution of benzenes, and how sure they are",
        "isotally");
    program.require_subcommand(1);
    program.set_version_flag("--version", [] {
        return "isotally " ISOTALLY_VERSION ", tables " + built_in_knowledge().tables.digest;
    });
    program.footer(std::string(quoting) + "\n" + standing);
    add_step(program, options);
    add_check(program, options);
    add_tables(program, options);
    try {
        program.parse(argc, argv);
    } catch (const CLI::CallForHelp& e) {
        out << program.help();
        return 0;
    } catch (const CLI::CallForVersion& e) {
        out << e.what() << '\n';
        return 0;
    } catch (const CLI::ParseError& e) {
        throw usage_error(e, program, argc, argv);
    }
    options.step.quiet = options.quiet;
    if (!do_it)
        return 0;
    if (program.got_subcommand("step"))
        return cli::step_command(options.step, load(options), in, out, err);
    if (program.got_subcommand("check"))
        return cli::check_command(options.check, load(options), out);
    options.tables.chemistry_faults = [](const Tables& tables) {
        auto faults = lint_chemistry(tables);
        for (auto& fault : missing_safety_rows(tables))
            faults.push_back(std::move(fault));
        return faults;
    };
    options.tables.evidence_counts = [](const Tables& tables) { return count_evidence(prepare(tables)); };
    const auto files =
        options.tables_folder.empty() ? built_in_files() : read_table_folder(options.tables_folder);
    const bool as_they_are = options.tables.lint || !options.tables.export_folder.empty();
    return tables_command(options.tables, as_they_are ? Tables{} : parse_tables(files), files, out, err);
}

}  // namespace

namespace cli {

int command_line(int argc, char** argv, std::istream& in, std::ostream& out, std::ostream& err, bool do_it) {
    const bool json = wants_json(argc, argv);
    try {
        const int status = run(argc, argv, in, out, err, do_it);
        out.flush();
        if (!out)
            return fail({ErrorKind::output, "standard output", "it can't be written"}, false, out, err);
        return status;
    } catch (const Error& e) {
        return fail(e, json, out, err);
    } catch (const std::exception& e) {
        return fail({ErrorKind::defect, "isotally", std::string("a defect of the program: ") + e.what()},
                    json, out, err);
    }
}

}  // namespace cli
}  // namespace isotally
