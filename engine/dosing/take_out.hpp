// Bath taken out before anything goes in: the first step of a plan that makes room.
#pragma once

#include <bathwright/dosing/plan.hpp>

namespace bathwright::dosing {

struct TakenOut {
  bath::TankState left;
  Step step;  ///< number 1
};

/// Fails (bad_input) on less than nothing or all there is, and where what is left cannot be solved.
Result<TakenOut> take_out(const bath::Chemistry& chemistry, const bath::TankState& state, double litres);

/// Before the steps there are, which count on.
void put_first(Plan& plan, Step step);

}  // namespace bathwright::dosing
