// The command line: options, help and exit statuses. All answers are made elsewhere.
#pragma once

#include <iosfwd>

namespace isotally::cli {

/// Runs one command; whatever goes wrong is one sentence on `err`. Returns the exit status.
/// Without `do_it` the words are only read.
int command_line(int argc, char** argv, std::istream& in, std::ostream& out, std::ostream& err,
                 bool do_it = true);

}  // namespace isotally::cli
