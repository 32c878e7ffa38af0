// A line of progress on a terminal, and only there.
#pragma once

#include <chrono>
#include <cstddef>
#include <iosfwd>
#include <string>

namespace isotally::cli {

class Progress {
public:
    /// Shows nothing where standard error is no terminal, or with `quiet`.
    Progress(std::ostream& err, bool quiet, std::string what);

    void show(std::size_t count);
    void clear();

private:
    std::ostream& err_;
    std::string what_;
    bool on_ = false, shown_ = false;
    std::chrono::steady_clock::time_point last_;
};

}  // namespace isotally::cli
