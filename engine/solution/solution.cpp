#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <bathwright/matter/component_density.hpp>
#include <bathwright/solution/solution.hpp>
#include <bathwright/speciation/coverage.hpp>
#include <bathwright/speciation/sensitivity.hpp>
#include <bathwright/units/show.hpp>
#include <cassert>
#include <cmath>
#include <numbers>

#include "contents.hpp"
#include "ion_totals.hpp"
#include "solid_rules.hpp"

namespace bathwright::solution {
namespace {

using activity::ModelKind;
using speciation::ChemicalSystem;
using speciation::Equilibria;
using speciation::Equilibrium;
using speciation::SolidRule;
using speciation::Solver;
using speciation::Task;
using speciation::Uncertainty;

constexpr double bar_per_atm = 1.01325;  // exact, by definition of the atmosphere

/// A recipe brought to equilibrium with one model.
struct Solved {
  const Equilibria* equilibria;
  std::vector<Substance> substances;
  Solver solver;
  Task task;
  Equilibrium equilibrium;
  speciation::Coverage coverage;
};

Result<std::vector<std::string>> gas_and_solid_components(const Recipe& recipe,
                                                          const Equilibria& equilibria) {
  std::vector<std::string> components;
  Problems problems;
  const auto take = [&](const speciation::Composition& gives) {
    for (const auto& [component, count] : gives) components.push_back(component);
  };
  for (const std::string& name : recipe.excess) {
    const auto solid = find_solid(equilibria, name, recipe.temperature, solids_place(recipe));
    if (solid)
      take((*solid)->gives);
    else
      problems.insert(problems.end(), solid.problems().begin(), solid.problems().end());
  }
  std::vector<std::string> gas_names;
  for (const auto& gas : equilibria.gases()) gas_names.push_back(gas.name);
  for (const auto& [name, atm] : recipe.gases_atm) {
    const auto found = std::find(gas_names.begin(), gas_names.end(), name);
    if (found != gas_names.end()) {
      take(equilibria.gases()[static_cast<std::size_t>(found - gas_names.begin())].gives);
      continue;
    }
    const auto close = nearest(name, gas_names);
    problems.push_back({Fault::bad_input, recipe.file + ": gases", name + " is not a gas of the tables",
                        "a gas by its formula", close ? "Did you mean " + *close + "?" : ""});
  }
  if (!problems.empty()) return problems;
  return components;
}

/// given: the equilibria to use; null: the built-in ones of the model, in the set that the totals ask for.
Result<Solved> solve_with(const Recipe& recipe, ModelKind kind, const Equilibria* given = nullptr) {
  const activity::Convention convention = activity::convention(kind);
  // What the ingredients are made of is the same in every set.
  const Equilibria& any_set = given ? *given : Equilibria::built_in(convention);
  auto substances = read_ingredients(recipe, any_set);
  auto components = gas_and_solid_components(recipe, any_set);
  Problems problems;
  if (!substances) problems = substances.problems();
  if (!components)
    problems.insert(problems.end(), components.problems().begin(), components.problems().end());
  if (!problems.empty()) return problems;
  const auto contents = weigh_in(recipe, *substances);
  if (!contents) return contents.problems();

  std::vector<std::string> names = *std::move(components);
  for (const auto& [component, mol] : contents->component_mol)
    if (mol != 0) names.push_back(component);
  if (recipe.pH) names.push_back(recipe.counter_ion);
  speciation::Composition total_molality = contents->component_mol;
  for (auto& [component, amount] : total_molality) amount /= contents->water_kg;
  const activity::ParameterSets sets = activity::parameter_sets_for(total_molality);
  const Equilibria& equilibria = given ? *given : Equilibria::built_in(convention, sets.zinc);
  auto system = ChemicalSystem::make(equilibria, names);
  if (!system) return system.problems();
  auto solver = Solver::prepare(std::make_shared<const ChemicalSystem>(*std::move(system)), kind,
                                recipe.temperature, sets.acid);
  if (!solver) return solver.problems();
  auto rules = solid_rules(recipe, equilibria, *solver);
  if (!rules) return rules.problems();

  Task task;
  for (const std::string& name : solver->system().components()) {
    const auto found = contents->component_mol.find(name);
    task.component_mol.push_back(found == contents->component_mol.end() ? 0 : found->second);
  }
  task.water_kg = contents->water_kg;
  task.solids = *std::move(rules);
  for (const auto& [name, atm] : recipe.gases_atm)
    task.gases.push_back({*solver->system().gas(name), atm * bar_per_atm});
  if (recipe.pH) task.pH = speciation::HeldPh{*recipe.pH, *solver->system().component(recipe.counter_ion)};
  auto equilibrium = solver->solve(task);
  if (!equilibrium) return equilibrium.problems();
  speciation::Coverage coverage = speciation::coverage(*solver, *equilibrium);
  return Solved{&equilibria,     *std::move(substances),  *std::move(solver),
                std::move(task), *std::move(equilibrium), std::move(coverage)};
}

struct Chosen {
  Solved solved;
  std::string reason;
};

Result<Chosen> choose_model(const Recipe& recipe) {
  if (recipe.model) {
    auto solved = solve_with(recipe, *recipe.model);
    if (!solved) return solved.problems();
    return Chosen{*std::move(solved), "as asked for"};
  }
  auto pitzer = solve_with(recipe, ModelKind::pitzer);
  if (!pitzer) return pitzer.problems();
  const auto in_doubt = [](const Solved& solved) {
    return units::significant(100 * std::expm1(solved.coverage.u_ln_gamma), 2) + " %";
  };
  constexpr double negligible = 0.01;  // of ln gamma
  if (pitzer->coverage.valid) {
    std::string reason = "its parameters cover every interaction that matters here";
    if (pitzer->coverage.u_ln_gamma >= negligible)
      reason = "what its parameters leave open makes no coefficient that matters more uncertain than " +
               in_doubt(*pitzer);
    return Chosen{*std::move(pitzer), std::move(reason)};
  }
  auto sit = solve_with(recipe, ModelKind::sit);
  if (sit && sit->coverage.valid) {
    std::string reason =
        "Pitzer parameters do not cover this solution; with complexes and specific interaction coefficients no "
        "coefficient that matters is more uncertain than " +
        in_doubt(*sit);
    return Chosen{*std::move(sit), std::move(reason)};
  }
  return Chosen{*std::move(pitzer),
                "its parameters do not cover all of this solution, but sit does no better"};
}

/// Dissolved totals of the components, mol per kg of liquid water, and all the water that goes with them.
struct Dissolved {
  std::vector<double> component_mol;
  double water_kg = 1;
};

Dissolved dissolved(const Solved& solved) {
  const auto& species = solved.solver.system().species();
  Dissolved d;
  d.component_mol.assign(solved.solver.system().components().size(), 0);
  for (std::size_t j = 0; j < species.size(); ++j) {
    for (std::size_t i = 0; i < d.component_mol.size(); ++i)
      d.component_mol[i] += species[j].made_of[i] * solved.equilibrium.molality[j];
    d.water_kg += species[j].water * solved.equilibrium.molality[j] * activity::water_kg_per_mol;
  }
  return d;
}

std::optional<double> in_log10(double ln) { return ln / std::numbers::ln10; }

void list_species(const Solved& solved, const std::optional<Uncertainty>& u, double litres_per_kg_water,
                  Solution& out) {
  const auto& species = solved.solver.system().species();
  const Equilibrium& e = solved.equilibrium;
  for (std::size_t j = 0; j < species.size(); ++j)
    if (e.molality[j] > 0)
      out.species.push_back({species[j].name, e.molality[j], e.molality[j] / litres_per_kg_water,
                             std::exp(e.ln_gamma[j]), e.ln_activity[j] / std::numbers::ln10,
                             u ? in_log10(u->ln_activity[j]) : std::nullopt});
  std::stable_sort(out.species.begin(), out.species.end(),
                   [](const auto& a, const auto& b) { return a.molality > b.molality; });
}

void list_solids(const Solved& solved, const std::optional<Uncertainty>& u, Solution& out) {
  const auto& solids = solved.solver.system().solids();
  const Equilibrium& e = solved.equilibrium;
  for (std::size_t k = 0; k < solids.size(); ++k) {
    if (!std::isfinite(e.saturation_index[k])) continue;  // an ion of it is not there
    const double formed = e.solid_mol[k] / e.water_kg;
    const bool in_excess = solved.task.solids[k] == SolidRule::in_excess;
    out.solids.push_back({solids[k].name, solids[k].formula, e.saturation_index[k], std::max(formed, 0.0),
                          std::max(-formed, 0.0), in_excess, solids[k].slow, solved.solver.covers(k)});
    if (u) {
      out.solids.back().u_saturation_index = u->saturation_index[k];
      if (in_excess) out.solids.back().u_dissolved_mol = u->solid_mol[k] / e.water_kg;
    }
    if (solids[k].min_C == solids[k].max_C && formed != 0 && solids[k].min_C != solved.solver.temperature().v)
      out.warnings.push_back(solids[k].name + ": its constant is known at " +
                             units::significant(solids[k].min_C) + " degC only");
  }
  std::stable_sort(out.solids.begin(), out.solids.end(),
                   [](const auto& a, const auto& b) { return a.saturation_index > b.saturation_index; });
}

void list_gases(const Solved& solved, Solution& out) {
  const auto& gases = solved.solver.system().gases();
  for (std::size_t g = 0; g < gases.size(); ++g)
    if (solved.equilibrium.gas_bar[g] > 0)
      out.gases.push_back({gases[g].name, solved.equilibrium.gas_bar[g] / bar_per_atm});
}

/// Everything as if fully dissociated: what was weighed in, less what fell out, plus what dissolved.
IonTotals stoichiometric(const Recipe& recipe, const Solved& solved) {
  const ChemicalSystem& system = solved.solver.system();
  const Equilibrium& e = solved.equilibrium;
  IonTotals totals(*solved.equilibria);
  for (const Substance& substance : solved.substances)
    totals.add(substance.formula, substance.ions, substance.mol);
  for (std::size_t k = 0; k < system.solids().size(); ++k)
    if (e.solid_mol[k] != 0) totals.add(system.solids()[k].formula, -e.solid_mol[k]);
  for (std::size_t g = 0; g < e.gas_mol.size(); ++g)
    totals.add(system.gases()[solved.task.gases[g].gas].name, e.gas_mol[g]);
  if (recipe.pH) {
    const auto& counter = system.species()[solved.task.pH->counter_ion];
    if (counter.charge > 0)
      totals.add_ion("OH^-", -e.held_ph_mol);
    else
      totals.add_ion("H^+", e.held_ph_mol);
    totals.add_ion(counter.name, -e.held_ph_mol / counter.charge);
  }
  totals.divide_by(e.water_kg);
  return totals;
}

void list_mean_activities(const Recipe& recipe, const Solved& solved, const IonTotals& totals,
                          Solution& out) {
  const auto list = [&](const std::string& written, const speciation::Composition& ions) {
    if (ions.empty()) return;
    double ln_sum = 0, nu_sum = 0;
    for (const auto& [ion, nu] : ions) {
      const auto j = solved.solver.system().species_index(ion);
      const double total = totals.of(ion);
      if (!j || !(total > 0)) return;
      ln_sum += nu * (solved.equilibrium.ln_activity[*j] - std::log(total));
      nu_sum += nu;
    }
    if (std::isfinite(ln_sum)) out.mean_activity[written] = std::exp(ln_sum / nu_sum);
  };
  for (const Substance& substance : solved.substances) list(substance.formula.text(), substance.ions);
  for (const std::string& name : recipe.excess)
    if (const auto solid = find_solid(*solved.equilibria, name, recipe.temperature, {}))
      if (const auto formula = matter::Formula::parse((*solid)->formula))
        list((*solid)->formula, speciation::nominal_ions(*formula, *solved.equilibria));
}

Result<Solution> describe(const Recipe& recipe, const Chosen& chosen) {
  const Solved& solved = chosen.solved;
  const Equilibrium& e = solved.equilibrium;
  const ChemicalSystem& system = solved.solver.system();
  const Dissolved content = dissolved(solved);
  const auto density = matter::ComponentDensity::prepare(system.components());
  if (!density) return density.problems();

  Solution out;
  out.temperature = recipe.temperature;
  out.model = solved.solver.model().kind();
  out.model_reason = chosen.reason;
  out.pH = e.pH();
  out.ionic_strength = e.ionic_strength;
  out.water_activity = std::exp(e.ln_water_activity);
  out.density_kg_per_L = density->density(content.component_mol, content.water_kg, recipe.temperature).v;
  out.charge_residual = e.residuals.charge_mol_per_kg;
  out.iterations = e.iterations;
  out.valid = solved.coverage.valid;
  out.warnings = solved.coverage.warnings;
  out.missing_interactions = solved.coverage.missing;
  for (std::string& doubt :
       density->range_warnings(content.component_mol, content.water_kg, recipe.temperature))
    out.warnings.push_back(std::move(doubt));

  std::optional<Uncertainty> u;
  if (auto found = speciation::uncertainty(solved.solver, solved.task, e)) u = *std::move(found);
  if (u) out.u_pH = u->pH;
  list_species(solved, u, density->volume_L(content.component_mol, content.water_kg, recipe.temperature),
               out);
  list_solids(solved, u, out);
  list_gases(solved, out);
  const IonTotals totals = stoichiometric(recipe, solved);
  list_mean_activities(recipe, solved, totals, out);
  out.osmotic_coefficient =
      totals.sum() > 0 ? -e.ln_water_activity / (activity::water_kg_per_mol * totals.sum()) : 1;
  for (std::size_t i = 0; i < content.component_mol.size(); ++i)
    out.totals[system.components()[i]] = content.component_mol[i];
  if (recipe.pH)
    out.pH_held_with = {system.components()[solved.task.pH->counter_ion], e.held_ph_mol / e.water_kg};
  return out;
}

}  // namespace

Result<Solution> solve(const Recipe& recipe) {
  const auto chosen = choose_model(recipe);
  if (!chosen) return chosen.problems();
  return describe(recipe, *chosen);
}

Result<Solution> solve(const Recipe& recipe, const speciation::Equilibria& equilibria) {
  assert(recipe.model);
  auto solved = solve_with(recipe, *recipe.model, &equilibria);
  if (!solved) return solved.problems();
  return describe(recipe, {*std::move(solved), "as asked for"});
}

}  // namespace bathwright::solution
