// A concentration as people type it: the number and its unit, kept apart until chemistry can bring them
// together. Not for: calculating; matter/concentration.hpp turns one into g/L or mol/L.
#pragma once

#include <bathwright/units/quantity.hpp>
#include <optional>
#include <string_view>

namespace bathwright::units {

enum class ConcentrationUnit {
  grams_per_litre,
  milligrams_per_litre,
  ounces_per_us_gallon,        ///< avoirdupois ounce
  ounces_per_imperial_gallon,  ///< avoirdupois ounce
  pounds_per_us_gallon,
  troy_ounces_per_us_gallon,
  millilitres_per_litre,       ///< of a liquid product
  fluid_ounces_per_us_gallon,  ///< of a liquid product
  percent_by_mass,             ///< g per 100 g of solution
  percent_mass_per_volume,     ///< g per 100 mL of solution
  percent_by_volume,           ///< mL of a liquid product per 100 mL of solution
  moles_per_litre,
  millimoles_per_litre,
  moles_per_kilogram_of_water,
  equivalents_per_litre,  ///< N; needs `equivalents`
  ppm_by_mass,            ///< mg per kg of solution
  ppm_mass_per_volume,    ///< mg per litre of solution
  points                  ///< of acid: mL of 0.1 mol/L alkali per 10 mL of bath, 0.01 mol/L
};

struct Concentration {
  double value = 0;
  ConcentrationUnit unit = ConcentrationUnit::grams_per_litre;
  double equivalents = 1;  ///< equivalents per mole; only equivalents_per_litre looks at it
};

/// The symbol people see and may type: "g/L", "oz/US gal", "% w/w", "ppm w/v", ...
[[nodiscard]] std::string_view symbol(ConcentrationUnit unit);

/// The concentration in g/L where a plain factor does it (mass per volume); nothing where chemistry is
/// needed.
[[nodiscard]] std::optional<GramsPerLitre> grams_per_litre_if_direct(const Concentration& c);

/// The concentration in mol/L where a plain factor does it (mol/L, mmol/L, N over its equivalents).
[[nodiscard]] std::optional<MolesPerLitre> moles_per_litre_if_direct(const Concentration& c);

/// The volume of liquid product in mL per litre of solution where a plain factor does it (mL/L, % v/v, fl
/// oz/US gal).
[[nodiscard]] std::optional<double> millilitres_per_litre_if_direct(const Concentration& c);

/// How many of `unit` make one g/L, one mol/L or one mL/L: the factor the three functions above multiply by.
/// 0 for the units that need chemistry (% w/w, mol/kg, ppm w/w).
[[nodiscard]] double direct_factor(ConcentrationUnit unit);

}  // namespace bathwright::units
