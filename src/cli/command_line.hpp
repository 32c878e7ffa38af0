// The command line: options, help and exit statuses. All answers are made elsewhere.
#pragma once

#include <iosfwd>

namespace isotally::cli {

/// Runs one command; whatever goes wrong is one sentence on `err`. Returns the exit status.
int command_line(int argc, char** argv, std::istream& in, std::ostream& out, std::ostream& err);

}  // namespace isotally::cli
