#pragma once

#include <string>
#include <vector>

namespace isotally {

/// One line for a CSL-JSON record: "Knowles, Norman & Radda, J. Chem. Soc. 1960, 4885". Empty where
/// the record says nothing that could be printed.
std::string citation_of(const std::string& csl_json);

struct CslFault {
    std::string field, message;
};

/// Fields of a CSL-JSON record (author, editor, issued) that are not built as CSL says.
std::vector<CslFault> csl_faults(const std::string& csl_json);

}  // namespace isotally
