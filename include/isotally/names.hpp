// What a substituted benzene is called: IUPAC 2013 names of simple benzenes, and back.
#pragma once

#include <array>
#include <optional>
#include <string>
#include <string_view>

#include "isotally/tables.hpp"

namespace isotally {

/// Six ring positions in order round the ring: index into Tables::substituents, or -1 for hydrogen.
using RingGroups = std::array<int, 6>;

struct RingName {
    std::optional<std::string> systematic;  // "1-methyl-2-nitrobenzene"; none where the rules end
    std::optional<std::string> general;     // "2-nitrotoluene": what the trade says, if it differs
    std::array<int, 6> locants{};           // locant (1..6) of each ring position, always filled
};

/// Name and numbering of one benzene ring by the IUPAC recommendations of 2013. Every numbering obeys the
/// rules in order: principal characteristic groups lowest, all prefixes together lowest, first cited prefix
/// lowest (P-31.1.4); the same answer whatever position the list starts at and whichever way round it runs.
/// Where there is no systematic name: all groups together lowest, then in order of id.
/// No systematic name: a group without prefix that is not the principal one, a principal group of an unknown
/// class, several rings in a chain (phenyl beside a senior group). Locants on nitrogen count after those on
/// the ring. An index beyond tables.substituents throws std::out_of_range.
RingName name_ring(const Tables& tables, const RingGroups& groups);

/// Reads any name that name_ring writes, systematic or general, case ignored; also with its prefixes in
/// another order, with another legal numbering and without the brackets round a compound prefix. The pattern
/// starts at locant 1 of the name. None where the pattern, written with that numbering, isn't that name.
std::optional<RingGroups> read_ring_name(const Tables& tables, std::string_view name);

}  // namespace isotally
