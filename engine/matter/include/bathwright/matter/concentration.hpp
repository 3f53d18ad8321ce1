// Turns a concentration in any unit into g/L or mol/L. These conversions need chemistry, so they are named
// functions with everything they need as arguments.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/units/concentration.hpp>
#include <bathwright/units/quantity.hpp>
#include <optional>
#include <string_view>

namespace bathwright::matter {

/// What a conversion may need to know. Fill in what is known; a conversion that lacks something says what.
struct ConcentrationBasis {
  std::optional<units::GramsPerMole> molar_mass = {};             ///< of the substance
  std::optional<units::KilogramsPerLitre> solution_density = {};  ///< for % w/w and ppm w/w
  std::optional<units::KilogramsPerLitre> product_density =
      {};                                     ///< of the liquid measured out, for mL/L, % v/v
  std::optional<double> product_assay = {};   ///< kg of substance per kg of that liquid
  std::optional<double> water_kg_per_L = {};  ///< kg of water in a litre of solution, for mol/kg
};

///   g/L = mol/L * M;  mol/kg * M * water_kg_per_L;  10 * % w/w * rho;  mg/kg * rho / 1000;
///         mL/L * product density * product assay
/// Fails, naming what the basis lacks for this unit.
Result<units::GramsPerLitre> grams_per_litre(const units::Concentration& c, const ConcentrationBasis& basis,
                                             std::string_view where = {});

/// As above, over the molar mass; a molar concentration needs none.
Result<units::MolesPerLitre> moles_per_litre(const units::Concentration& c, const ConcentrationBasis& basis,
                                             std::string_view where = {});

/// The way back: a concentration in g/L, in the unit the user wants to see.
///   equivalents  per mole; looked at for N only
Result<units::Concentration> in_unit(units::GramsPerLitre c, units::ConcentrationUnit unit,
                                     const ConcentrationBasis& basis, double equivalents = 1,
                                     std::string_view where = {});

/// A hydrate, an oxide or a metal counted as another: g/L of `to` that holds the same atoms of one element.
///   c           g/L of the substance counted so far
///   molar masses, and the atoms of the shared element in a formula unit of each
/// c * (M_to / n_to) / (M_from / n_from). Example: 22.5 g/L Cu (M 63.546, n 1) as CuSO4.5H2O (M 249.68, n 1)
/// = 88.40.
[[nodiscard]] units::GramsPerLitre counted_as(units::GramsPerLitre c, units::GramsPerMole from, double n_from,
                                              units::GramsPerMole to, double n_to);

}  // namespace bathwright::matter
