// Answers as people and scripts read them.
#pragma once

#include <string>

#include "isotally/error.hpp"
#include "isotally/shares.hpp"

namespace isotally {

/// One JSON document, format isotally.step.1 (contract of the fields: README). `indent` -1: one line.
std::string step_json(const Tables& tables, const StepAnswer& answer, const Draws& draws, int indent);

/// One line an isomer: ring, locants, product, name, percent with interval, log10 factor with sd, evidence.
std::string step_csv(const StepAnswer& answer);

/// For reading, at most 100 columns. `assumed` ends the first line ("defaults").
std::string step_text(const Tables& tables, const StepAnswer& answer, const Draws& draws,
                      const std::string& assumed);

/// A failure or refusal, format isotally.error.1. `kind` is refused, usage, input, tables, output,
/// interrupted or defect.
std::string error_json(int exit_status, const std::string& kind, const std::string& where,
                       const std::string& message);

}  // namespace isotally
