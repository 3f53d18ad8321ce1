// The density of a solution whose contents are totals of components. Not for: amounts of ions as they are
// (density.hpp).
#pragma once

#include <bathwright/matter/density.hpp>
#include <optional>

namespace bathwright::matter {

/// Density and volume of a solution given as totals of basis species, as the equilibria count them: H^+ below
/// zero is alkali and counts as OH^-, each made of a water.
class ComponentDensity {
 public:
  static Result<ComponentDensity> prepare(const std::vector<std::string>& components);

  /// component_mol (n): in the order of prepare. water_kg: all water, that of hydrates and of neutralised
  /// alkali included.
  [[nodiscard]] double volume_L(const std::vector<double>& component_mol, double water_kg,
                                units::Celsius t) const;
  [[nodiscard]] units::KilogramsPerLitre density(const std::vector<double>& component_mol, double water_kg,
                                                 units::Celsius t) const;
  [[nodiscard]] std::vector<std::string> range_warnings(const std::vector<double>& component_mol,
                                                        double water_kg, units::Celsius t) const;

 private:
  struct Counted {
    std::vector<double> mol;  ///< the components, then OH^-
    double water_kg;
  };
  [[nodiscard]] Counted counted(const std::vector<double>& component_mol, double water_kg) const;

  ComponentDensity(SolutionDensity density, std::optional<std::size_t> proton)
      : density_(std::move(density)), proton_(proton) {}
  SolutionDensity density_;
  std::optional<std::size_t> proton_;
};

}  // namespace bathwright::matter
