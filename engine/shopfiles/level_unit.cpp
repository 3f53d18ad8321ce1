#include "level_unit.hpp"

#include <bathwright/matter/formula.hpp>
#include <bathwright/units/read.hpp>

namespace bathwright::shopfiles {

Result<LevelUnit> LevelUnit::of(const std::string& quantity, const std::string& unit,
                                std::string_view where) {
  matter::ConcentrationBasis basis;
  if (const auto formula = matter::Formula::parse(quantity)) basis.molar_mass = formula->molar_mass();
  LevelUnit level(unit, basis);
  const auto one = level.read("1", where);
  if (!one) return one.problems();
  return level;
}

Result<units::GramsPerLitre> LevelUnit::read(const std::string& number, std::string_view where) const {
  const auto typed = units::read_concentration(number + ' ' + unit_, where);
  if (!typed) return typed.problems();
  return matter::grams_per_litre(*typed, basis_, where);
}

}  // namespace bathwright::shopfiles
