// How far each watched solid of a tank may go towards forming before a plan counts as spoiling the bath.
#pragma once

#include <bathwright/bath/chemistry.hpp>

namespace bathwright::dosing {

struct SolidLimit {
  std::size_t index;  ///< in the system of the solvers
  std::string solid;
  double working, idle;  ///< log10 of the saturation, HUGE_VAL: none
  bool near = false;     ///< so near today or at the aims that additions could reach it
};

/// Saturation. What is beyond it at the working temperature may go as far as it stands now or would at the
/// tank's own aims: a treatment tank holds its hydroxides, and some baths live beyond the table's solubility.
/// At the idle temperature only what additions bring to crystallise counts, beyond what the aims do. Slow
/// solids have no limit.
[[nodiscard]] std::vector<SolidLimit> solid_limits(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                                   const bath::TankView& now);

}  // namespace bathwright::dosing
