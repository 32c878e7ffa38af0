#include <GraphMol/FileParsers/FileParsers.h>
#include <fmt/format.h>

#include <charconv>

#include "toolkit.hpp"

namespace isotally::toolkit {
namespace {

[[noreturn]] void fail(std::size_t line, const std::string& message) {
    throw Error(ErrorKind::input, line ? fmt::format("molfile line {}", line) : "molfile", message);
}

std::vector<std::string> lines_of(std::string_view text) {
    std::vector<std::string> lines;
    while (!text.empty()) {
        const auto end = text.find('\n');
        auto line = text.substr(0, end);
        if (!line.empty() && line.back() == '\r')
            line.remove_suffix(1);
        lines.emplace_back(line);
        if (end == std::string_view::npos)
            break;
        text.remove_prefix(end + 1);
    }
    return lines;
}

unsigned count_field(const std::string& line, std::size_t at, std::size_t number_of_line, const char* what) {
    std::string field = line.size() > at ? line.substr(at, 3) : "";
    field.erase(0, field.find_first_not_of(' '));
    unsigned value = 0;
    const auto [end, problem] = std::from_chars(field.data(), field.data() + field.size(), value);
    if (field.empty() || problem != std::errc() || end != field.data() + field.size())
        fail(number_of_line, fmt::format("found \"{}\" where the number of {} was expected", field, what));
    return value;
}

/// The parser believes the counts line; look whether the lines it promises are there.
void check_v2000(const std::vector<std::string>& lines) {
    const unsigned atoms = count_field(lines[3], 0, 4, "atoms");
    const unsigned bonds = count_field(lines[3], 3, 4, "bonds");
    if (atoms == 0)
        fail(4, "the counts line promises no atom");
    if (atoms > most_atoms)
        fail(4, fmt::format("{} atoms, at most {} are read", atoms, most_atoms));
    if (lines.size() < 4u + atoms + bonds)
        fail(4, fmt::format("the counts line promises {} atoms and {} bonds, but only {} lines follow", atoms,
                            bonds, lines.size() - 4));
    for (std::size_t i = 4u + atoms; i < 4u + atoms + bonds; ++i)
        for (const std::size_t at : {std::size_t{0}, std::size_t{3}})
            if (const unsigned end = count_field(lines[i], at, i + 1, "an atom"); end < 1 || end > atoms)
                fail(i + 1, fmt::format("a bond to atom {}, but the atoms are numbered 1 to {}", end, atoms));
    for (std::size_t i = 4; i < 4u + atoms; ++i)
        if (lines[i].size() < 34)
            fail(i + 1, "this is no atom line (coordinates and a symbol were expected)");
}

void check_v3000(const std::vector<std::string>& lines) {
    for (std::size_t i = 4; i < lines.size(); ++i) {
        const auto at = lines[i].find("COUNTS ");
        if (at == std::string::npos)
            continue;
        unsigned atoms = 0, bonds = 0;
        const char* begin = lines[i].data() + at + 7;
        const char* end = lines[i].data() + lines[i].size();
        auto read = std::from_chars(begin, end, atoms);
        if (read.ec != std::errc() || read.ptr == end)
            fail(i + 1, "the COUNTS line gives no number of atoms");
        read = std::from_chars(read.ptr + 1, end, bonds);
        if (read.ec != std::errc())
            fail(i + 1, "the COUNTS line gives no number of bonds");
        if (atoms == 0)
            fail(i + 1, "the COUNTS line promises no atom");
        if (atoms > most_atoms)
            fail(i + 1, fmt::format("{} atoms, at most {} are read", atoms, most_atoms));
        if (lines.size() - i < static_cast<std::size_t>(atoms) + bonds)
            fail(i + 1,
                 fmt::format("the COUNTS line promises {} atoms and {} bonds, but only {} lines follow",
                             atoms, bonds, lines.size() - i - 1));
        return;
    }
    fail(4, "the molfile says V3000 but has no COUNTS line");
}

}  // namespace

std::unique_ptr<RDKit::RWMol> read_molfile(std::string_view text) {
    if (text.size() > longest_molfile)
        fail(0, "larger than 1 MiB");
    if (text.find('\0') != std::string_view::npos)
        fail(0, "it holds zero bytes, so it is no text file");
    auto lines = lines_of(text);
    if (lines.size() < 4)
        fail(0, fmt::format("{} lines, a molfile has at least 4", lines.size()));
    const bool v3000 = lines[3].find("V3000") != std::string::npos;
    if (!v3000 && lines[3].find("V2000") == std::string::npos)
        fail(4, "neither V2000 nor V3000 stands on the fourth line, so it is no molfile");
    v3000 ? check_v3000(lines) : check_v2000(lines);
    std::string block;
    for (const auto& line : lines)
        block += line + '\n';
    std::unique_ptr<RDKit::RWMol> mol;
    try {
        mol.reset(RDKit::MolBlockToMol(block, true, true, true));
    } catch (const std::exception& e) {
        std::string reason = e.what();
        for (auto& c : reason)
            if (c == '\n')
                c = ' ';
        fail(0, "it can't be read: " + reason);
    }
    if (!mol || mol->getNumAtoms() == 0)
        fail(0, "it holds no molecule");
    if (mol->getNumAtoms() > most_atoms)
        fail(0, fmt::format("{} atoms, at most {} are read", mol->getNumAtoms(), most_atoms));
    for (const auto* atom : mol->atoms())
        if (atom->hasQuery())
            fail(0, fmt::format("atom {} is a query (a list or a class of elements), not an element",
                                atom->getIdx() + 1));
    for (const auto* bond : mol->bonds())
        if (bond->hasQuery())
            fail(0,
                 fmt::format("bond {} is a query (several orders at once), not a bond", bond->getIdx() + 1));
    return mol;
}

}  // namespace isotally::toolkit
