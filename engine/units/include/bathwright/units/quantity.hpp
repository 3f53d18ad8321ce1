// A double that remembers its unit, for the borders between parts. Inside a hot loop unwrap once and end the
// variable's name in its unit. Read next: read.hpp for what people type, show.hpp for what they see.
#pragma once

#include <compare>

namespace bathwright::units {

/// Same unit: + - and comparison; scaling by a plain number. Anything that needs chemistry (molar mass,
/// density, water content) is a named function, never an operator.
template <class Unit>
struct Quantity {
  double v = 0;
  constexpr auto operator<=>(const Quantity&) const = default;
  friend constexpr Quantity operator+(Quantity a, Quantity b) { return {a.v + b.v}; }
  friend constexpr Quantity operator-(Quantity a, Quantity b) { return {a.v - b.v}; }
  friend constexpr Quantity operator*(double k, Quantity a) { return {k * a.v}; }
  friend constexpr Quantity operator*(Quantity a, double k) { return {k * a.v}; }
  friend constexpr double operator/(Quantity a, Quantity b) { return a.v / b.v; }
};

using Litres = Quantity<struct LitresUnit>;
using Kilograms = Quantity<struct KilogramsUnit>;
using Celsius = Quantity<struct CelsiusUnit>;
using Decimetres = Quantity<struct DecimetresUnit>;
using SquareDecimetres = Quantity<struct SquareDecimetresUnit>;
using KilogramsPerLitre = Quantity<struct KilogramsPerLitreUnit>;  ///< density of a solution
using GramsPerLitre = Quantity<struct GramsPerLitreUnit>;          ///< what the lab reports
using MolesPerLitre = Quantity<struct MolesPerLitreUnit>;          ///< titrants
using Molality = Quantity<struct MolalityUnit>;                    ///< mol per kg of water: the solver's unit
using GramsPerMole = Quantity<struct GramsPerMoleUnit>;
using AmperesPerSquareDecimetre = Quantity<struct AmperesPerSquareDecimetreUnit>;
using Hours = Quantity<struct HoursUnit>;

inline constexpr double zero_celsius_K = 273.15;
constexpr double kelvin(Celsius t) { return t.v + zero_celsius_K; }

}  // namespace bathwright::units
