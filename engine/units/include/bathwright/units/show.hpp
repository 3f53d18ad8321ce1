// Writes quantities for people, in the unit they chose. What is written here can be read by read.hpp.
#pragma once

#include <bathwright/units/concentration.hpp>
#include <bathwright/units/quantity.hpp>
#include <span>
#include <string>
#include <string_view>

namespace bathwright::units {

/// Significant digits: about what a burette or a balance in a shop gives.
inline constexpr int usual_digits = 4;

/// `value` rounded to `digits` (1 to 17) significant digits, decimal point, whatever the locale.
/// No exponent for 1e-6 <= |value| < 1e15; "nan", "inf" and "-inf" for what is not finite.
[[nodiscard]] std::string significant(double value, int digits = usual_digits);

/// A number, a space and the unit's symbol, for Litres, Kilograms, Celsius, Decimetres, SquareDecimetres,
/// KilogramsPerLitre, AmperesPerSquareDecimetre, Hours and MolesPerLitre.
///   unit  any spelling read.hpp accepts for the quantity. Empty or unknown: the base unit, with its own
///         symbol, so that a number is never mislabelled.
template <class UnitTag>
[[nodiscard]] std::string show(Quantity<UnitTag> q, std::string_view unit = {}, int digits = usual_digits);

/// The value alone in `unit`, for tables whose column head carries the unit; same types, same rule.
template <class UnitTag>
[[nodiscard]] double value_in(Quantity<UnitTag> q, std::string_view unit);

/// The symbols such a quantity, or a Concentration, can be shown in, the base unit first: for menus and for
/// checking a setting.
template <class Quantity>
[[nodiscard]] std::span<const std::string_view> symbols();

[[nodiscard]] std::string show(GramsPerLitre c, int digits = usual_digits);
[[nodiscard]] std::string show(Molality m, int digits = usual_digits);
[[nodiscard]] std::string show(GramsPerMole m, int digits = usual_digits);
/// With its equivalents where it is a normality: "0.2000 N (2.000 eq/mol)".
[[nodiscard]] std::string show(const Concentration& c, int digits = usual_digits);

}  // namespace bathwright::units
