// Exit statuses and how a failure is told.
#pragma once

#include <iosfwd>
#include <string>

#include "isotally/error.hpp"

namespace isotally::cli {

enum class Status {
    answered = 0,
    refused = 1,
    usage = 2,
    input = 3,
    tables = 4,
    output = 5,
    defect = 70,
    interrupted = 130
};

Status status_of(ErrorKind kind);
std::string kind_name(ErrorKind kind);

/// The text with everything that is not printable ASCII as ?, cut after 200 characters: fit for a message.
std::string printable(const std::string& text);

/// One sentence to `err`; with `json` also the error document to `out`. Returns the exit status.
int refuse(const Refusal& refused, bool json, std::ostream& out, std::ostream& err);
int fail(const Error& error, bool json, std::ostream& out, std::ostream& err);

}  // namespace isotally::cli
