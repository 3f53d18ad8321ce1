// Writes quantities for people, in the unit they chose. What is written here can be read by read.hpp.
#pragma once

#include <bathwright/units/concentration.hpp>
#include <bathwright/units/quantity.hpp>
#include <span>
#include <string>
#include <string_view>

namespace bathwright::units {

inline constexpr int usual_digits =
    4;  ///< significant digits: about what a burette or a balance in a shop gives

/// `value` rounded to `digits` (1 to 17) significant digits, decimal point, whatever the locale.
/// No exponent for 1e-6 <= |value| < 1e15; "nan", "inf" and "-inf" for what is not finite.
[[nodiscard]] std::string significant(double value, int digits = usual_digits);

/// A number, a space and the unit's symbol. `unit` is any spelling read.hpp accepts for the quantity; with a
/// unit it does not know, the first in its list is used: the number is never mislabelled.
[[nodiscard]] std::string show(Litres, std::string_view unit = "L", int digits = usual_digits);
[[nodiscard]] std::string show(Kilograms, std::string_view unit = "kg", int digits = usual_digits);
[[nodiscard]] std::string show(Celsius, std::string_view unit = "degC", int digits = usual_digits);
[[nodiscard]] std::string show(Decimetres, std::string_view unit = "dm", int digits = usual_digits);
[[nodiscard]] std::string show(SquareDecimetres, std::string_view unit = "dm2", int digits = usual_digits);
[[nodiscard]] std::string show(KilogramsPerLitre, std::string_view unit = "kg/L", int digits = usual_digits);
[[nodiscard]] std::string show(AmperesPerSquareDecimetre, std::string_view unit = "A/dm2",
                               int digits = usual_digits);
[[nodiscard]] std::string show(Hours, std::string_view unit = "h", int digits = usual_digits);
[[nodiscard]] std::string show(MolesPerLitre, std::string_view unit = "mol/L", int digits = usual_digits);
[[nodiscard]] std::string show(GramsPerLitre, int digits = usual_digits);
[[nodiscard]] std::string show(Molality, int digits = usual_digits);
[[nodiscard]] std::string show(GramsPerMole, int digits = usual_digits);
[[nodiscard]] std::string show(const Concentration&, int digits = usual_digits);

/// The value alone, in `unit`, for tables whose column head carries the unit. Same rule for an unknown unit.
[[nodiscard]] double value_in(Litres, std::string_view unit);
[[nodiscard]] double value_in(Kilograms, std::string_view unit);
[[nodiscard]] double value_in(Celsius, std::string_view unit);
[[nodiscard]] double value_in(Decimetres, std::string_view unit);
[[nodiscard]] double value_in(SquareDecimetres, std::string_view unit);
[[nodiscard]] double value_in(KilogramsPerLitre, std::string_view unit);
[[nodiscard]] double value_in(AmperesPerSquareDecimetre, std::string_view unit);
[[nodiscard]] double value_in(Hours, std::string_view unit);
[[nodiscard]] double value_in(MolesPerLitre, std::string_view unit);

/// The symbols a quantity can be shown in, the base unit first: for menus and for checking a setting.
template <class Quantity>
[[nodiscard]] std::span<const std::string_view> symbols();

}  // namespace bathwright::units
