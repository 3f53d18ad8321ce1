#include <bathwright/units/concentration.hpp>

#include "unit_table.hpp"

namespace bathwright::units {

std::string_view symbol(ConcentrationUnit unit) {
  return dimension_of<Concentration>().symbols[static_cast<std::size_t>(unit)];
}

double direct_factor(ConcentrationUnit unit) {
  return dimension_of<Concentration>().units[static_cast<std::size_t>(unit)].a;
}

std::optional<GramsPerLitre> grams_per_litre_if_direct(const Concentration& c) {
  switch (c.unit) {
    case ConcentrationUnit::grams_per_litre:
    case ConcentrationUnit::milligrams_per_litre:
    case ConcentrationUnit::ounces_per_us_gallon:
    case ConcentrationUnit::ounces_per_imperial_gallon:
    case ConcentrationUnit::pounds_per_us_gallon:
    case ConcentrationUnit::troy_ounces_per_us_gallon:
    case ConcentrationUnit::percent_mass_per_volume:
    case ConcentrationUnit::ppm_mass_per_volume:
      return GramsPerLitre{c.value * direct_factor(c.unit)};
    default:
      return std::nullopt;
  }
}

std::optional<MolesPerLitre> moles_per_litre_if_direct(const Concentration& c) {
  switch (c.unit) {
    case ConcentrationUnit::moles_per_litre:
    case ConcentrationUnit::millimoles_per_litre:
    case ConcentrationUnit::points:
      return MolesPerLitre{c.value * direct_factor(c.unit)};
    case ConcentrationUnit::equivalents_per_litre:
      return MolesPerLitre{c.value / c.equivalents};
    default:
      return std::nullopt;
  }
}

std::optional<double> millilitres_per_litre_if_direct(const Concentration& c) {
  switch (c.unit) {
    case ConcentrationUnit::millilitres_per_litre:
    case ConcentrationUnit::fluid_ounces_per_us_gallon:
    case ConcentrationUnit::percent_by_volume:
      return c.value * direct_factor(c.unit);
    default:
      return std::nullopt;
  }
}

}  // namespace bathwright::units
