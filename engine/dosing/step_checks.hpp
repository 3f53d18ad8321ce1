// What is asked of the whole tank, stirred and at equilibrium, after a step.
#pragma once

#include <bathwright/dosing/plan.hpp>

namespace bathwright::dosing {

/// Room to the brim, pH, the bath type's hard limits, watched solids at the working and idle temperature.
///   start  the tank before the plan: what is outside then may stay there, but be taken no farther
void check_tank(const bath::Tank& tank, const bath::Chemistry& chemistry, const bath::TankView& start,
                const bath::TankView& after, std::vector<Check>& checks);

/// The largest warming of the tank by one portion.
void check_warming(const bath::Tank& tank, double warms_C, std::vector<Check>& checks);

}  // namespace bathwright::dosing
