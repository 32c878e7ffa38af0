// isotally check: predictions against literature.
#pragma once

#include <iosfwd>
#include <string>
#include <vector>

#include "isotally/factors.hpp"
#include "isotally/shares.hpp"

namespace isotally::cli {

struct CheckRequest {
    std::vector<std::string> sets;  // families or sets; empty: nitration
    bool all = false, json = false, csv = false;
    std::string svg_file;
    Draws draws;
};

/// Exit status; throws Error.
int check_command(const CheckRequest& request, const Knowledge& knowledge, std::ostream& out);

}  // namespace isotally::cli
