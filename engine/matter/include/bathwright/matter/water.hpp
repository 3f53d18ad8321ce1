// Pure liquid water.
#pragma once

#include <bathwright/units/quantity.hpp>

namespace bathwright::matter {

inline constexpr units::Celsius water_lowest{-5}, water_highest{110};  ///< where water_density is used

/// Density of air-free water at 1 atm, kg/L.
///   rho = (999.83952 + 16.945176 t - 7.9870401e-3 t^2 - 46.170461e-6 t^3 + 105.56302e-9 t^4
///          - 280.54253e-12 t^5) / (1 + 16.879850e-3 t)   in kg/m3
///   t  degC; published for 0 to 100, used from -5 to 110 (supercooled and slightly superheated); evaluated
///      without complaint outside: the caller's range check says so
/// Source: Kell, G. S., J. Chem. Eng. Data 20 (1975) 97; coefficients from memory, tabulated values checked.
[[nodiscard]] units::KilogramsPerLitre water_density(units::Celsius t);

}  // namespace bathwright::matter
