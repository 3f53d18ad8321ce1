#include "verify.hpp"

#include <algorithm>
#include <array>
#include <cmath>

namespace bathwright::speciation {

Residuals verify(const Solver& solver, const Constants& ln_K, const Task& task, const Equilibrium& answer) {
  const ChemicalSystem& system = solver.system();
  const std::size_t components = system.components().size();
  Residuals worst;
  const auto raise = [](double& to, double value) {
    to = std::max(to, std::isnan(value) ? HUGE_VAL : std::abs(value));
  };

  // Activity coefficients once more from the molalities.
  std::array<double, activity::max_solutes> ln_gamma, ln_a;
  const std::size_t count = answer.molality.size();
  const double ln_water = solver.model().evaluate(answer.molality, ln_gamma);
  // A free ion may be less than a double can hold; its activity is then taken at its word.
  for (std::size_t j = 0; j < count; ++j)
    ln_a[j] = answer.molality[j] > 0 ? std::log(answer.molality[j]) + ln_gamma[j] : answer.ln_activity[j];
  for (std::size_t j = 0; j < count; ++j) {
    const SystemSpecies& species = system.species()[j];
    if (!std::isfinite(ln_a[j])) continue;  // a component that is absent, and all that needs it
    double expected = ln_K.species[j] + species.water * ln_water;
    for (std::size_t i = 0; i < components; ++i)
      if (species.made_of[i] != 0) expected += species.made_of[i] * ln_a[i];
    raise(worst.mass_action, ln_a[j] - expected);
  }

  double charge = 0;
  for (std::size_t j = 0; j < count; ++j) charge += system.species()[j].charge * answer.molality[j];
  double given_charge = 0;  // of the totals: zero when they were neutral compounds
  for (std::size_t i = 0; i < components; ++i)
    given_charge += system.species()[i].charge * task.component_mol[i];
  raise(worst.charge_mol_per_kg, charge - given_charge / answer.water_kg);

  std::array<double, max_components> found{}, throughput{};
  const auto tally = [&](std::size_t i, double mol) {
    found[i] += mol;
    throughput[i] += std::abs(mol);
  };
  const auto tally_all = [&](const std::vector<double>& made_of, double mol) {
    if (mol == 0) return;
    for (std::size_t i = 0; i < components; ++i) tally(i, made_of[i] * mol);
  };
  for (std::size_t j = 0; j < count; ++j)
    tally_all(system.species()[j].made_of, answer.molality[j] * answer.water_kg);
  for (std::size_t k = 0; k < answer.solid_mol.size(); ++k)
    tally_all(system.solids()[k].made_of, answer.solid_mol[k]);
  for (std::size_t g = 0; g < task.gases.size(); ++g)
    tally_all(system.gases()[task.gases[g].gas].made_of, -answer.gas_mol[g]);
  if (task.pH) {
    tally(0, -answer.held_ph_mol);
    tally(task.pH->counter_ion, answer.held_ph_mol / system.species()[task.pH->counter_ion].charge);
  }
  for (std::size_t i = 0; i < components; ++i) {
    const double scale = std::max({std::abs(task.component_mol[i]), throughput[i], 1e15 * absent_mol});
    raise(worst.mass_balance, (found[i] - task.component_mol[i]) / scale);
  }

  for (std::size_t k = 0; k < answer.solid_mol.size(); ++k) {
    const SolidRule rule = task.solids.empty() ? SolidRule::report_only : task.solids[k];
    const double ln_index = answer.saturation_index[k] * std::log(10.0);
    const bool present = answer.solid_mol[k] != 0 || rule == SolidRule::in_excess;
    if (rule == SolidRule::report_only) continue;
    if (present)
      raise(worst.saturation, ln_index);
    else if (solver.covers(k) && ln_index > 0)
      raise(worst.saturation, ln_index);
    if (rule == SolidRule::may_precipitate) raise(worst.negative_solid, std::min(0.0, answer.solid_mol[k]));
  }
  return worst;
}

}  // namespace bathwright::speciation
