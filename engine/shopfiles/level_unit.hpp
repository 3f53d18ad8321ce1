// The unit of a column, and what stands in its cells in g/L. Private to shopfiles.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/matter/concentration.hpp>
#include <bathwright/units/quantity.hpp>
#include <string>
#include <string_view>

namespace bathwright::shopfiles {

/// A unit that can be turned into g/L of one quantity without knowing the bath: mass per volume, or amount
/// per volume where the quantity is a formula.
class LevelUnit {
 public:
  static Result<LevelUnit> of(const std::string& quantity, const std::string& unit, std::string_view where);

  /// `number` has a decimal point.
  [[nodiscard]] Result<units::GramsPerLitre> read(const std::string& number, std::string_view where) const;

 private:
  LevelUnit(std::string unit, matter::ConcentrationBasis basis) : unit_(std::move(unit)), basis_(basis) {}
  std::string unit_;
  matter::ConcentrationBasis basis_;
};

}  // namespace bathwright::shopfiles
