#include "mixture.hpp"

#include <algorithm>
#include <regex>
#include <set>

namespace bathwright::reference {
namespace {

constexpr double dilute_kg_water_per_L = 0.997;

/// Names the tables use for substances that have a formula.
std::string formula_of(const std::string& name) {
  static const std::map<std::string, std::string> formulae{
      {"acetic acid", "CH3COOH"}, {"Na acetate", "NaCH3COO"}, {"Na-acetate", "NaCH3COO"},
      {"borax", "Na2B4O7"},       {"boric acid", "H3BO3"},
  };
  const auto found = formulae.find(name);
  return found == formulae.end() ? name : found->second;
}

}  // namespace

Recipe read_recipe(const std::string& conditions, const std::string& system) {
  Recipe recipe;
  static const std::regex part(R"((m|c)\(((?:[^()]|\([^()]*\))*)\)(?: added)?=([0-9.eE+-]+))");
  for (std::sregex_iterator at(conditions.begin(), conditions.end(), part), end; at != end; ++at) {
    const double scale = (*at)[1] == "c" ? 1 / dilute_kg_water_per_L : 1;
    recipe[formula_of((*at)[2])] += scale * std::stod((*at)[3]);
  }
  std::smatch single;
  static const std::regex bare(R"(^(?:c=)?([0-9.]+) mol/L)");
  if (recipe.empty() && std::regex_search(conditions, single, bare))
    recipe[formula_of(system)] = std::stod(single[1]) / dilute_kg_water_per_L;
  return recipe;
}

Result<Mixture> mix(const Recipe& recipe, double t_C, activity::ModelKind model) {
  const auto& equilibria = speciation::Equilibria::built_in(activity::convention(model));
  speciation::Composition total;
  double water_mol = 0;
  for (const auto& [text, mol] : recipe) {
    const auto formula = matter::Formula::parse(text);
    if (!formula) return formula.problems();
    const auto parts = speciation::parts_of(*formula, equilibria);
    if (!parts) return parts.problems();
    for (const auto& [name, count] : parts->basis) total[name] += mol * count;
    water_mol += mol * parts->water;
  }
  std::vector<std::string> names;
  for (const auto& [name, mol] : total)
    if (name != "H^+") names.push_back(name);
  auto system = speciation::ChemicalSystem::make(equilibria, names);
  if (!system) return system.problems();
  auto solver = speciation::Solver::prepare(
      std::make_shared<const speciation::ChemicalSystem>(*std::move(system)), model, {t_C});
  if (!solver) return solver.problems();
  Mixture mixture{std::make_shared<const speciation::Solver>(*std::move(solver)), {}};
  for (const std::string& name : mixture.solver->system().components())
    mixture.task.component_mol.push_back(total[name]);
  mixture.task.water_kg = 1 + water_mol * activity::water_kg_per_mol;
  return mixture;
}

std::string doubt(const speciation::Solver& solver, const speciation::Equilibrium& answer) {
  using Kind = activity::InteractionNote::Kind;
  const auto& species = solver.system().species();
  const double I = answer.ionic_strength;
  if (I > solver.model().trusted_ionic_strength()) return "ionic strength beyond the model's range";
  double charged = 0;
  for (std::size_t j = 0; j < species.size(); ++j)
    if (species[j].charge != 0) charged += answer.molality[j];
  // Below 0.001 mol/kg an interaction moves ln gamma by less than 0.001.
  constexpr double share_that_matters = 0.02, least_molality = 0.001;
  const double matters_from = std::max(share_that_matters * charged, least_molality);
  for (const activity::InteractionNote& note : solver.model().notes()) {
    bool matters = true;
    for (const std::uint32_t j : note.solutes) matters = matters && answer.molality[j] > matters_from;
    if (!matters) continue;
    const bool counter_ions =
        note.solutes.size() == 2 && species[note.solutes[0]].charge * species[note.solutes[1]].charge < 0;
    if (note.kind == Kind::outside_model || (note.kind == Kind::missing && counter_ions)) return note.text;
    if (note.kind == Kind::no_temperature_data && std::abs(solver.temperature().v - 25) > 5) return note.text;
    if (note.kind == Kind::above_range && I > 1.02 * note.limit_molal) return note.text;
  }
  return {};
}

}  // namespace bathwright::reference
