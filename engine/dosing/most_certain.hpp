// The plan that is most certain to end inside every window: aims are moved within the windows to where errors
// do least harm. Read next: chance.hpp, planner.hpp.
#pragma once

#include "planner.hpp"

namespace bathwright::dosing {

/// A plan clearly more certain than `best`, whose chances are known: by more than 2 percentage points and
/// beyond the error of the sampling, feasible, its own chances sampled in full. Nothing where there is none.
/// Where errors go together, or the aim is not in the middle of its window, or a level can only be raised,
/// neither the aims nor the middles are the best to go for. Aims are found on the ends of `best`, shifted as
/// a whole (errors hardly depend on how much is added), then planned for; twice.
/// Fails as chance_of.
Result<std::optional<Plan>> most_certain_plan(const Situation& situation, const Plan& best,
                                              const Spread& spread, const Sampling& sampling);

}  // namespace bathwright::dosing
