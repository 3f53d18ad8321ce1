// Where a plan really ends: its masses turned into amounts by their formulae, their elements balanced, a cold
// solve by a system made here. Shares with the planner the tables of constants, the density model and the
// reading of formulae, and nothing else.
#pragma once

#include <bathwright/dosing/plan.hpp>

namespace disturbed {

struct Ending {
  std::map<std::string, double> g_per_L;  ///< by quantity id
  double pH = 0, volume_L = 0;
  double element_defect = 0;  ///< largest, of what was poured in against what the solution holds, relative
};

/// Fails where a formula cannot be read or the end cannot be solved.
bathwright::Result<Ending> follow(const bathwright::bath::Tank& tank, const bathwright::bath::BathType& type,
                                  const bathwright::bath::TankState& start,
                                  const bathwright::dosing::Plan& plan);

}  // namespace disturbed
