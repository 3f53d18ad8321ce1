// Dielectric constant of water and the Debye-Hueckel slopes at 1 bar. Read next: model.hpp.
#pragma once

#include <bathwright/units/quantity.hpp>

namespace bathwright::activity {

/// Relative permittivity of water at 1 bar, 0-100 degC.
/// Source: Bradley & Pitzer 1979, J. Phys. Chem. 83:1599 (coefficients from memory; they agree with
/// Archer & Wang 1990 within 0.06 over the range, see tests/reference/water.csv).
[[nodiscard]] double dielectric_constant(units::Celsius t);

/// A_phi, the Debye-Hueckel slope of the osmotic coefficient, kg^0.5 mol^-0.5 (0.3915 at 25 degC), 0-100
/// degC:
///   A_phi = (1/3) (2 pi N_A rho)^0.5 (e^2 / (4 pi eps0 D k T))^1.5
/// with the density of water of Kell 1975. Multiply by 3 for ln gamma, by 3/ln 10 for log10 gamma.
[[nodiscard]] double osmotic_slope(units::Celsius t);

/// B of the extended Debye-Hueckel law, per picometre and kg^0.5 mol^-0.5 (0.003285 at 25 degC), 0-100 degC:
///   B = (2 N_A e^2 rho / (eps0 D k T))^0.5
[[nodiscard]] double size_slope_per_pm(units::Celsius t);

}  // namespace bathwright::activity
