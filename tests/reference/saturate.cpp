#include "saturate.hpp"

#include <bathwright/matter/density.hpp>
#include <cmath>

namespace bathwright::reference {
namespace {

using speciation::SolidRule;

/// The content in mol per kg of water of a solution of which `litres` hold a kg of water.
double molality(const Content& content, double litres) {
  const double M = molar_mass(content.formula);
  switch (content.unit) {
    case Content::Unit::mol_per_kg_water:
      return content.value;
    case Content::Unit::mol_per_L:
      return content.value * litres;
    case Content::Unit::g_per_L:
      return content.value / M * litres;
    case Content::Unit::mass_percent_of_solvent:
      return 1000 * content.value / (100 - content.value) / M;
  }
  return 0;
}

/// Solids by salt: position in the system that the salts and the background make up.
using Phases = std::vector<std::pair<std::string, std::size_t>>;

/// At the background that is there: what follows from a change of volume is left out.
void state_uncertainty(Saturated& found, const Phases& phases, const Mixture& mixture,
                       const speciation::Task& task, const speciation::Equilibrium& answer) {
  const auto& [salt, solid] = phases.front();
  const double content = found.contents.at(salt);
  const auto u = [&](const auto& of) {
    return standard_uncertainty(*mixture.solver, task, answer, of).value_or(0);
  };
  found.u_contents = u([&](const speciation::Shift& shift) {
    return -shift.solid_mol[solid] / answer.water_kg - content * shift.ln_water_kg;
  });
  found.u_water_activity =
      u([&](const speciation::Shift& shift) { return found.water_activity * shift.ln_water_activity; });
}

Result<Saturated> saturate_with(const Phases& phases, const std::vector<Content>& background, double t_C,
                                activity::ModelKind model) {
  double litres = 1, water_kg = 1;  // of the saturated solution; per kg of the water it was made from
  constexpr int most_steps = 60;
  constexpr double settled = 1e-9;
  for (int step = 0; step < most_steps; ++step) {
    Recipe start;
    for (const Content& content : background) start[content.formula] += molality(content, litres) * water_kg;
    for (const auto& [salt, solid] : phases) start[salt] += 0;
    const auto mixture = mix(start, t_C, model);
    if (!mixture) return mixture.problems();
    speciation::Task task = mixture->task;
    task.solids.assign(mixture->solver->system().solids().size(), SolidRule::report_only);
    for (const auto& [salt, solid] : phases) task.solids[solid] = SolidRule::in_excess;
    const auto answer = mixture->solver->solve(task);
    if (!answer) return answer.problems();
    Saturated found;
    for (const auto& [formula, mol] : start) found.contents[formula] = mol / answer->water_kg;
    for (const auto& [salt, solid] : phases)
      found.contents[salt] -= answer->solid_mol[solid] / answer->water_kg;
    found.volume_L = volume_L(found.contents, t_C, model);
    found.water_activity = std::exp(answer->ln_water_activity);
    const double change = std::abs(found.volume_L - litres) + std::abs(answer->water_kg - water_kg);
    if (background.empty() || change < settled) {
      found.doubt = doubt(*mixture->solver, *answer);
      state_uncertainty(found, phases, *mixture, task, *answer);
      return found;
    }
    litres = found.volume_L;
    water_kg = answer->water_kg;
  }
  return Problem{Fault::not_converged, "", "the contents of the saturated solution do not settle", "", ""};
}

/// Every solid with the atoms of the salt, water apart, that has a constant at this temperature.
Result<std::vector<std::size_t>> phases_of(const std::string& salt, const speciation::Solver& solver,
                                           activity::ModelKind model) {
  const auto formula = matter::Formula::parse(salt);
  if (!formula) return formula.problems();
  const auto parts =
      speciation::parts_of(*formula, speciation::Equilibria::built_in(activity::convention(model)));
  if (!parts) return parts.problems();
  std::vector<std::size_t> found;
  const speciation::ChemicalSystem& system = solver.system();
  for (std::size_t k = 0; k < system.solids().size(); ++k) {
    bool same = solver.covers(k);
    for (std::size_t i = 0; i < system.components().size(); ++i) {
      const auto part = parts->basis.find(system.components()[i]);
      same = same && system.solids()[k].made_of[i] == (part == parts->basis.end() ? 0 : part->second);
    }
    if (same) found.push_back(k);
  }
  if (found.empty())
    return Problem{Fault::out_of_range, "", "no solid of this composition has a constant at this temperature",
                   "", ""};
  return found;
}

}  // namespace

double volume_L(const Recipe& contents, double t_C, activity::ModelKind model) {
  std::vector<std::string> species;
  std::vector<double> mol;
  for (const auto& [name, molality] : nominal_totals(contents, model)) {
    species.push_back(name);
    mol.push_back(molality);
  }
  const auto density = matter::SolutionDensity::for_species(species);
  return density ? density->volume_L(mol, 1, {t_C}) : std::nan("");
}

Result<Saturated> saturate(const std::vector<std::string>& salts, const std::vector<Content>& background,
                           double t_C, activity::ModelKind model) {
  Recipe contents;
  for (const Content& content : background) contents[content.formula] += 1;
  for (const std::string& salt : salts) contents[salt] += 0;
  const auto mixture = mix(contents, t_C, model);
  if (!mixture) return mixture.problems();
  Phases stable;
  for (const std::string& salt : salts) {
    const auto phases = phases_of(salt, *mixture->solver, model);
    if (!phases) return phases.problems();
    std::optional<std::pair<double, std::size_t>> least;
    Problems trouble;
    for (const std::size_t phase : *phases) {
      Phases all = stable;
      all.emplace_back(salt, phase);
      const auto found = saturate_with(all, background, t_C, model);
      if (!found) {
        trouble = found.problems();
        continue;
      }
      const std::pair candidate{found->contents.at(salt), phase};
      if (!least || candidate < *least) least = candidate;
    }
    if (!least) return trouble;
    stable.emplace_back(salt, least->second);
  }
  return saturate_with(stable, background, t_C, model);
}

}  // namespace bathwright::reference
