// CSV and JSON of a tables folder: the first byte says which file, the rest is its text.
#include "input.hpp"

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
    using namespace isotally;
    static const auto files = built_in_files();
    if (size == 0)
        return 0;
    const auto& file = files[data[0] % files.size()];
    for (const auto& fault : lint_tables({{file.name, fuzz::text_of(data + 1, size - 1)}}))
        fuzz::require(!fault.where.empty() && !fault.message.empty() &&
                      fault.message.find('\n') == std::string::npos);
    return 0;
}
