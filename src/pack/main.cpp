// isotally_pack TABLES_DIR OUT_FILE: turns tables/ into what the library embeds.
#include <cstdio>
#include <fstream>
#include <iostream>

#include "packing.hpp"

int main(int argc, char** argv) {
    if (argc != 3) {
        std::cerr << "usage: isotally_pack TABLES_DIR OUT_FILE\n";
        return 2;
    }
    try {
        const auto files = isotally::read_table_folder(argv[1]);
        const auto faults = isotally::lint_tables(files);
        for (const auto& fault : faults)
            std::cerr << fault.where << ": " << fault.message << '\n';
        if (!faults.empty())
            return 4;
        const auto packed = isotally::pack(isotally::prepare(isotally::parse_tables(files)), files);
        const std::string temporary = std::string(argv[2]) + ".new";
        std::ofstream out(temporary, std::ios::binary);
        out.write(packed.data(), static_cast<std::streamsize>(packed.size()));
        out.close();
        if (!out || std::rename(temporary.c_str(), argv[2]) != 0) {
            std::cerr << argv[2] << ": can't be written\n";
            return 5;
        }
    } catch (const isotally::Error& e) {
        std::cerr << e.where << ": " << e.what() << '\n';
        return 4;
    }
    return 0;
}
