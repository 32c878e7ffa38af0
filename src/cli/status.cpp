#include "status.hpp"

#include <ostream>

#include "isotally/report.hpp"

namespace isotally::cli {

Status status_of(ErrorKind kind) {
    switch (kind) {
    case ErrorKind::usage:
        return Status::usage;
    case ErrorKind::input:
        return Status::input;
    case ErrorKind::tables:
        return Status::tables;
    case ErrorKind::output:
        return Status::output;
    case ErrorKind::interrupted:
        return Status::interrupted;
    case ErrorKind::defect:
        break;
    }
    return Status::defect;
}

std::string kind_name(ErrorKind kind) {
    switch (kind) {
    case ErrorKind::usage:
        return "usage";
    case ErrorKind::input:
        return "input";
    case ErrorKind::tables:
        return "tables";
    case ErrorKind::output:
        return "output";
    case ErrorKind::interrupted:
        return "interrupted";
    case ErrorKind::defect:
        break;
    }
    return "defect";
}

std::string printable(const std::string& text) {
    constexpr std::size_t longest = 200;
    std::string out = text.substr(0, longest);
    for (auto& c : out)
        if (c < ' ' || c > '~')
            c = '?';
    return out + (text.size() > longest ? "..." : "");
}

int refuse(const Refusal& refused, bool json, std::ostream& out, std::ostream& err) {
    err << "isotally: " << refused.reason << '\n';
    if (json)
        out << error_json(static_cast<int>(Status::refused), "refused", refused.where, refused.reason)
            << '\n';
    return static_cast<int>(Status::refused);
}

int fail(const Error& error, bool json, std::ostream& out, std::ostream& err) {
    const int status = static_cast<int>(status_of(error.kind));
    err << "isotally: " << error.where << ": " << error.what() << '\n';
    if (json)
        out << error_json(status, kind_name(error.kind), error.where, error.what()) << '\n';
    return status;
}

}  // namespace isotally::cli
