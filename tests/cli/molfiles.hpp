// Molfiles of toluene, good and broken.
#pragma once

#include <stdexcept>
#include <string>
#include <utility>
#include <vector>

namespace isotally::cli_test {

inline const std::string v2000 = R"(toluene
  made by hand

  7  7  0  0  0  0  0  0  0  0999 V2000
    2.5714    0.0000    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
    1.0714    0.0000    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
    0.3214   -1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -1.1786   -1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -1.9286    0.0000    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
   -1.1786    1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
    0.3214    1.2990    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0
  1  2  1  0
  2  3  2  0
  3  4  1  0
  4  5  2  0
  5  6  1  0
  6  7  2  0
  7  2  1  0
M  END
)";

inline const std::string v3000 = R"(toluene
  made by hand

  0  0  0     0  0            999 V3000
M  V30 BEGIN CTAB
M  V30 COUNTS 7 7 0 0 0
M  V30 BEGIN ATOM
M  V30 1 C 2.5714 0 0 0
M  V30 2 C 1.0714 0 0 0
M  V30 3 C 0.3214 -1.299 0 0
M  V30 4 C -1.1786 -1.299 0 0
M  V30 5 C -1.9286 0 0 0
M  V30 6 C -1.1786 1.299 0 0
M  V30 7 C 0.3214 1.299 0 0
M  V30 END ATOM
M  V30 BEGIN BOND
M  V30 1 1 1 2
M  V30 2 2 2 3
M  V30 3 1 3 4
M  V30 4 2 4 5
M  V30 5 1 5 6
M  V30 6 2 6 7
M  V30 7 1 7 2
M  V30 END BOND
M  V30 END CTAB
M  END
)";

inline std::string with(std::string text, const std::string& from, const std::string& to) {
    const auto at = text.find(from);
    if (at == std::string::npos)
        throw std::logic_error("nothing to replace: " + from);
    return text.replace(at, from.size(), to);
}

inline std::string with_crlf(const std::string& text) {
    std::string out;
    for (const char c : text)
        out += c == '\n' ? std::string("\r\n") : std::string(1, c);
    return out;
}

inline std::string first_lines(const std::string& text, int count) {
    std::size_t end = 0;
    for (int i = 0; i < count; ++i)
        end = text.find('\n', end) + 1;
    return text.substr(0, end);
}

/// What is wrong, and the file.
inline std::vector<std::pair<std::string, std::string>> broken_molfiles() {
    using namespace std::string_literals;
    std::vector<std::pair<std::string, std::string>> all = {
        {"empty", ""},
        {"one SMILES", "Cc1ccccc1\n"},
        {"a page", "<!doctype html>\n<html>\n<body>\n<p>toluene</p>\n</body>\n</html>\n"},
        {"an ELF program", "\x7f"
                           "ELF\x02\x01\x01\0\0\0\0\0\0\0\0\0\x03\0>\0\x01\0\0\0"s},
        {"a picture", "\x89PNG\r\n\x1a\n\0\0\0\rIHDR\0\0\0\x10\0\0\0\x10\x08\x06"s},
        {"a picture without zero bytes", "\x89PNG\r\n\x1a\n\r\n\x01\r\nIHDR\r\n\xff\xfe\r\n"},
        {"V2000 cut in the header", first_lines(v2000, 2)},
        {"V2000 cut among the atoms", first_lines(v2000, 8)},
        {"V2000 cut among the bonds", first_lines(v2000, 14)},
        {"V2000 cut within a line", v2000.substr(0, v2000.size() / 2)},
        {"V2000 promises more atoms", with(v2000, "  7  7", "  9  7")},
        {"V2000 promises fewer atoms", with(v2000, "  7  7", "  5  7")},
        {"V2000 promises more bonds", with(v2000, "  7  7", "  7 20")},
        {"V2000 promises fewer bonds", with(v2000, "  7  7", "  7  6")},
        {"V2000 promises nothing", with(v2000, "  7  7", "  0  0")},
        {"V2000 promises the most", with(v2000, "  7  7", "999999")},
        {"V2000 promises less than nothing", with(v2000, "  7  7", " -7  7")},
        {"V2000 has no number", with(v2000, "  7  7", "  a  7")},
        {"V2000 has a bond to an atom that is not there", with(v2000, "  7  2  1", "  7 99  1")},
        {"V2000 has a bond to atom 0", with(v2000, "  7  2  1", "  7  0  1")},
        {"V2000 has an unknown element", with(v2000, "0.0000 C ", "0.0000 Zz")},
        {"V3000 cut in the header", first_lines(v3000, 4)},
        {"V3000 cut among the atoms", first_lines(v3000, 9)},
        {"V3000 cut among the bonds", first_lines(v3000, 20)},
        {"V3000 promises more atoms", with(v3000, "COUNTS 7 7", "COUNTS 9 7")},
        {"V3000 promises fewer atoms", with(v3000, "COUNTS 7 7", "COUNTS 5 7")},
        {"V3000 promises more bonds", with(v3000, "COUNTS 7 7", "COUNTS 7 9")},
        {"V3000 promises fewer bonds", with(v3000, "COUNTS 7 7", "COUNTS 7 6")},
        {"V3000 promises nothing", with(v3000, "COUNTS 7 7", "COUNTS 0 0")},
        {"V3000 promises four thousand million", with(v3000, "COUNTS 7 7", "COUNTS 4000000000 7")},
        {"V3000 promises bonds without end", with(v3000, "COUNTS 7 7", "COUNTS 7 4294967290")},
        {"V3000 promises more than fits", with(v3000, "COUNTS 7 7", "COUNTS 99999999999999999999 7")},
        {"V3000 promises less than nothing", with(v3000, "COUNTS 7 7", "COUNTS -7 7")},
        {"V3000 without counts", with(v3000, "M  V30 COUNTS 7 7 0 0 0\n", "")},
        {"V3000 has a bond to an atom that is not there", with(v3000, "7 1 7 2", "7 1 7 99")},
    };
    return all;
}

}  // namespace isotally::cli_test
