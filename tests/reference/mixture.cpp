#include "mixture.hpp"

#include <bathwright/speciation/coverage.hpp>
#include <cmath>
#include <regex>

namespace bathwright::reference {
namespace {

constexpr double dilute_kg_water_per_L = 0.997;

/// Names the tables use for substances that have a formula.
std::string formula_of(const std::string& name) {
  static const std::map<std::string, std::string> formulae{
      {"acetic acid", "CH3COOH"}, {"Na acetate", "NaCH3COO"}, {"Na-acetate", "NaCH3COO"},
      {"borax", "Na2B4O7"},       {"boric acid", "H3BO3"},    {"KH phthalate buffer", "KHC8H4O4"},
  };
  const auto found = formulae.find(name);
  return found == formulae.end() ? name : found->second;
}

}  // namespace

double molar_mass(const std::string& formula) {
  const auto parsed = matter::Formula::parse(formula);
  return parsed ? parsed->molar_mass().v : std::nan("");
}

Recipe read_recipe(const std::string& conditions, const std::string& system) {
  Recipe recipe;
  static const std::regex part(R"((m|c)\(((?:[^()]|\([^()]*\))*)\)(?: added)?=(trace|[0-9.eE+-]+))");
  for (std::sregex_iterator at(conditions.begin(), conditions.end(), part), end; at != end; ++at) {
    const double scale = (*at)[1] == "c" ? 1 / dilute_kg_water_per_L : 1;
    recipe[formula_of((*at)[2])] += (*at)[3] == "trace" ? trace_molal : scale * std::stod((*at)[3]);
  }
  if (!recipe.empty()) return recipe;

  std::smatch single;
  static const std::regex molar(R"(^(?:c=)?([0-9.]+) mol/L)");
  static const std::regex mass(R"(^([0-9.]+) (mass %|g)(?: ([A-Z][A-Za-z0-9().]*))?( per L)?(?: \(.*)?$)");
  if (std::regex_search(conditions, single, molar)) {
    recipe[formula_of(system)] = std::stod(single[1]) / dilute_kg_water_per_L;
  } else if (std::regex_search(conditions, single, mass)) {
    const std::string formula = single[3].matched ? single[3].str() : formula_of(system);
    const double amount = std::stod(single[1]);
    if (single[2] == "mass %")
      recipe[formula] = 1000 * amount / (100 - amount) / molar_mass(formula);
    else if (single[4].matched)
      recipe[formula] = amount / molar_mass(formula) / dilute_kg_water_per_L;
  }
  return recipe;
}

Result<Mixture> mix(const Recipe& recipe, double t_C, activity::ModelKind model) {
  const activity::Convention convention = activity::convention(model);
  speciation::Composition total;
  double water_mol = 0;
  for (const auto& [text, mol] : recipe) {
    const auto formula = matter::Formula::parse(text);
    if (!formula) return formula.problems();
    const auto parts = speciation::parts_of(*formula, speciation::Equilibria::built_in(convention));
    if (!parts) return parts.problems();
    for (const auto& [name, count] : parts->basis) total[name] += mol * count;
    water_mol += mol * parts->water;
  }
  std::vector<std::string> names;
  for (const auto& [name, mol] : total)
    if (name != "H^+") names.push_back(name);
  const activity::ParameterSets sets = activity::parameter_sets_for(total);
  auto system =
      speciation::ChemicalSystem::make(speciation::Equilibria::built_in(convention, sets.zinc), names);
  if (!system) return system.problems();
  auto solver = speciation::Solver::prepare(
      std::make_shared<const speciation::ChemicalSystem>(*std::move(system)), model, {t_C}, sets.acid);
  if (!solver) return solver.problems();
  Mixture mixture{std::make_shared<const speciation::Solver>(*std::move(solver)), {}};
  for (const std::string& name : mixture.solver->system().components())
    mixture.task.component_mol.push_back(total[name]);
  mixture.task.water_kg = 1 + water_mol * activity::water_kg_per_mol;
  return mixture;
}

speciation::Composition nominal_totals(const Recipe& recipe, activity::ModelKind model) {
  const auto& equilibria = speciation::Equilibria::built_in(activity::convention(model));
  speciation::Composition totals;
  for (const auto& [text, mol] : recipe) {
    const auto formula = matter::Formula::parse(text);
    if (!formula) continue;
    const speciation::Composition ions = speciation::nominal_ions(*formula, equilibria);
    if (ions.empty()) totals[text] += mol;
    for (const auto& [ion, count] : ions) totals[ion] += mol * count;
  }
  return totals;
}

std::string doubt(const speciation::Solver& solver, const speciation::Equilibrium& answer) {
  const speciation::Coverage found = speciation::coverage(solver, answer);
  if (found.valid) return {};
  std::string text;
  for (const auto* notes : {&found.warnings, &found.missing})
    for (const std::string& note : *notes) text += (text.empty() ? "" : "; ") + note;
  return text;
}

std::optional<double> standard_uncertainty(const speciation::Solver& solver, const speciation::Task& task,
                                           const speciation::Equilibrium& answer,
                                           const std::function<double(const speciation::Shift&)>& of) {
  const auto shifts = speciation::independent_shifts(solver, task, answer);
  if (!shifts) return std::nullopt;
  double sum = 0;
  for (const speciation::Shift& shift : *shifts) sum += of(shift) * of(shift);
  return std::sqrt(sum);
}

}  // namespace bathwright::reference
