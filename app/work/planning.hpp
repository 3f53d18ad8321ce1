// Plans from worked-out readings, as every screen and verb asks for them.
#pragma once

#include <bathwright/dosing/plan.hpp>

#include "tank_state.hpp"

namespace bathwright::work {

/// What the planner is asked: the doubt of each level, and how sure each plan is with so many tanks drawn (0:
/// not asked).
[[nodiscard]] dosing::Request request_for(const analysis::Analysis& analysis, int samples);

}  // namespace bathwright::work
