#include "molecule_argument.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cctype>
#include <filesystem>
#include <fstream>
#include <iterator>

#include "status.hpp"

namespace isotally::cli {
namespace {

constexpr std::size_t longest_argument = 1000;

std::string lower_case(std::string text) {
    for (char& c : text)
        c = static_cast<char>(std::tolower(static_cast<unsigned char>(c)));
    return text;
}

Answer<Arene> from_molfile(const Knowledge& knowledge, const std::string& path) {
    std::ifstream file(path, std::ios::binary);
    if (!file || !std::filesystem::is_regular_file(path))
        throw Error(ErrorKind::input, path, "the molfile can't be opened");
    std::string text(longest_molfile + 1, '\0');
    file.read(text.data(), static_cast<std::streamsize>(text.size()));
    if (file.bad())
        throw Error(ErrorKind::input, path, "the molfile can't be read");
    text.resize(static_cast<std::size_t>(file.gcount()));
    try {
        return parse_molfile(knowledge.tables, knowledge.groups, text);
    } catch (const Error& e) {
        throw Error(e.kind, path + ", " + e.where, e.what());
    }
}

/// SMILES of a known name or of a name the program writes itself; empty if it is neither.
std::string smiles_of_name(const Knowledge& knowledge, const std::string& text) {
    const std::string wanted = lower_case(text);
    for (const auto& known : knowledge.tables.names)
        if (lower_case(known.name) == wanted)
            return known.smiles;
    if (const auto groups = read_ring_name(knowledge.tables, text))
        return ring_smiles(knowledge.tables, *groups);
    return {};
}

/// A carbon with the number of a ring closure: every SMILES of a benzene has one, no name does.
bool is_plainly_smiles(std::string_view text) {
    for (std::size_t i = 1; i < text.size(); ++i)
        if ((text[i - 1] == 'c' || text[i - 1] == 'C') &&
            (text[i] == '%' || (text[i] >= '0' && text[i] <= '9')))
            return true;
    return false;
}

/// Does it look like a misspelt name rather than a SMILES? Names have letters no SMILES of a benzene needs.
std::string name_hint(const Tables& tables, const std::string& text) {
    std::vector<std::string> names;
    for (const auto& known : tables.names)
        names.push_back(known.name);
    const auto nearest = nearest_word(lower_case(text), names);
    return nearest.empty() ? "" : fmt::format("; is the name \"{}\" meant?", nearest);
}

}  // namespace

Answer<Arene> read_molecule(const Knowledge& knowledge, const std::string& text) {
    if (text.ends_with(".mol") && text.size() <= longest_argument)
        return from_molfile(knowledge, text);
    return read_listed_molecule(knowledge, text, *new_workspace());
}

Answer<Arene> read_listed_molecule(const Knowledge& knowledge, const std::string& text,
                                   Workspace& workspace) {
    if (text.size() > longest_argument)
        throw Error(ErrorKind::input, "molecule",
                    fmt::format("{} characters, at most {} are read", text.size(), longest_argument));
    if (!is_plainly_smiles(text))
        if (const auto known = smiles_of_name(knowledge, text); !known.empty())
            return parse_arene(knowledge.tables, knowledge.groups, known, workspace);
    try {
        return parse_arene(knowledge.tables, knowledge.groups, text, workspace);
    } catch (const Error& e) {
        throw Error(e.kind, e.where,
                    fmt::format("\"{}\" is neither a known name nor a SMILES: {}{}",
                                printable(text.substr(0, 60)), e.what(), name_hint(knowledge.tables, text)));
    }
}

int read_reaction(const Tables& tables, const std::string& id) {
    const int found = find_reaction(tables, id);
    if (found >= 0)
        return found;
    std::vector<std::string> known;
    for (const auto& reaction : tables.reactions)
        known.push_back(reaction.id);
    const auto nearest = nearest_word(id, known);
    throw Error(ErrorKind::usage, "option --reaction",
                fmt::format("there is no reaction \"{}\"{}; isotally tables reactions lists them",
                            printable(id.substr(0, 60)),
                            nearest.empty() ? "" : " (the nearest is " + nearest + ")"));
}

}  // namespace isotally::cli
