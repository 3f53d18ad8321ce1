// Density of salt solutions, and from it the volume of a tank whose state is amounts.
// Not for: pure liquids, melts, or solutions with a second solvent.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/units/quantity.hpp>
#include <cstdint>
#include <span>
#include <string>
#include <vector>

namespace bathwright::matter {

struct DissolvedSalt {
  std::string formula;   ///< anhydrous, as any spelling of its composition
  double mass_fraction;  ///< kg per kg of solution
};

/// One row of matter/laliberte_density.csv, and the equation below for it.
struct SaltCoefficients {
  double c0 = 0, c1 = 0;                                          ///< kg/m3
  double c2 = 0;                                                  ///< dimensionless
  double c3 = 0;                                                  ///< 1/degC
  double c4 = 0;                                                  ///< degC
  double lowest_C = 0, highest_C = 0, highest_mass_fraction = 0;  ///< the range of the fit

  /// 1/rho_app in L/kg, which passes smoothly through zero where rho_app has a pole (dilute 2-2 sulfates
  /// contract the water). solute_fraction: kg of all solutes per kg of solution.
  [[nodiscard]] double apparent_L_per_kg(double solute_fraction, units::Celsius t) const;
};

/// Density of a mixture of salts in water.
///   1/rho = w_water/rho_water + sum_i w_i/rho_app,i
///   rho_app,i = ((c0 (1 - w_water) + c1) exp(1e-6 (t + c4)^2)) / ((1 - w_water) + c2 + c3 t)
///   t  degC. Outside a salt's fitted range it still answers: use SolutionDensity::range_warnings to be told.
/// Fails on a salt without coefficients, a negative fraction, or fractions that leave no water.
/// Source: Laliberte & Cooper, J. Chem. Eng. Data 49 (2004) 1141; coefficients in
/// matter/laliberte_density.csv.
Result<units::KilogramsPerLitre> mixture_density(std::span<const DissolvedSalt> salts, units::Celsius t);

/// The volume of a solution given as amounts of ions and neutral substances. The equation above is one of
/// salts, so ions are paired: every cation with every anion, in proportion to their equivalents,
///   equivalents of salt ij = e_i e_j / E,   e = |z| n,   E = half the sum of all e
/// which does not depend on order and needs balanced charges (an imbalance is spread smoothly, not refused).
/// Give it the totals of simple ions (Ni^2+, H^+, SO4^2-), not speciated ones (HSO4^-): the coefficients are
/// of whole salts and already hold the association. H^+ with OH^- counts as water: give the excess of one of
/// them. What has no coefficients takes its apparent molar volume from matter/apparent_volume.csv, or else
/// `estimated_L_per_kg`; warnings() names it.
class SolutionDensity {
 public:
  /// Apparent volume of a solute nothing is known of: salts in water take 0.3 to 0.6 L per kg. From memory.
  static constexpr double estimated_L_per_kg = 0.5;

  /// Prepares for a fixed list of species, e.g. {"Ni^2+", "SO4^2-", "H3BO3"}. Water is not in the list.
  /// Fails with every formula that cannot be read.
  static Result<SolutionDensity> for_species(std::span<const std::string> formulas);

  /// Volume in L. Smooth in all arguments; allocates nothing.
  ///   mol       (n) amounts, in the order of for_species; small negative ones do no harm
  ///   water_kg  > 0
  [[nodiscard]] double volume_L(std::span<const double> mol, double water_kg, units::Celsius t) const;

  /// Mass of everything over volume_L.
  [[nodiscard]] units::KilogramsPerLitre density(std::span<const double> mol, double water_kg,
                                                 units::Celsius t) const;

  /// Mass of everything, kg.
  [[nodiscard]] double mass_kg(std::span<const double> mol, double water_kg) const;

  /// Solutes whose volume is estimated, whatever their amount.
  [[nodiscard]] const std::vector<std::string>& warnings() const { return warnings_; }

  /// What is doubtful about this very solution: estimated solutes above 0.1 % of its mass, and temperature or
  /// solute content beyond the range a salt was fitted in.
  [[nodiscard]] std::vector<std::string> range_warnings(std::span<const double> mol, double water_kg,
                                                        units::Celsius t) const;

 private:
  struct Solute {  // a salt of two of the ions, or a neutral substance
    enum class Volume { fitted, constant, water };
    std::string formula;
    int first = 0;           ///< index of the species: the cation, or the neutral substance
    int anion = -1;          ///< -1 for a neutral substance
    double kg_per_unit = 0;  ///< per equivalent of a salt, per mol of a neutral substance
    Volume volume = Volume::constant;
    double litres_per_kg = estimated_L_per_kg;  ///< where constant
    bool estimated = false;                     ///< where constant, and only guessed
    SaltCoefficients fit{};                     ///< where fitted
  };

  [[nodiscard]] double half_of_equivalents(std::span<const double> mol) const;
  [[nodiscard]] double mass_of_solutes_kg(std::span<const double> mol, double half) const;
  [[nodiscard]] double solute_kg(const Solute& solute, std::span<const double> mol, double half) const;

  std::vector<double> kg_per_mol_;        // of each species
  std::vector<double> charge_magnitude_;  // of each species
  std::vector<std::uint8_t> is_anion_;    // of each species: 1 or 0
  std::vector<Solute> solutes_;
  std::vector<std::string> warnings_;
};

}  // namespace bathwright::matter
