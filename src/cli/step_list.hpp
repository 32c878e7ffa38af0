// A list of molecules put to one question: one JSON object a line, in input order, on any number of threads.
#pragma once

#include <iosfwd>

#include "isotally/shares.hpp"
#include "step_command.hpp"

namespace isotally::cli {

/// Answers the lines of `in` after the first request.skip ones. Memory does not grow with the list; the bytes
/// do not depend on request.threads. A line that can't be answered is an error object of its own, with a
/// sentence to `err`. Interrupted, it ends after the lines in work, with the exit status for that.
int step_list(const StepRequest& request, const Knowledge& knowledge, const Conditions& conditions,
              std::istream& in, std::ostream& out, std::ostream& err);

}  // namespace isotally::cli
