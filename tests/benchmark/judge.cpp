#include "judge.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

namespace bathwright::benchmark {

double worst_residual(const speciation::Solver& solver, const speciation::Constants& ln_K,
                      const speciation::Task& task, const Answer& answer) {
  const auto& system = solver.system();
  double worst = 0;
  const auto raise = [&](double value) {
    worst = std::isfinite(value) ? std::max(worst, std::abs(value)) : std::numeric_limits<double>::infinity();
  };
  const auto balance = [&](double given, double free_mol, auto&& count_of) {
    double found = free_mol, throughput = std::abs(free_mol) + std::abs(given);
    const auto add = [&](double mol) {
      found += mol;
      throughput += std::abs(mol);
    };
    for (std::size_t j = 0; j < system.species().size(); ++j)
      add(count_of(system.species()[j]) * answer.molality[j] * answer.water_kg);
    for (std::size_t k = 0; k < system.solids().size(); ++k)
      add(count_of(system.solids()[k]) * answer.solid_mol[k]);
    raise((found - given) / throughput);
  };
  for (std::size_t i = 0; i < system.components().size(); ++i)
    balance(task.component_mol[i], 0, [&](const auto& row) { return row.made_of[i]; });
  balance(task.water_kg * speciation::water_mol_per_kg, answer.water_kg * speciation::water_mol_per_kg,
          [](const auto& row) { return row.water; });

  std::vector<double> ln_gamma(answer.molality.size());
  const double ln_aw = solver.model().evaluate(answer.molality, ln_gamma);
  const auto ln_product = [&](const auto& row, double ln_K_of_row) {
    double sum = row.water * ln_aw - ln_K_of_row;
    for (std::size_t i = 0; i < row.made_of.size(); ++i)
      if (row.made_of[i] != 0) sum += row.made_of[i] * (std::log(answer.molality[i]) + ln_gamma[i]);
    return sum;
  };
  for (std::size_t j = 0; j < system.species().size(); ++j)
    raise(std::log(answer.molality[j]) + ln_gamma[j] - ln_product(system.species()[j], -ln_K.species[j]));
  for (std::size_t k = 0; k < system.solids().size(); ++k) {
    if (task.solids.empty() || task.solids[k] == speciation::SolidRule::report_only || !solver.covers(k))
      continue;
    const double above = ln_product(system.solids()[k], ln_K.solids[k]);
    raise(answer.solid_mol[k] != 0 ? above : std::max(0.0, above));
    raise(std::min(0.0, answer.solid_mol[k]));
  }
  return worst;
}

}  // namespace bathwright::benchmark
