// Numbers and words as every report writes them.
#pragma once

#include <string>
#include <vector>

#include "isotally/shares.hpp"

namespace isotally::report {

/// A number with 12 significant digits, as JSON and CSV print it.
std::string number(double value);

/// The same inside a JSON document: a marked text that plain_numbers turns into a bare number after the dump
/// (the JSON library itself may print up to 17 digits).
std::string json_number(double value);
std::string plain_numbers(std::string dumped);

/// "2,6"; with several rings "ring 2: 2,6".
std::string locants_text(const IsomerShare& share, bool several_rings);

/// The weakest evidence among the contributions; "measured" for benzene itself.
std::string weakest_evidence(const IsomerShare& share);

/// Breaks a text into lines of at most `width` columns.
std::vector<std::string> wrapped(const std::string& text, std::size_t width);

/// A CSV field, quoted where RFC 4180 asks for it.
std::string csv_field(const std::string& text);

}  // namespace isotally::report
