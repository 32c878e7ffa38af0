#include "isotally/built_in.hpp"

#include <algorithm>
#include <string_view>

#include "packing.hpp"

extern "C" const char isotally_tables_pack_begin[];
extern "C" const char isotally_tables_pack_end[];

namespace isotally {
namespace {

std::string_view packed() {
    return {isotally_tables_pack_begin,
            static_cast<std::size_t>(isotally_tables_pack_end - isotally_tables_pack_begin)};
}

}  // namespace

Knowledge built_in_knowledge() {
    return unpack_knowledge(packed());
}

std::vector<Fault> missing_safety_rows(const Tables& tables) {
    std::vector<Fault> faults;
    for (const auto& wanted : built_in_knowledge().tables.bans) {
        if (!wanted.id.starts_with("energetic-"))
            continue;
        const auto same = [&](const Ban& ban) { return ban.id == wanted.id && ban.smarts == wanted.smarts; };
        if (std::none_of(tables.bans.begin(), tables.bans.end(), same))
            faults.push_back(
                {"bans.csv:id", "the row " + wanted.id + " is missing or its smarts is altered, expected \"" +
                                    wanted.smarts + "\": rows that decline energetic molecules stay"});
    }
    return faults;
}

std::vector<TableFile> built_in_files() {
    return unpack_files(packed());
}

}  // namespace isotally
