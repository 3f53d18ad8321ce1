#include "watts_sweep.hpp"

#include <algorithm>
#include <chrono>
#include <random>
#include <sstream>

#include "systems.hpp"

namespace bathwright::speciation {
namespace {

std::string description(const Solver& solver, const Task& task, unsigned seed, int number) {
  std::ostringstream text;
  text << "seed " << seed << ", case " << number << ", " << solver.temperature().v << " degC, precipitation "
       << (task.solids.empty() ? "off" : "on") << ":";
  text.precision(17);
  for (std::size_t i = 0; i < task.component_mol.size(); ++i)
    text << " " << solver.system().components()[i] << " " << task.component_mol[i];
  return text.str();
}

}  // namespace

SweepReport sweep_watts_bath(unsigned seed, int count) {
  const Names components{"Ni^2+", "SO4^2-", "Cl^-", "H3BO3", "Na^+", "Ca^2+"};
  std::vector<Solver> solvers;
  for (const double t : {5.0, 25.0, 55.0}) solvers.push_back(solver_of(components, {t}));

  std::mt19937 random(seed);
  SweepReport report;
  std::vector<double> microseconds;
  for (int number = 0; number < count; ++number) {
    const Solver& solver = solvers[static_cast<std::size_t>(number % 3)];
    Task task = wild_totals(solver.system(), random);
    if (number % 2 == 1) let_precipitate(task, solver.system());

    const auto start = std::chrono::steady_clock::now();
    const auto answer = solver.solve(task);
    const auto stop = std::chrono::steady_clock::now();
    microseconds.push_back(std::chrono::duration<double, std::micro>(stop - start).count());
    if (!answer) {
      auto& list = answer.problems().front().kind == Fault::out_of_range ? report.refusals : report.failures;
      list.push_back(description(solver, task, seed, number) + "\n    " + text(answer.problems()));
      continue;
    }
    report.worst_mass_balance = std::max(report.worst_mass_balance, answer->residuals.mass_balance);
    report.worst_charge = std::max(report.worst_charge, answer->residuals.charge_mol_per_kg);
  }
  std::sort(microseconds.begin(), microseconds.end());
  if (!microseconds.empty()) {
    report.median_microseconds = microseconds[microseconds.size() / 2];
    report.slowest_microseconds = microseconds.back();
  }
  return report;
}

}  // namespace bathwright::speciation
