#include <algorithm>
#include <array>
#include <bathwright/units/show.hpp>
#include <charconv>
#include <cmath>

#include "unit_table.hpp"

namespace bathwright::units {
namespace {

const Unit& unit_or_base(const Dimension& dimension, std::string_view text) {
  return dimension.units[find_unit(dimension, text).value_or(0)];
}

}  // namespace

std::string significant(double value, int digits) {
  if (std::isnan(value)) return "nan";
  if (std::isinf(value)) return value > 0 ? "inf" : "-inf";
  if (value == 0) return "0";
  digits = std::clamp(digits, 1, 17);

  // d.ddde+xx: to_chars rounds correctly; the digits are then set out without an exponent.
  std::array<char, 32> buffer;
  const auto end =
      std::to_chars(buffer.begin(), buffer.end(), std::abs(value), std::chars_format::scientific, digits - 1)
          .ptr;
  const std::string_view scientific(buffer.data(), static_cast<std::size_t>(end - buffer.data()));
  const std::string sign = value < 0 ? "-" : "";
  const std::size_t e = scientific.find('e');
  int exponent = 0;
  std::from_chars(scientific.data() + e + (scientific[e + 1] == '+' ? 2 : 1), end, exponent);
  if (exponent < -6 || exponent >= 15) return sign + std::string(scientific);

  std::string figures(scientific.substr(0, e));
  std::erase(figures, '.');
  if (exponent < 0) return sign + "0." + std::string(static_cast<std::size_t>(-exponent - 1), '0') + figures;
  const std::size_t before = static_cast<std::size_t>(exponent) + 1;
  if (figures.size() <= before) return sign + figures + std::string(before - figures.size(), '0');
  return sign + figures.insert(before, ".");
}

template <class UnitTag>
std::string show(Quantity<UnitTag> q, std::string_view unit, int digits) {
  const Unit& chosen = unit_or_base(dimension_of<Quantity<UnitTag>>(), unit);
  return significant(chosen.from_base(q.v), digits) + ' ' + std::string(chosen.symbol);
}

template <class UnitTag>
double value_in(Quantity<UnitTag> q, std::string_view unit) {
  return unit_or_base(dimension_of<Quantity<UnitTag>>(), unit).from_base(q.v);
}

template <class Quantity>
std::span<const std::string_view> symbols() {
  return dimension_of<Quantity>().symbols;
}

template std::string show(Litres, std::string_view, int);
template double value_in(Litres, std::string_view);
template std::span<const std::string_view> symbols<Litres>();
template std::string show(Kilograms, std::string_view, int);
template double value_in(Kilograms, std::string_view);
template std::span<const std::string_view> symbols<Kilograms>();
template std::string show(Celsius, std::string_view, int);
template double value_in(Celsius, std::string_view);
template std::span<const std::string_view> symbols<Celsius>();
template std::string show(KilogramsPerLitre, std::string_view, int);
template double value_in(KilogramsPerLitre, std::string_view);
template std::span<const std::string_view> symbols<KilogramsPerLitre>();
template std::string show(Decimetres, std::string_view, int);
template double value_in(Decimetres, std::string_view);
template std::span<const std::string_view> symbols<Decimetres>();
template std::string show(SquareDecimetres, std::string_view, int);
template double value_in(SquareDecimetres, std::string_view);
template std::span<const std::string_view> symbols<SquareDecimetres>();
template std::string show(AmperesPerSquareDecimetre, std::string_view, int);
template double value_in(AmperesPerSquareDecimetre, std::string_view);
template std::span<const std::string_view> symbols<AmperesPerSquareDecimetre>();
template std::string show(Hours, std::string_view, int);
template double value_in(Hours, std::string_view);
template std::span<const std::string_view> symbols<Hours>();
template std::string show(MolesPerLitre, std::string_view, int);
template double value_in(MolesPerLitre, std::string_view);
template std::span<const std::string_view> symbols<MolesPerLitre>();
template std::span<const std::string_view> symbols<Concentration>();

std::string show(GramsPerLitre c, int digits) { return significant(c.v, digits) + " g/L"; }
std::string show(Molality m, int digits) { return significant(m.v, digits) + " mol/kg"; }
std::string show(GramsPerMole m, int digits) { return significant(m.v, digits) + " g/mol"; }

std::string show(const Concentration& c, int digits) {
  std::string text = significant(c.value, digits) + ' ' + std::string(symbol(c.unit));
  if (c.unit == ConcentrationUnit::equivalents_per_litre) {
    text += " (" + significant(c.equivalents, digits) + " eq/mol)";
  }
  return text;
}

}  // namespace bathwright::units
