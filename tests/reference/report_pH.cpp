// pH of buffers, acids, bases and salts, and the dissociation of HSO4^-.
#include "mixture.hpp"
#include "report.hpp"

namespace bathwright::reference {

Computed compute_pH(const Figure& figure, activity::ModelKind model) {
  Recipe recipe = read_recipe(figure.conditions, figure.system);
  const bool saturated_lime = figure.system == "Ca(OH)2" && figure.conditions == "saturated";
  if (saturated_lime) recipe["Ca(OH)2"] = 0;
  if (recipe.empty()) return {{}, "conditions not read"};
  auto mixture = mix(recipe, figure.t_C, model);
  if (!mixture) return {{}, text(mixture.problems())};
  speciation::Task task = mixture->task;
  const speciation::ChemicalSystem& system = mixture->solver->system();
  if (saturated_lime) {
    task.solids.assign(system.solids().size(), speciation::SolidRule::report_only);
    task.solids[*system.solid("Ca(OH)2")] = speciation::SolidRule::in_excess;
  }
  const auto answer = mixture->solver->solve(task);
  if (!answer) return {{}, text(answer.problems())};
  const double value = figure.quantity == "pH"
                           ? answer->pH()
                           : answer->molality[*system.species_index("SO4^2-")] / recipe.begin()->second;
  return {value, doubt(*mixture->solver, *answer)};
}

}  // namespace bathwright::reference
