// Speciates a free solution: formulae and amounts in; pH, activities, solids, gases and density out, with
// every doubt about the answer. Not for: a tank, whose state is amounts (bath/chemistry.hpp).
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/solution/recipe.hpp>
#include <bathwright/speciation/equilibria.hpp>
#include <map>

namespace bathwright::solution {

struct SpeciesFound {
  std::string name;
  double molality = 0;  ///< mol per kg of liquid water
  double molarity = 0;  ///< mol per litre of solution
  double gamma = 1;     ///< molality scale
  double log10_activity = 0;
  std::optional<double> u_log10_activity{};  ///< see Solution::u_pH
};

struct SolidFound {
  std::string name, formula;
  double saturation_index = 0;  ///< log10(ion product / K)
  double precipitated_mol = 0;  ///< formed, mol per kg of liquid water
  double dissolved_mol = 0;     ///< of a solid in excess: its solubility, mol per kg of liquid water
  bool in_excess = false;
  bool slow = false;               ///< forms too slowly to count on
  bool covers_temperature = true;  ///< whether its constant is meant for this temperature
  std::optional<double> u_saturation_index{}, u_dissolved_mol{};  ///< see Solution::u_pH
};

struct GasFound {
  std::string name;
  double partial_pressure_atm = 0;  ///< over the solution
};

/// The acid or alkali that held the pH.
struct PhHeldWith {
  std::string counter_ion;
  double proton_mol = 0;  ///< H^+ brought per kg of liquid water; negative: taken away by alkali
};

struct Solution {
  units::Celsius temperature;
  activity::ModelKind model = activity::ModelKind::pitzer;
  std::string model_reason;
  double pH = 7;
  /// Standard uncertainties, one sigma, of the constants and of the activity coefficients as far as they are
  /// missing or estimated; the amounts count as exact (speciation/sensitivity.hpp). Nothing where the answer
  /// has no derivatives.
  std::optional<double> u_pH;
  double ionic_strength = 0;  ///< mol/kg, over the true ions
  double water_activity = 1;
  /// -ln a(water) / (0.0180153 * sum of the stoichiometric molalities); 1 for pure water.
  double osmotic_coefficient = 1;
  double density_kg_per_L = 1;
  double charge_residual = 0;  ///< mol/kg
  int iterations = 0;
  bool valid = true;  ///< within what the model and its parameters cover; `warnings` say why not
  std::vector<std::string> warnings;
  std::vector<std::string> missing_interactions;
  std::vector<SpeciesFound> species;  ///< by falling molality
  /// Per salt, acid or base of the recipe or in excess: (prod (a_i / m_i)^nu_i)^(1/nu) over its nominal ions,
  /// m_i their totals as if fully dissociated.
  std::map<std::string, double> mean_activity;
  std::vector<SolidFound> solids;  ///< by falling saturation index
  std::vector<GasFound> gases;
  std::map<std::string, double> totals;  ///< dissolved, mol of component per kg of liquid water
  std::optional<PhHeldWith> pH_held_with;
};

/// Without a stated model: Pitzer where its parameters cover what matters (speciation/coverage.hpp); else
/// Davies where that is trusted; else Pitzer, with what it lacks listed. Fails, with every problem found, on
/// what cannot be read or made up from known ions, a solid or gas nobody knows, a formula that fits several
/// phases, amounts that leave no room for water in a litre, and where the solver fails.
Result<Solution> solve(const Recipe& recipe);

/// The same with other equilibria, as the built-in ones with a constant changed. The recipe states a model of
/// their convention.
Result<Solution> solve(const Recipe& recipe, const speciation::Equilibria& equilibria);

}  // namespace bathwright::solution
