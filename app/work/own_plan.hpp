// bathwright dose TANK READINGS --plan FILE: additions of the shop's own, checked as the planner's are.
#pragma once

#include <bathwright/dosing/plan.hpp>

#include "shop.hpp"

namespace bathwright::work {

/// The list of a file gone through from this state (dosing/check_plan.hpp).
Result<dosing::AdditionSheet> check_own_plan(const Shop& shop, const bath::TankState& now,
                                             const std::string& plan_path);

}  // namespace bathwright::work
