// What a recipe puts into the vessel: mol of each component and the water, for a kg of water or a litre.
#pragma once

#include <bathwright/matter/density.hpp>
#include <bathwright/solution/recipe.hpp>
#include <bathwright/speciation/components.hpp>

namespace bathwright::solution {

/// An ingredient read: what it is made of and the ions it counts as when fully dissociated.
struct Substance {
  matter::Formula formula;
  speciation::Parts parts;
  speciation::Composition ions;  ///< empty: counts as itself
  double mol = 0;                ///< per kg of water or litre, as the recipe says
};

struct Contents {
  speciation::Composition component_mol;  ///< H^+ negative: net alkali
  double water_kg = 0;                    ///< all of it, that of hydrates and of neutralised alkali included
};

Result<std::vector<Substance>> read_ingredients(const Recipe& recipe,
                                                const speciation::Equilibria& equilibria);

/// For a kg of water: the amounts as they stand, with the water the substances bring. For a litre: the water
/// that makes the volume up at the recipe's temperature, by the density model.
Result<Contents> weigh_in(const Recipe& recipe, const std::vector<Substance>& substances);

/// Density and volume of a solution of these components. H^+ below zero is counted as OH^-.
class ComponentDensity {
 public:
  static Result<ComponentDensity> prepare(const std::vector<std::string>& components);

  /// component_mol (n): in the order of prepare. water_kg: all water, as in Contents.
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

  ComponentDensity(matter::SolutionDensity density, std::optional<std::size_t> proton)
      : density_(std::move(density)), proton_(proton) {}
  matter::SolutionDensity density_;
  std::optional<std::size_t> proton_;
};

}  // namespace bathwright::solution
