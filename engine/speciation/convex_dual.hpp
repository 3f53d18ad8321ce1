// The equilibrium at fixed activity coefficients: a convex problem in the log activities of the basis.
#pragma once

#include "workspace.hpp"

namespace bathwright::speciation {

/// Minimises  w sum_j m_j(x) - b'x  subject to the phase conditions; the multipliers are the amounts of the
/// phases. Damped Newton with a Cholesky factorisation in the null space of the active conditions (each
/// active phase takes the place of the basis species it limits), and an active set for what may precipitate.
/// Globally convergent.
///   tolerance   largest |balance| relative to its total at which to stop
///   iterations  counted up
/// Moves x, the phases' `active` and `mol`. A held pH is met with its counter-ion's total moved along.
/// Returns false when the active set does not settle or a total cannot be met.
bool solve_convex(Workspace& w, double tolerance, int& iterations);

/// A start from which solve_convex never has to walk down from e^20: no species stands above its totals.
/// Finds the pH by bisection of the proton balance, the rest by scaling each basis species to its total.
void cold_start(Workspace& w);

/// After the coefficients have moved: scales down what stands above its total, at the present pH.
void pull_back(Workspace& w);

}  // namespace bathwright::speciation
