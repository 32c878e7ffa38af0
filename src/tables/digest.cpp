#include "tables/digest.hpp"

#include <sha256.h>

#include <algorithm>
#include <cstdint>
#include <functional>

namespace isotally {

std::string sha256_hex(std::string_view bytes) {
    SHA256_CTX context;
    SHA256_Init(&context);
    SHA256_Update(&context, reinterpret_cast<const std::uint8_t*>(bytes.data()), bytes.size());
    std::uint8_t digest[SHA256_DIGEST_LENGTH];
    SHA256_Final(digest, &context);
    std::string hex;
    for (const std::uint8_t byte : digest) {
        hex += "0123456789abcdef"[byte >> 4];
        hex += "0123456789abcdef"[byte & 15];
    }
    return hex;
}

std::string digest_of(const std::vector<TableFile>& files) {
    std::vector<std::reference_wrapper<const TableFile>> sorted(files.begin(), files.end());
    std::sort(sorted.begin(), sorted.end(),
              [](const TableFile& a, const TableFile& b) { return a.name < b.name; });
    std::string lines;
    for (const TableFile& file : sorted)
        lines += sha256_hex(file.text) + "  " + file.name + "\n";
    return "sha256:" + sha256_hex(lines);
}

}  // namespace isotally
