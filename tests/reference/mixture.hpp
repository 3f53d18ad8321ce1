// A solution given by formulae and molalities, brought to equilibrium.
#pragma once

#include <bathwright/matter/formula.hpp>
#include <bathwright/speciation/components.hpp>
#include <bathwright/speciation/solver.hpp>
#include <map>

namespace bathwright::reference {

/// mol per kg of water, by formula as the tables write it.
using Recipe = std::map<std::string, double>;

/// Reads "m(NaHCO3)=0.025; m(Na2CO3)=0.025 mol/kg" and the like; c(...) in mol/L is taken as mol in 0.997 kg
/// of water, right to 1 % in the dilute solutions that are stated so. A single "c=0.1 mol/L" is of `system`.
Recipe read_recipe(const std::string& conditions, const std::string& system);

struct Mixture {
  std::shared_ptr<const speciation::Solver> solver;
  speciation::Task task;
};

/// Fails on a formula that does not read or cannot be made up from known ions.
Result<Mixture> mix(const Recipe& recipe, double t_C, activity::ModelKind model);

/// Why the model should not be judged at this composition, or empty: an unknown pair of ions, a temperature
/// or an ionic strength outside the fit of a pair that matters.
std::string doubt(const speciation::Solver& solver, const speciation::Equilibrium& answer);

}  // namespace bathwright::reference
