// What went wrong and where; what cannot be answered and why.
#pragma once

#include <stdexcept>
#include <string>
#include <utility>
#include <variant>

namespace isotally {

enum class ErrorKind { usage, input, tables, output, interrupted, defect };

/// A fault: bad use, bad input, bad tables. `where` is always filled, in the form that helps
/// most: "tables/constants.csv:41:value", "SMILES character 5", "option --temperature".
struct Error : std::runtime_error {
    Error(ErrorKind kind_, std::string where_, const std::string& message)
        : std::runtime_error(message), kind(kind_), where(std::move(where_)) {}
    ErrorKind kind;
    std::string where;
};

/// An honest "no answer": the question is understood, and the reason is one sentence that ends
/// with what people do instead, if anything. A value, so that callers must look at it.
struct Refusal {
    std::string where;
    std::string reason;
};

template <class T>
using Answer = std::variant<T, Refusal>;

template <class T>
const Refusal* refusal(const Answer<T>& answer) {
    return std::get_if<Refusal>(&answer);
}

}  // namespace isotally
