// E-theta: the electrostatic effect of mixing two ions of like sign and unequal charge (Pitzer 1975,
// J. Solution Chem. 4:249). It has no adjustable constant and matters for every Na+/Ni2+, H+/Ni2+ or
// Cl-/SO4^2- pair.
#pragma once

namespace bathwright::activity {

struct JFunction {
  double value, first, second;  ///< J(x), dJ/dx, d2J/dx2
};

/// J(x) = (1/x) int_0^inf [1 + q + q^2/2 - exp(q)] y^2 dy with q = -(x/y) exp(-y), x > 0, by the Chebyshev
/// series of Harvie in Pitzer 1991, Activity Coefficients in Electrolyte Solutions, 2nd ed., ch. 3, table
/// B-1. Within 1e-7 relative of the integral for x >= 0.1.
[[nodiscard]] JFunction j_function(double x);

struct MixingTerm {
  double value, first, second;  ///< E-theta, dE-theta/dI, d2E-theta/dI2
};

/// E-theta of two ions with charges of the same sign; zero when they are equal.
///   a_phi           kg^0.5 mol^-0.5
///   ionic_strength  mol/kg, > 0
[[nodiscard]] MixingTerm unsymmetrical_mixing(int charge_i, int charge_j, double a_phi,
                                              double ionic_strength);

}  // namespace bathwright::activity
