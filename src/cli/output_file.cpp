#include "output_file.hpp"

#include <unistd.h>

#include <cstdio>
#include <filesystem>
#include <fstream>

#include "isotally/error.hpp"

namespace isotally::cli {

void write_file(const std::string& path, const std::string& text) {
    const std::string temporary = path + ".new" + std::to_string(::getpid());
    std::ofstream out(temporary, std::ios::binary);
    out << text;
    out.close();
    if (!out || std::rename(temporary.c_str(), path.c_str()) != 0) {
        std::error_code ignored;
        std::filesystem::remove(temporary, ignored);
        throw Error(ErrorKind::output, path, "the file can't be written");
    }
}

}  // namespace isotally::cli
