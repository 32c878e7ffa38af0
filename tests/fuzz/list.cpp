// Lines of a list, and each molecule in them as far as its groups.
#include <sstream>

#include "cli/list_lines.hpp"
#include "cli/molecule_argument.hpp"
#include "input.hpp"

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
    using namespace isotally;
    std::istringstream in(fuzz::text_of(data, size));
    static const auto workspace = new_workspace();
    std::size_t lines_read = 0;
    while (const auto line = cli::next_line(in, lines_read)) {
        fuzz::require(line->number == lines_read && !line->molecule.empty());
        try {
            const auto arene = cli::read_listed_molecule(fuzz::knowledge(), line->molecule, *workspace);
            if (const auto* refused = refusal(arene))
                fuzz::require(!refused->reason.empty());
            else
                fuzz::require(!sites(std::get<Arene>(arene), "*[N+](=O)[O-]", *workspace).empty());
        } catch (const Error& error) {
            fuzz::require(error.kind == ErrorKind::input);
        }
    }
    return 0;
}
