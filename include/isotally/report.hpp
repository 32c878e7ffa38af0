// Answers as people and scripts read them.
#pragma once

#include <string>

#include "isotally/check.hpp"
#include "isotally/error.hpp"
#include "isotally/shares.hpp"

namespace isotally {

/// One JSON document, format isotally.step.1. `indent` -1: one line.
std::string step_json(const Tables& tables, const StepAnswer& answer, const Draws& draws, int indent);

/// The same on one line, with what stood beside the molecule in a list as `label` (if anything did).
void append_step_json(const Tables& tables, const StepAnswer& answer, const Draws& draws,
                      const std::string& label, std::string& out);

/// One line an isomer: ring, locants, product, name, percent with interval, log10 factor with sd, evidence.
std::string step_csv(const StepAnswer& answer);

/// For reading, at most 100 columns. `assumed` ends the first line ("defaults").
std::string step_text(const Tables& tables, const StepAnswer& answer, const Draws& draws,
                      const std::string& assumed);

/// Format isotally.check.1: scores of every set and of all, the worst records, one row an isomer.
std::string check_json(const Tables& tables, const std::vector<CheckSet>& sets);

/// One line an isomer of every record.
std::string check_csv(const std::vector<CheckSet>& sets);

/// Scores and the ten worst records, each with a likely reason.
std::string check_text(const Tables& tables, const std::vector<CheckSet>& sets);

/// Predicted against observed with intervals, and claimed against observed coverage.
std::string check_svg(const std::vector<CheckSet>& sets);

/// A failure or refusal, format isotally.error.1. `kind` is refused, usage, input, tables, output,
/// interrupted or defect.
std::string error_json(int exit_status, const std::string& kind, const std::string& where,
                       const std::string& message, const std::string& label = {});

}  // namespace isotally
