// What is asked of the whole tank, stirred and at equilibrium, after a step.
#pragma once

#include <bathwright/dosing/plan.hpp>

#include "solubility.hpp"

namespace bathwright::dosing {

inline constexpr std::string_view pH_on_the_way = "pH on the way";

/// Room to the brim, pH, the bath type's hard limits, watched solids at the working and idle temperature.
///   start  the tank before the plan: what is outside then may stay there, but be taken no farther
void check_tank(const bath::Tank& tank, const bath::Chemistry& chemistry, const bath::TankView& start,
                const std::vector<SolidLimit>& limits, const bath::TankView& after,
                std::vector<Check>& checks);

/// Of the last step: what the additions bring to crystallise when the tank cools stops the plan. On the way
/// there nobody lets it cool.
void check_idle_end(const bath::Chemistry& chemistry, const std::vector<SolidLimit>& limits,
                    std::vector<Check>& checks, const bath::TankView& end);

/// The largest warming of the tank by one portion.
void check_warming(const bath::Tank& tank, double warms_C, std::vector<Check>& checks);

}  // namespace bathwright::dosing
