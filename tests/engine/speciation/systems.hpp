// Chemical systems and solvers to test with.
#pragma once

#include <bathwright/speciation/components.hpp>
#include <bathwright/speciation/solver.hpp>
#include <catch2/catch.hpp>
#include <memory>
#include <numeric>
#include <string>
#include <vector>

#include "../../support/bath_systems.hpp"

namespace bathwright::speciation {

inline constexpr units::Celsius room{25};
using Names = std::vector<std::string>;

inline std::shared_ptr<const ChemicalSystem> system_of(const Equilibria& equilibria,
                                                       const Names& components) {
  auto system = ChemicalSystem::make(equilibria, components);
  INFO((system ? std::string{} : text(system.problems())));
  REQUIRE(system);
  return std::make_shared<const ChemicalSystem>(*std::move(system));
}

inline Solver solver_of(const Names& components, units::Celsius t = room,
                        activity::ModelKind kind = activity::ModelKind::pitzer) {
  auto solver = Solver::prepare(system_of(equilibria_for(kind), components), kind, t);
  REQUIRE(solver);
  return *std::move(solver);
}

/// 1 kg of water with these amounts, neutral by H^+ or OH^- unless H^+ is among them.
inline Task task_of(const ChemicalSystem& system, const Amounts& amounts) {
  Task task;
  task.component_mol.assign(system.components().size(), 0);
  for (const auto& [name, mol] : amounts) {
    INFO(name);
    REQUIRE(system.component(name));
    task.component_mol[*system.component(name)] = mol;
  }
  if (!amounts.contains("H^+")) task.component_mol[0] = neutral_protons(system, task.component_mol);
  return task;
}

inline void set_rule(Task& task, const ChemicalSystem& system, std::string_view solid, SolidRule rule) {
  INFO(solid);
  REQUIRE(system.solid(solid));
  task.solids.resize(system.solids().size(), SolidRule::report_only);
  task.solids[*system.solid(solid)] = rule;
}

inline Equilibrium solved(const Solver& solver, const Task& task) {
  auto answer = solver.solve(task);
  INFO((answer ? std::string{} : text(answer.problems())));
  REQUIRE(answer);
  return *std::move(answer);
}

inline double molality_of(const Solver& solver, const Equilibrium& answer, std::string_view species) {
  INFO(species);
  REQUIRE(solver.system().species_index(species));
  return answer.molality[*solver.system().species_index(species)];
}

}  // namespace bathwright::speciation
