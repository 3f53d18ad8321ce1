#include <bathwright/matter/density.hpp>
#include <bathwright/matter/formula.hpp>
#include <bathwright/matter/water.hpp>
#include <bathwright/units/show.hpp>
#include <cassert>
#include <cmath>

#include "salt_table.hpp"

namespace bathwright::matter {
double SaltCoefficients::apparent_L_per_kg(double solute_fraction, units::Celsius t) const {
  const double shifted = t.v + c4;
  return 1000 * (solute_fraction + c2 + c3 * t.v) /
         ((c0 * solute_fraction + c1) * std::exp(1e-6 * shifted * shifted));
}

Result<units::KilogramsPerLitre> mixture_density(std::span<const DissolvedSalt> salts, units::Celsius t) {
  Problems problems;
  double solute_fraction = 0;
  std::vector<const SaltCoefficients*> fits;
  for (const DissolvedSalt& salt : salts) {
    solute_fraction += salt.mass_fraction;
    if (!(salt.mass_fraction >= 0)) {
      problems.push_back({Fault::out_of_range, salt.formula,
                          "mass fraction " + units::significant(salt.mass_fraction), "0 or more", ""});
    }
    const auto formula = Formula::parse(salt.formula, "density");
    if (!formula) {
      problems.insert(problems.end(), formula.problems().begin(), formula.problems().end());
      continue;
    }
    fits.push_back(find_salt(*formula));
    if (!fits.back()) {
      problems.push_back({Fault::out_of_range, "density", "no density coefficients for " + salt.formula,
                          "a salt of matter/laliberte_density.csv", "Use SolutionDensity, which estimates."});
    }
  }
  if (!(solute_fraction < 1)) {
    problems.push_back({Fault::out_of_range, "density",
                        "mass fractions add up to " + units::significant(solute_fraction), "less than 1",
                        ""});
  }
  if (!problems.empty()) return problems;

  double litres_per_kg = (1 - solute_fraction) / water_density(t).v;
  for (std::size_t i = 0; i < salts.size(); ++i) {
    litres_per_kg += salts[i].mass_fraction * fits[i]->apparent_L_per_kg(solute_fraction, t);
  }
  return units::KilogramsPerLitre{1 / litres_per_kg};
}

Result<SolutionDensity> SolutionDensity::for_species(std::span<const std::string> formulas) {
  Problems problems;
  std::vector<Formula> species;
  for (const std::string& text : formulas) {
    auto formula = Formula::parse(text, "density");
    if (formula) {
      species.push_back(*std::move(formula));
    } else {
      problems.insert(problems.end(), formula.problems().begin(), formula.problems().end());
    }
  }
  if (!problems.empty()) return problems;

  SolutionDensity density;
  const Formula water = *Formula::parse("H2O");
  const auto add = [&](const Formula& substance, int first, int anion, double kg_per_unit) {
    Solute solute{.formula = substance.text(), .first = first, .anion = anion, .kg_per_unit = kg_per_unit};
    if (same_composition(substance, water)) {
      solute.volume = Solute::Volume::water;
    } else if (const SaltCoefficients* fit = find_salt(substance)) {
      solute.volume = Solute::Volume::fitted;
      solute.fit = *fit;
    } else if (const auto cm3 = apparent_volume_cm3_per_mol(substance)) {
      solute.litres_per_kg = *cm3 / substance.molar_mass().v;  // cm3/g
    } else {
      solute.estimated = true;
      density.warnings_.push_back("density: the volume of dissolved " + substance.text() + " is estimated");
    }
    density.solutes_.push_back(std::move(solute));
  };

  for (std::size_t i = 0; i < species.size(); ++i) {
    const Formula& one = species[i];
    density.kg_per_mol_.push_back(one.molar_mass().v / 1000);
    density.charge_magnitude_.push_back(std::abs(one.charge()));
    density.is_anion_.push_back(one.charge() < 0);
    if (one.charge() == 0) add(one, static_cast<int>(i), -1, one.molar_mass().v / 1000);
    if (one.charge() <= 0) continue;
    for (std::size_t j = 0; j < species.size(); ++j) {
      const Formula& other = species[j];
      if (other.charge() >= 0) continue;
      const double kg_per_equivalent =
          (one.molar_mass().v / one.charge() + other.molar_mass().v / -other.charge()) / 1000;
      add(Formula::salt(one, other), static_cast<int>(i), static_cast<int>(j), kg_per_equivalent);
    }
  }
  return density;
}

double SolutionDensity::half_of_equivalents(std::span<const double> mol) const {
  double sum = 0;
  for (std::size_t i = 0; i < mol.size(); ++i) sum += charge_magnitude_[i] * mol[i];
  return sum / 2;
}

/// Sum of solute_kg, ion by ion: a cation's equivalents go to all anions, and the other way round.
double SolutionDensity::mass_of_solutes_kg(std::span<const double> mol, double half) const {
  double neutral_kg = 0, kg[2] = {0, 0}, equivalents[2] = {0, 0};
  for (std::size_t i = 0; i < mol.size(); ++i) {
    const double of_it = mol[i] * kg_per_mol_[i];
    if (charge_magnitude_[i] == 0) {
      neutral_kg += of_it;
      continue;
    }
    kg[is_anion_[i]] += of_it;
    equivalents[is_anion_[i]] += charge_magnitude_[i] * mol[i];
  }
  return neutral_kg + (half > 0 ? (kg[0] * equivalents[1] + kg[1] * equivalents[0]) / half : 0);
}

double SolutionDensity::solute_kg(const Solute& solute, std::span<const double> mol, double half) const {
  const auto first = static_cast<std::size_t>(solute.first);
  if (solute.anion < 0) return mol[first] * solute.kg_per_unit;
  if (!(half > 0)) return 0;  // no ions
  const auto anion = static_cast<std::size_t>(solute.anion);
  return charge_magnitude_[first] * mol[first] * (charge_magnitude_[anion] * mol[anion] / half) *
         solute.kg_per_unit;
}

double SolutionDensity::volume_L(std::span<const double> mol, double water_kg, units::Celsius t) const {
  assert(mol.size() == kg_per_mol_.size());
  const double half = half_of_equivalents(mol), paired_kg = mass_of_solutes_kg(mol, half);
  double formed_water_kg = 0;
  for (const Solute& solute : solutes_)
    if (solute.volume == Solute::Volume::water) formed_water_kg += solute_kg(solute, mol, half);
  const double all_water_kg = water_kg + formed_water_kg;
  const double solute_fraction = (paired_kg - formed_water_kg) / (water_kg + paired_kg);

  double litres = all_water_kg / water_density(t).v;
  for (const Solute& solute : solutes_) {
    if (solute.volume == Solute::Volume::water) continue;
    const double kg = solute_kg(solute, mol, half);
    if (kg == 0) continue;
    litres += kg * (solute.volume == Solute::Volume::fitted ? solute.fit.apparent_L_per_kg(solute_fraction, t)
                                                            : solute.litres_per_kg);
  }
  return litres;
}

double SolutionDensity::mass_kg(std::span<const double> mol, double water_kg) const {
  assert(mol.size() == kg_per_mol_.size());
  double kg = water_kg;
  for (std::size_t i = 0; i < mol.size(); ++i) kg += kg_per_mol_[i] * mol[i];
  return kg;
}

units::KilogramsPerLitre SolutionDensity::density(std::span<const double> mol, double water_kg,
                                                  units::Celsius t) const {
  return {mass_kg(mol, water_kg) / volume_L(mol, water_kg, t)};
}

std::vector<std::string> SolutionDensity::range_warnings(std::span<const double> mol, double water_kg,
                                                         units::Celsius t) const {
  constexpr double noticeable =
      1e-3;  // of the solution's mass; less does not move the density's fourth digit
  std::vector<std::string> doubts;
  if (t < water_lowest || t > water_highest) {
    doubts.push_back("density: " + units::show(t) + " is outside the range of liquid water, " +
                     units::show(water_lowest) + " to " + units::show(water_highest));
  }
  const double half = half_of_equivalents(mol), all_kg = mass_kg(mol, water_kg);
  const double solute_fraction = 1 - water_kg / all_kg;
  for (const Solute& solute : solutes_) {
    const double fraction = solute_kg(solute, mol, half) / all_kg;
    if (fraction < noticeable) continue;
    const std::string name = "density: dissolved " + solute.formula;
    if (solute.estimated) doubts.push_back(name + ": volume estimated");
    if (solute.volume != Solute::Volume::fitted) continue;
    if (t.v < solute.fit.lowest_C || t.v > solute.fit.highest_C) {
      doubts.push_back(name + ": measured from " + units::significant(solute.fit.lowest_C) + " to " +
                       units::significant(solute.fit.highest_C) + " degC only");
    }
    if (solute_fraction > solute.fit.highest_mass_fraction) {
      doubts.push_back(
          name + ": measured up to " + units::significant(100 * solute.fit.highest_mass_fraction) +
          " % of solutes by mass only; here " + units::significant(100 * solute_fraction) + " %");
    }
  }
  return doubts;
}

}  // namespace bathwright::matter
