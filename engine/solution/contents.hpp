// What a recipe puts into the vessel: mol of each component and the water, for a kg of water or a litre.
#pragma once

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

}  // namespace bathwright::solution
