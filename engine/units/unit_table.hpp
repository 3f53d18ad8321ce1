// Every unit and its factor, once, for reading and for showing. Private to units.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/units/concentration.hpp>
#include <span>
#include <string>
#include <string_view>

namespace bathwright::units {

/// value in the base unit = (a x + b) / (c x + d), x the number people type. One form holds plain factors,
/// temperature scales (b), and the hyperbolas of the Baume scales (c, d).
struct Unit {
  std::string_view symbol;     ///< as shown
  std::string_view spellings;  ///< others that are read, folded, '|' between them
  double a, b = 0, c = 0, d = 1;

  [[nodiscard]] double to_base(double x) const { return (a * x + b) / (c * x + d); }
  [[nodiscard]] double from_base(double y) const { return (d * y - b) / (a - c * y); }
};

/// A spelling that means two things or something else, and what to write instead.
struct Trap {
  std::string_view spellings;  ///< folded, '|' between them
  std::string_view advice;
};

struct Dimension {
  std::string_view name;  ///< for messages: "a volume"
  std::span<const Unit> units;
  std::span<const Trap> traps;
  std::span<const std::string_view> symbols;  ///< of the units, in order
  double lowest, highest;                     ///< in the base unit; beyond them it is a slip of the pen
  bool may_be_negative = false;
};

/// The units of a quantity, its base unit first. Those of Concentration stand in the order of
/// ConcentrationUnit; `a` is the direct factor there, 0 where there is none.
template <class Quantity>
const Dimension& dimension_of();
template <>
const Dimension& dimension_of<Litres>();
template <>
const Dimension& dimension_of<Kilograms>();
template <>
const Dimension& dimension_of<Celsius>();
template <>
const Dimension& dimension_of<KilogramsPerLitre>();
template <>
const Dimension& dimension_of<Decimetres>();
template <>
const Dimension& dimension_of<SquareDecimetres>();
template <>
const Dimension& dimension_of<AmperesPerSquareDecimetre>();
template <>
const Dimension& dimension_of<Hours>();
template <>
const Dimension& dimension_of<MolesPerLitre>();
template <>
const Dimension& dimension_of<Concentration>();
/// A share has no type of its own.
const Dimension& fraction_dimension();

/// The place of a unit in its dimension, or nothing. See fold_unit for what is taken as equal.
std::optional<std::size_t> find_unit(const Dimension& dimension, std::string_view text);

/// As find_unit, with the message for a person where the unit is missing, unknown or a trap.
///   whole  all that was typed, for the message
Result<std::size_t> read_unit(const Dimension& dimension, std::string_view text, std::string_view whole,
                              std::string_view where);

/// "L, mL, uL, ..." for messages.
std::string list_of_units(const Dimension& dimension);

}  // namespace bathwright::units
