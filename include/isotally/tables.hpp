// What is known and from where: the records of tables/, read strictly, with their provenance.
#pragma once

#include <array>
#include <cstdint>
#include <limits>
#include <map>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "isotally/error.hpp"

namespace isotally {

/// Where a figure comes from. `status` is seen, memory, practice, derived or invented.
struct Provenance {
    std::string source;   // id in sources.json; empty only for status practice and derived
    std::string locator;  // page, table, row; for derived: the command
    std::string status;
    std::string confidence;  // high, medium, low or empty
    std::string note;
    std::size_t line = 0;  // on which the record begins in its file
};

struct Figure {
    double value = std::numeric_limits<double>::quiet_NaN();
    double sd = std::numeric_limits<double>::quiet_NaN();
    Provenance from;
};

/// A group on a benzene ring (a row of substituents.csv).
struct Substituent {
    std::string id;    // "NO2"
    std::string name;  // "nitro"
    std::string
        smiles;  // canonical, attachment first written as *: "*[N+](=O)[O-]"; empty for a generic class
    std::string smarts;     // generic class only: pattern on the group with its attachment as [#0]
    int rank = 0;           // generic classes: the lowest rank that matches wins, ties by id
    std::string like;       // id of the group whose constants stand in where its own are missing
    std::string kind;       // alkyl, halogen, donor, acceptor, cation, benzylic, aryl, alkenyl, silyl
    std::string prefix;     // nomenclature: "nitro", "trifluoromethyl", "propan-2-yl"; empty: none
    std::string principal;  // nomenclature: characteristic group (see names.hpp); empty: prefix only
    std::map<std::string, Figure> constants;  // by quantity, the row with use yes
    std::size_t line = 0;
};

/// A row of constants.csv: sigma_m, sigma_p, sigma_m_plus, sigma_p_plus, charton_nu.
struct Constant {
    std::string substituent, quantity;
    Figure figure;
    bool use = false;  // one row of each substituent and quantity is used, the others stand beside it
};

/// Conditions under which a group is put on (a row of reactions.csv with its rows of reaction_figures.csv).
struct Reaction {
    std::string id, family, name, conditions;
    std::string new_group;  // SMILES of the group it puts on, "*[N+](=O)[O-]"
    bool has_acid = false;  // sulfuric acid strength is a condition of this reaction
    std::string note;       // reversible or rearranging: said with every answer; may be empty
    std::string instead;    // what people do where a ring lies below the floor, "people ... instead"
    std::map<std::string, Figure> figures;  // temperature_default_C, acid_default_percent, rho, floor ...
};

/// What a medium makes of a group (a row of states.csv).
struct State {
    std::vector<std::string> reactions;  // reaction ids or families
    std::string group;                   // substituent id, or "kind:acceptor", or "principal:ketone"
    std::string state;                   // substituent id
    double acid_from = 0, acid_to = 0;   // weight percent; both 0: any
    std::string both_forms;              // yes, minor, no
    Provenance from;
};

/// A named ban (a row of bans.csv).
struct Ban {
    std::string id;
    std::vector<std::string> reactions;  // reaction ids or family names; "*" for all
    std::string smarts;                  // on the whole molecule
    std::string unless;                  // SMARTS: not banned where this matches; may be empty
    std::string reason, instead;
    Provenance from;
};

/// A caution (a row of cautions.csv), shown when the reaction and the patterns match; worst first.
struct Caution {
    std::string code;
    std::vector<std::string> reactions;            // as in Ban
    std::string substrate_smarts, product_smarts;  // empty: any
    int severity = 0;                              // 100 worst
    std::string text;
    Provenance from;
};

struct ProductShare {
    std::string smiles;
    double percent = 0;
    std::optional<double> sd;  // points, where the source gives one
};

/// Isomer shares of one substrate (a record of measurements.json).
struct Measurement {
    std::string id, reaction, substrate, method, basis, control;
    std::optional<double> temperature_C, acid_percent;
    std::vector<ProductShare> products;
    bool complete = true;  // every isomer above about 1 % is listed
    std::string use;       // yes, weak, partial, bound, no
    std::string use_reason;
    Provenance from;
};

/// One partial rate factor (a row of factors.csv) or relative rate (a row of rates.csv, relation empty).
struct RateFigure {
    std::string id, reaction, substrate;
    std::string relation;  // ortho, meta, para; empty: whole molecule
    std::optional<double> temperature_C, acid_percent;
    double value = 0;  // relative to benzene (one position of it, for a factor)
    double sd_log10 = 0;
    std::string use, use_reason;
    Provenance from;
};

struct Name {
    std::string name, smiles;
    bool preferred = true;  // printed as well as read
    Provenance from;
};

struct Source {
    std::string id;
    std::string citation;  // one line made from the CSL-JSON record
    std::string json;      // the record itself
};

/// A row of model.csv: priors and standard deviations of the model, by family ("all": every family).
struct ModelFigure {
    std::string family, quantity;
    Figure figure;
};

struct Tables {
    std::string version, digest;  // digest: "sha256:..." over all files in order of name
    std::vector<Substituent> substituents;
    std::vector<Constant> constants;
    std::vector<Reaction> reactions;
    std::vector<ModelFigure> model;
    std::vector<State> states;
    std::vector<Ban> bans;
    std::vector<Caution> cautions;
    std::vector<Measurement> measurements;
    std::vector<RateFigure> rates;  // factors.csv and rates.csv
    std::vector<Name> names;
    std::vector<Source> sources;
};

struct TableFile {
    std::string name;  // "constants.csv"
    std::string text;
};

struct Fault {
    std::string where;  // "constants.csv:41:value"
    std::string message;
};

/// The files of a tables folder in order of name. Throws Error{tables} where it can't be read.
std::vector<TableFile> read_table_folder(const std::string& folder);

/// Every fault of the files that can be seen without chemistry, each with file, line and field.
std::vector<Fault> lint_tables(const std::vector<TableFile>& files);

/// Reads the files; throws Error{tables} on the first fault.
Tables parse_tables(const std::vector<TableFile>& files);

/// Index of a substituent or reaction by id, or -1.
int find_substituent(const Tables& tables, std::string_view id);
int find_reaction(const Tables& tables, std::string_view id);

/// The families of the reactions, each once, in the order of reactions.csv.
std::vector<std::string> families_of(const Tables& tables);

/// Whether a row's `reactions` (ids, families or "*") name this one.
bool applies_to(const std::vector<std::string>& reactions, std::string_view id, std::string_view family);
bool applies_to(const std::vector<std::string>& reactions, const Reaction& reaction);

/// The figure of model.csv for this family, else that for "all". Throws Error{tables} if neither stands.
const Figure& model_figure(const Tables& tables, std::string_view family, std::string_view quantity);

/// The known word nearest to a misspelt one (edit distance), or empty where nothing is near.
std::string nearest_word(std::string_view word, const std::vector<std::string>& known);

}  // namespace isotally
