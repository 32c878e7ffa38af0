// Systematic names: what is read must be named again, and read back as the same ring.
#include "input.hpp"

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
    using namespace isotally;
    const auto& tables = fuzz::knowledge().tables;
    const auto groups = read_ring_name(tables, fuzz::text_of(data, size));
    if (!groups)
        return 0;
    const auto name = name_ring(tables, *groups);
    fuzz::require(name.systematic.has_value());
    fuzz::require(read_ring_name(tables, *name.systematic).has_value());
    return 0;
}
