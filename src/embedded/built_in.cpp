#include "isotally/built_in.hpp"

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

std::vector<TableFile> built_in_files() {
    return unpack_files(packed());
}

}  // namespace isotally
