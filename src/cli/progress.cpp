#include "progress.hpp"

#include <unistd.h>

#include <ostream>
#include <utility>

namespace isotally::cli {

Progress::Progress(std::ostream& err, bool quiet, std::string what)
    : err_(err), what_(std::move(what)), on_(!quiet && isatty(STDERR_FILENO) && !isatty(STDOUT_FILENO)) {}

void Progress::show(std::size_t count) {
    const auto now = std::chrono::steady_clock::now();
    if (!on_ || now - last_ < std::chrono::milliseconds(200))
        return;
    last_ = now;
    err_ << '\r' << count << ' ' << what_ << std::flush;
    shown_ = true;
}

void Progress::clear() {
    if (shown_)
        err_ << "\r\x1b[K" << std::flush;
    shown_ = false;
}

}  // namespace isotally::cli
