// What the writer and the reader of ring names share: the parent structures and a plan of one name.
#pragma once

#include <array>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "isotally/names.hpp"

namespace isotally::name_parts {

using Locants = std::array<int, 6>;

/// A class of characteristic groups and the parent it makes of a benzene ring.
struct Family {
    std::string_view principal = {};   // Substituent::principal, whole or up to its colon
    std::string_view prefix = {};      // also known by this prefix
    bool aryl = false;                 // the ring is a substituent of the parent, not its bearer
    bool single = false;               // no name here for more than one of them on a ring
    std::string_view ring = "phenyl";  // what an aryl family calls the ring
    std::string_view retained = {};    // parent for one group: "benzoic acid"
    std::string_view suffix = {};      // "carboxylic acid"; with aryl the parent: "acetamide"
    std::string_view halide = {};      // second word: "chloride"
    std::string_view lead = {};        // locant of the ring on the parent: "N", "1"
    std::string_view mate = {};        // what else the parent carries: the phenyl of diphenylmethanone
    std::string_view ester = {};       // first word: "methyl "
    std::string_view joint = {};       // multiplied as "": diacetamide, "di": di(ethan-1-one), "bis"
    std::string_view general = {};     // parent the trade uses: "acetanilide"
};

/// All families, senior ones first (P-41; rings before chains within a class, P-44.1.2).
std::span<const Family> families();

/// A parent that is one group on the ring, at locant 1, by the prefix of that group.
struct Stem {
    std::string_view prefix, stem;
};

/// Principal groups of substituents that are given by their prefix alone.
std::span<const Stem> aliases();

/// Parents of general names, and names that exist for one unsubstituted compound only.
std::span<const Stem> general_stems();
std::span<const Stem> whole_names();

/// One prefix and the ring positions (0..5) that it is cited for, on the ring and on nitrogen there.
struct Cited {
    std::string word;
    std::vector<int> ring, nitrogen;
};

struct Plan {
    int family = -1;             // index in families(); -1: no characteristic group is expressed as parent
    std::string stem;            // parent with its group at locant 1; empty: made from the family
    std::vector<int> principal;  // ring positions
    std::vector<Cited> cited;    // in alphabetical order
    std::vector<Cited> esters;   // the alcohol parts likewise
};

/// Index in families() of the class of this group; -1: prefix only; -2: a class that isn't known here.
int family_of(const Substituent& group);

/// "N,N-dimethyl" of the principal "amine:N,N-dimethyl" as {"methyl", "methyl"}, sorted.
std::vector<std::string> nitrogen_words(const Substituent& group);

/// The alcohol part of an ester, or empty.
std::string ester_word(const Substituent& group);

std::optional<Plan> systematic_plan(const Tables& tables, const RingGroups& groups);
std::optional<Plan> general_plan(const Tables& tables, const RingGroups& groups, const Plan& systematic);

/// The name for this numbering, whether or not it is the lowest.
std::string compose(const Plan& plan, const Locants& locants);

/// Locants of these positions, ascending.
std::vector<int> sorted_locants(const std::vector<int>& positions, const Locants& locants);

/// What decides alphabetical order (P-14.5): letters only, italic ones and locants not counted.
std::string alphabet_key(std::string_view word);

/// "di", "tri" ... for 2 to 6; empty for 1.
std::string_view multiplier(std::size_t count);

/// "bis", "tris" ... for 2 to 6; empty for 1.
std::string_view compound_multiplier(std::size_t count);

/// "dicarboxylic acid", "tetrol", "dicarbonyl dichloride".
std::string multiplied_suffix(const Family& family, std::size_t count);

/// What stands before and after the ring in the name of an aryl family, in every order it may take.
std::vector<std::pair<std::string, std::string>> frames(const Family& family, std::size_t count);

}  // namespace isotally::name_parts
