// The slip that goes to the tank: what to weigh out, in which order and portions, and what must hold after
// each step.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <bathwright/dosing/plan.hpp>
#include <bathwright/sheets/text.hpp>

namespace bathwright::sheets {

/// Who and what stands under the slip.
struct Signature {
  std::string prepared_by, shift, program;
  std::optional<std::int64_t> slip = {};  ///< its number, where the plan was issued as one
};

/// The best plan in full, the others in a line each.
///   changed_since  what the log has of changes that are not in the readings, a sentence each
[[nodiscard]] Lines addition_sheet(const bath::Tank& tank, const bath::BathType& type,
                                   const analysis::Analysis& analysis, const dosing::AdditionSheet& sheet,
                                   const std::vector<std::string>& changed_since, const Signature& signature);

}  // namespace bathwright::sheets
