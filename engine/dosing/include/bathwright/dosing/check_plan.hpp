// The one way in for additions that the planner did not work out: a shop's own list, a path, a plan from
// elsewhere or one that somebody edited. Read next: plan.hpp for what comes out.
#pragma once

#include <bathwright/dosing/plan.hpp>

namespace bathwright::dosing {

/// So much of a chemical, on the tank's shelf or from the catalogue.
struct Wanted {
  matter::StockChemical stock;
  double kg = 0;
};

/// Goes through a list of additions in the order given, as through the planner's own: interlocks, portions,
/// what to dissolve in, every portion speciated in the whole tank and where it goes in. One plan comes out,
/// of kind "own list": `feasible` says whether it may be carried out, which is when nothing is refused and no
/// check stops it; levels that end farther outside their windows than they are now stand under `unmet` and do
/// not. What is refused stands in `refused` and has no step. There is no option that lets a refused chemical
/// pass. `take_out_L` of bath go to the waste treatment before all of them. Fails on an amount below zero, on
/// more bath than there is, on a chemical the bath type knows no component for, and where a state cannot be
/// solved.
Result<AdditionSheet> check_plan(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                 const bath::TankState& now, const std::vector<Wanted>& wanted,
                                 double take_out_L = 0);

}  // namespace bathwright::dosing
