// The equilibrium with activity coefficients that follow the composition: full Newton on everything at once.
#pragma once

#include "workspace.hpp"

namespace bathwright::speciation {

/// Where the coupled Newton ends: balances relative to what takes part in them, conditions and mass action in
/// ln units. From `saturated` (ln units) on a solid that is not there enters.
inline constexpr double balance_met = 3e-14, action_met = 2e-13, saturated = 1e-9;

/// Newton on x, the liquid water and the active phases, with d ln gamma / d m of the abundant species (a
/// trace species does not move the coefficients of others). Converges quadratically from a good start; does
/// not change the active set. Moves the whole state of `w`. Returns whether mass action and balances are met
/// to rounding.
bool solve_coupled(Workspace& w, int& iterations);

}  // namespace bathwright::speciation
