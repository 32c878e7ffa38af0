#include <GraphMol/SmilesParse/SmilesParse.h>
#include <GraphMol/SmilesParse/SmilesWrite.h>
#include <RDGeneral/RDLog.h>
#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <mutex>
#include <optional>
#include <shared_mutex>
#include <sstream>

#include "toolkit.hpp"

namespace isotally::toolkit {
namespace {

[[noreturn]] void fail(const std::string& where, const std::string& message) {
    throw Error(ErrorKind::input, where, message);
}

[[noreturn]] void fail_at(std::size_t character, const std::string& message) {
    fail(fmt::format("SMILES character {}", character + 1), message);
}

void check_bytes(std::string_view smiles) {
    if (smiles.empty())
        fail("SMILES", "the text is empty, a SMILES or a known name was expected");
    if (smiles.size() > longest_smiles)
        fail("SMILES", fmt::format("{} characters, at most {} are read", smiles.size(), longest_smiles));
    for (std::size_t i = 0; i < smiles.size(); ++i) {
        const auto byte = static_cast<unsigned char>(smiles[i]);
        if (byte <= 0x20 || byte > 0x7e)
            fail_at(i, fmt::format("byte 0x{:02x} has no place in a SMILES (blanks, control characters and "
                                   "letters beyond ASCII, such as a long dash, are not read)",
                                   byte));
    }
}

/// Faults that a glance finds, with their place: brackets, parentheses, ring closures left open.
void check_pairs(std::string_view smiles) {
    std::vector<std::size_t> open;
    std::array<std::optional<std::size_t>, 100> ring{};
    for (std::size_t i = 0; i < smiles.size(); ++i) {
        const char c = smiles[i];
        if (c == '[') {
            const auto end = smiles.find(']', i);
            if (end == std::string_view::npos)
                fail_at(i, "this bracket is never closed");
            i = end;
        } else if (c == ']') {
            fail_at(i, "this bracket was never opened");
        } else if (c == '(') {
            open.push_back(i);
        } else if (c == ')') {
            if (open.empty())
                fail_at(i, "this parenthesis was never opened");
            open.pop_back();
        } else if ((c >= '0' && c <= '9') || c == '%') {
            const auto start = i;
            unsigned number = static_cast<unsigned>(c - '0');
            if (c == '%') {
                if (i + 2 >= smiles.size() || !std::isdigit(static_cast<unsigned char>(smiles[i + 1])) ||
                    !std::isdigit(static_cast<unsigned char>(smiles[i + 2])))
                    fail_at(i, "two digits were expected after %");
                number = static_cast<unsigned>((smiles[i + 1] - '0') * 10 + (smiles[i + 2] - '0'));
                i += 2;
            }
            if (ring[number])
                ring[number].reset();
            else
                ring[number] = start;
        }
    }
    if (!open.empty())
        fail_at(open.back(), "this parenthesis is never closed");
    for (unsigned number = 0; number < ring.size(); ++number)
        if (ring[number])
            fail_at(*ring[number], fmt::format("ring closure {} is never closed", number));
}

/// The parser's log is global: whoever parses may write to it, whoever reads it puts another in its place.
std::shared_mutex& log_mutex() {
    static std::shared_mutex mutex;
    return mutex;
}

/// The parser reports syntax faults only to its log.
std::string parser_complaint(const std::string& smiles) {
    const std::unique_lock lock(log_mutex());
    std::ostringstream log;
    const auto former = rdErrorLog;
    rdErrorLog = std::make_shared<boost::logging::rdLogger>(&log);
    try {
        const std::unique_ptr<RDKit::RWMol> ignored(RDKit::SmilesToMol(smiles));
    } catch (const std::exception&) {
    }
    rdErrorLog = former;
    std::string text = log.str();
    const std::string mark = "SMILES Parse Error: ";
    const auto begin = text.find(mark);
    if (begin == std::string::npos)
        return "it can't be read";
    text = text.substr(begin + mark.size());
    text = text.substr(0, text.find('\n'));
    for (const char* tail : {" while parsing", " for input"})
        text = text.substr(0, text.find(tail));
    return text;
}

}  // namespace

std::unique_ptr<RDKit::RWMol> parse(const std::string& smiles) {
    const std::shared_lock lock(log_mutex());
    RDKit::SmilesParserParams how;
    how.removeHs = smiles.find('H') != std::string::npos;  // the search alone costs a tenth of the reading
    return std::unique_ptr<RDKit::RWMol>(RDKit::SmilesToMol(smiles, how));
}

std::string write_smiles(const RDKit::ROMol& mol) {
    bool marked = false;
    for (const auto* atom : mol.atoms())
        marked |= atom->getChiralTag() != RDKit::Atom::CHI_UNSPECIFIED || atom->getIsotope() != 0;
    for (const auto* bond : mol.bonds())
        marked |= bond->getStereo() != RDKit::Bond::STEREONONE || bond->getBondDir() != RDKit::Bond::NONE;
    return RDKit::MolToSmiles(mol, marked);
}

std::unique_ptr<RDKit::RWMol> read_smiles(std::string_view smiles) {
    check_bytes(smiles);
    const std::string text(smiles);
    std::unique_ptr<RDKit::RWMol> mol;
    try {
        mol = parse(text);
    } catch (const std::exception& e) {
        check_pairs(smiles);
        fail("SMILES", e.what());
    }
    if (!mol) {
        check_pairs(smiles);
        fail("SMILES", parser_complaint(text));
    }
    if (mol->getNumAtoms() == 0)
        fail("SMILES", "it holds no atom");
    if (mol->getNumAtoms() > most_atoms)
        fail("SMILES", fmt::format("{} atoms, at most {} are read", mol->getNumAtoms(), most_atoms));
    return mol;
}

}  // namespace isotally::toolkit
