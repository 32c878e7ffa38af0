// Molfiles, V2000 and V3000.
#include "input.hpp"

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
    using namespace isotally;
    try {
        const auto arene =
            parse_molfile(fuzz::knowledge().tables, fuzz::knowledge().groups, fuzz::text_of(data, size));
        if (const auto* refused = refusal(arene))
            fuzz::require(!refused->reason.empty());
    } catch (const Error& error) {
        fuzz::require(error.kind == ErrorKind::input && !error.where.empty());
    }
    return 0;
}
