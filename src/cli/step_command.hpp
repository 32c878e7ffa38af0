// isotally step: one substitution, or a list of them.
#pragma once

#include <cstddef>
#include <iosfwd>
#include <optional>
#include <string>

#include "isotally/factors.hpp"
#include "isotally/shares.hpp"

namespace isotally::cli {

struct StepRequest {
    std::string molecule;  // name, SMILES, path of a molfile, or "-"
    std::string reaction;  // empty: list the reactions that go
    std::optional<double> temperature_C, acid_percent;
    Draws draws;
    bool json = false, csv = false, quiet = false;
    // of lists: lines already answered, threads (0: one for each processor)
    std::size_t skip = 0;
    unsigned threads = 0;
};

/// Exit status; the answer goes to `out`, all else to `err`. Throws Error.
int step_command(const StepRequest& request, const Knowledge& knowledge, std::istream& in, std::ostream& out,
                 std::ostream& err);

}  // namespace isotally::cli
