#include <bathwright/matter/concentration.hpp>
#include <string>

namespace bathwright::matter {
namespace {

using units::Concentration;
using units::ConcentrationUnit;

// How many g/L one of the unit makes; every conversion of this file is this factor or its inverse.
Result<double> grams_per_litre_of_one(ConcentrationUnit unit, const ConcentrationBasis& basis,
                                      double equivalents, std::string_view where) {
  Problems lacking;
  const auto known = [&](const auto& value, std::string_view name) {
    if (!value) {
      lacking.push_back(
          {Fault::bad_input, std::string(where),
           "a concentration in " + std::string(units::symbol(unit)) + " needs the " + std::string(name), "",
           "Give it, or use g/L."});
    }
    return value.has_value();
  };
  const Concentration one{1, unit, equivalents};
  if (const auto direct = units::grams_per_litre_if_direct(one)) return direct->v;
  if (const auto molar = units::moles_per_litre_if_direct(one)) {
    if (!known(basis.molar_mass, "molar mass of the substance")) return lacking;
    return molar->v * basis.molar_mass->v;
  }
  if (const auto product_mL_per_L = units::millilitres_per_litre_if_direct(one)) {
    const bool density = known(basis.product_density, "density of the liquid product");
    const bool assay = known(basis.product_assay, "assay (mass share) of the liquid product");
    if (!density || !assay) return lacking;
    return *product_mL_per_L * basis.product_density->v * *basis.product_assay;  // kg/L is g/mL
  }
  if (unit == ConcentrationUnit::moles_per_kilogram_of_water) {
    const bool mass = known(basis.molar_mass, "molar mass of the substance");
    const bool water = known(basis.water_kg_per_L, "water content of the solution");
    if (!mass || !water) return lacking;
    return basis.molar_mass->v * *basis.water_kg_per_L;
  }
  if (!known(basis.solution_density, "density of the solution")) return lacking;
  const double grams_per_kg = unit == ConcentrationUnit::percent_by_mass ? 10 : 1e-3;  // or ppm by mass
  return grams_per_kg * basis.solution_density->v;
}

}  // namespace

Result<units::GramsPerLitre> grams_per_litre(const Concentration& c, const ConcentrationBasis& basis,
                                             std::string_view where) {
  const auto factor = grams_per_litre_of_one(c.unit, basis, c.equivalents, where);
  if (!factor) return factor.problems();
  return units::GramsPerLitre{c.value * *factor};
}

Result<units::MolesPerLitre> moles_per_litre(const Concentration& c, const ConcentrationBasis& basis,
                                             std::string_view where) {
  if (const auto direct = units::moles_per_litre_if_direct(c)) return *direct;
  const auto mass = grams_per_litre(c, basis, where);
  if (!mass) return mass.problems();
  if (!basis.molar_mass) {
    return Problem{Fault::bad_input, std::string(where), "mol/L needs the molar mass of the substance", "",
                   ""};
  }
  return units::MolesPerLitre{mass->v / basis.molar_mass->v};
}

Result<Concentration> in_unit(units::GramsPerLitre c, ConcentrationUnit unit, const ConcentrationBasis& basis,
                              double equivalents, std::string_view where) {
  const auto factor = grams_per_litre_of_one(unit, basis, equivalents, where);
  if (!factor) return factor.problems();
  return Concentration{c.v / *factor, unit, equivalents};
}

units::GramsPerLitre counted_as(units::GramsPerLitre c, units::GramsPerMole from, double n_from,
                                units::GramsPerMole to, double n_to) {
  return {c.v * (to.v / n_to) / (from.v / n_from)};
}

}  // namespace bathwright::matter
