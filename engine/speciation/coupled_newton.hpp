// The equilibrium with activity coefficients that follow the composition: full Newton on everything at once.
#pragma once

#include "workspace.hpp"

namespace bathwright::speciation {

/// Newton on x, the liquid water and the active phases, with d ln gamma / d m of the abundant species (a
/// trace species does not move the coefficients of others). Converges quadratically from a good start; does
/// not change the active set. Moves the whole state of `w`. Returns whether mass action and balances are met
/// to rounding.
bool solve_coupled(Workspace& w, int& iterations);

}  // namespace bathwright::speciation
