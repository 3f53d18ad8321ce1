#include "task_check.hpp"

#include <cmath>

namespace bathwright::speciation {

Outcome check(const ChemicalSystem& system, const Task& task) {
  Problems problems;
  const auto bad = [&](std::string where, std::string what, std::string expected) {
    problems.push_back({Fault::bad_input, std::move(where), std::move(what), std::move(expected), ""});
  };
  if (task.component_mol.size() != system.components().size())
    return Problem{Fault::bad_input, "",
                   "totals for " + std::to_string(task.component_mol.size()) + " components",
                   std::to_string(system.components().size()), ""};
  for (std::size_t i = 0; i < task.component_mol.size(); ++i) {
    const double mol = task.component_mol[i];
    if (!std::isfinite(mol))
      bad(system.components()[i], "the amount is not a number", "mol");
    else if (mol < 0 && i != 0)
      bad(system.components()[i], "the amount is negative: " + std::to_string(mol) + " mol", "0 or more");
  }
  if (!(task.water_kg > 0) || !std::isfinite(task.water_kg))
    bad("water", std::to_string(task.water_kg) + " kg", "more than 0");
  for (const HeldGas& held : task.gases)
    if (!(held.pressure_bar > 0) || !std::isfinite(held.pressure_bar))
      bad(system.gases()[held.gas].name, "held at " + std::to_string(held.pressure_bar) + " bar",
          "a pressure above 0");
  if (task.pH && !std::isfinite(task.pH->pH)) bad("pH", "not a number", "a pH");
  if (!problems.empty()) return problems;
  return Done{};
}

}  // namespace bathwright::speciation
