#include <bathwright/units/read.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

#include "number.hpp"
#include "unit_table.hpp"

namespace bathwright::units {
namespace {

Problem may_be_thousands(const NumberAndUnit& read, std::string_view text, std::string_view where) {
  const int figures = read.number < 10 ? 4 : read.number < 100 ? 5 : 6;  // three of them behind the comma
  return {Fault::bad_input, std::string(where),
          quoted(text) + ": the comma may be a decimal comma or a thousands separator",
          "a number that reads one way",
          "Write " + significant(read.number, figures) + " or " + significant(*read.with_thousands, figures) +
              "."};
}

Problem negative(std::string_view name, std::string_view text, std::string_view where) {
  return {Fault::out_of_range, std::string(where), quoted(text) + " is negative",
          std::string(name) + " of zero or more", ""};
}

Problem impossible(std::string_view text, std::string_view where, std::string expected) {
  return {Fault::out_of_range, std::string(where), quoted(text) + " cannot be right", std::move(expected),
          "Check the decimal point and the unit."};
}

// In the base unit of the dimension.
Result<double> read_in(const Dimension& dimension, std::string_view text, std::string_view where) {
  const auto read = split_number(text, where);
  if (!read) return read.problems();
  const auto index = read_unit(dimension, read->unit, text, where);
  if (!index) return index.problems();
  const Unit& unit = dimension.units[*index];
  const auto exists = [&](double base) { return base >= dimension.lowest && base <= dimension.highest; };

  if (read->number < 0 && !dimension.may_be_negative) return negative(dimension.name, text, where);
  const double base = unit.to_base(read->number);
  if (read->with_thousands && exists(base) && exists(unit.to_base(*read->with_thousands))) {
    return may_be_thousands(*read, text, where);
  }
  if (!exists(base)) {
    const Unit& first = dimension.units.front();
    return impossible(text, where,
                      std::string(dimension.name) + " from " + significant(dimension.lowest, 5) + " to " +
                          significant(dimension.highest, 5) + " " + std::string(first.symbol));
  }
  return base;
}

template <class Quantity>
Result<Quantity> read_quantity(std::string_view text, std::string_view where) {
  const auto base = read_in(dimension_of<Quantity>(), text, where);
  if (!base) return base.problems();
  return Quantity{*base};
}

// The most there can be of anything, in the unit itself.
double highest_possible(ConcentrationUnit unit) {
  const Concentration one{1, unit};
  const double per_one = direct_factor(unit);
  if (grams_per_litre_if_direct(one)) return 1000 * dimension_of<KilogramsPerLitre>().highest / per_one;
  if (moles_per_litre_if_direct(one)) return dimension_of<MolesPerLitre>().highest / per_one;
  if (millilitres_per_litre_if_direct(one)) return 1000 / per_one;
  if (unit == ConcentrationUnit::percent_by_mass) return 100;
  if (unit == ConcentrationUnit::ppm_by_mass) return 1e6;
  return 1000;  // mol/kg of water: 98 % sulfuric acid has 500
}

constexpr double most_equivalents = 12;  // beyond any reaction a bench uses

// The bracket of "0.2 N (2 eq/mol)": equivalents per mole.
Result<double> read_equivalents(std::string_view bracket, std::string_view text, std::string_view where) {
  const Problem expected{
      Fault::bad_input, std::string(where), quoted(text) + " does not say how many equivalents a mole has",
      "a normality as \"0.2 N (2 eq/mol)\"", "Add the equivalents, or give the molarity in mol/L."};
  if (!bracket.starts_with('(') || !bracket.ends_with(')')) return expected;
  const auto read = split_number(bracket.substr(1, bracket.size() - 2), where);
  if (!read || read->unit != "eq/mol") return expected;
  if (!(read->number > 0 && read->number <= most_equivalents)) {
    return impossible(text, where, "from above 0 to 12 equivalents per mole");
  }
  return read->number;
}

}  // namespace

Result<Litres> read_volume(std::string_view text, std::string_view where) {
  return read_quantity<Litres>(text, where);
}
Result<Kilograms> read_mass(std::string_view text, std::string_view where) {
  return read_quantity<Kilograms>(text, where);
}
Result<Celsius> read_temperature(std::string_view text, std::string_view where) {
  return read_quantity<Celsius>(text, where);
}
Result<KilogramsPerLitre> read_density(std::string_view text, std::string_view where) {
  return read_quantity<KilogramsPerLitre>(text, where);
}
Result<Decimetres> read_length(std::string_view text, std::string_view where) {
  return read_quantity<Decimetres>(text, where);
}
Result<SquareDecimetres> read_area(std::string_view text, std::string_view where) {
  return read_quantity<SquareDecimetres>(text, where);
}
Result<AmperesPerSquareDecimetre> read_current_density(std::string_view text, std::string_view where) {
  return read_quantity<AmperesPerSquareDecimetre>(text, where);
}
Result<Hours> read_duration(std::string_view text, std::string_view where) {
  return read_quantity<Hours>(text, where);
}
Result<MolesPerLitre> read_molarity(std::string_view text, std::string_view where) {
  return read_quantity<MolesPerLitre>(text, where);
}

Result<double> read_fraction(std::string_view text, std::string_view where) {
  const auto read = split_number(text, where);
  if (!read || !read->unit.empty()) return read_in(fraction_dimension(), text, where);
  if (read->number < 0) return negative(fraction_dimension().name, text, where);
  if (read->number > 1) {
    return Problem{Fault::out_of_range, std::string(where), quoted(text) + " is more than the whole",
                   "a share from 0 to 1, or a per cent with its sign",
                   "Did you mean " + quoted(std::string(text) + " %") + "?"};
  }
  return read->number;
}

Result<Concentration> read_concentration(std::string_view text, std::string_view where) {
  const auto read = split_number(text, where);
  if (!read) return read.problems();
  const Dimension& dimension = dimension_of<Concentration>();

  Concentration c{.value = read->number};
  std::string_view unit = read->unit;
  const bool normality = unit.starts_with("N") && (unit.size() == 1 || unit[1] == ' ' || unit[1] == '(');
  if (normality) {
    const std::size_t bracket = unit.find_first_not_of(' ', 1);
    const auto equivalents =
        read_equivalents(bracket == unit.npos ? std::string_view{} : unit.substr(bracket), text, where);
    if (!equivalents) return equivalents.problems();
    c.equivalents = *equivalents;
    unit = "N";
  }
  const auto index = read_unit(dimension, unit, text, where);
  if (!index) return index.problems();
  c.unit = static_cast<ConcentrationUnit>(*index);

  if (c.value < 0) return negative(dimension.name, text, where);
  const double highest = highest_possible(c.unit);
  if (read->with_thousands && *read->with_thousands <= highest) return may_be_thousands(*read, text, where);
  if (c.value > highest) {
    return impossible(text, where,
                      "a concentration up to " + significant(highest, 3) + " " + std::string(symbol(c.unit)));
  }
  return c;
}

}  // namespace bathwright::units
