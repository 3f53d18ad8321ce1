// A solution in equilibrium with solids in excess, its other contents given as the tables give them.
#pragma once

#include "mixture.hpp"

namespace bathwright::reference {

/// What a saturated solution holds beside the solid's own ions.
struct Content {
  enum class Unit { mol_per_kg_water, mol_per_L, g_per_L, mass_percent_of_solvent };
  std::string formula;
  double value;
  Unit unit;
};

struct Saturated {
  Recipe contents;  ///< salts dissolved and background, mol per kg of liquid water
  double volume_L;  ///< of the solution that holds 1 kg of liquid water
  double water_activity;
  std::string doubt;
  double u_contents = 0;  ///< standard uncertainty of the content of the first salt, mol per kg of water
  double u_water_activity = 0;
};

/// Saturates with each of the salts. Of the solids that give a salt's ions (hydrates included) the least
/// soluble is the stable one. Contents per litre and per kg of water are those of the saturated solution,
/// crystal water included: found by iteration, with the density of matter/density.hpp. Fails where no solid
/// of the composition has a constant at the temperature, or as the solver does.
Result<Saturated> saturate(const std::vector<std::string>& salts, const std::vector<Content>& background,
                           double t_C, activity::ModelKind model);

/// The volume of the solution that holds these contents in 1 kg of liquid water; NaN where none is known.
double volume_L(const Recipe& contents, double t_C, activity::ModelKind model);

}  // namespace bathwright::reference
