#include "contents.hpp"

#include <bathwright/matter/component_density.hpp>

#include <algorithm>
#include <cmath>

namespace bathwright::solution {
namespace {

constexpr double water_kg_per_mol = activity::water_kg_per_mol;

speciation::Composition components_of(const std::vector<Substance>& substances) {
  speciation::Composition total;
  for (const Substance& substance : substances)
    for (const auto& [component, count] : substance.parts.basis) total[component] += count * substance.mol;
  return total;
}

double water_brought_kg(const std::vector<Substance>& substances) {
  double kg = 0;
  for (const Substance& substance : substances)
    kg += substance.mol * substance.parts.water * water_kg_per_mol;
  return kg;
}

Result<double> water_of_a_litre(const Recipe& recipe, const speciation::Composition& component_mol) {
  std::vector<std::string> names;
  std::vector<double> mol;
  for (const auto& [name, amount] : component_mol) names.push_back(name), mol.push_back(amount);
  const auto model = matter::ComponentDensity::prepare(names);
  if (!model) return model.problems();
  constexpr int most_steps = 200;
  constexpr double settled_L = 1e-14;
  double water_kg = 1;
  for (int step = 0; step < most_steps; ++step) {
    // A litre more of water makes nearly a litre more of solution, so the shortfall is the correction.
    const double shortfall_L = 1 - model->volume_L(mol, water_kg, recipe.temperature);
    water_kg += shortfall_L;
    if (!(water_kg > 0))
      return Problem{Fault::bad_input, recipe.file,
                     "the amounts leave no room for water in a litre of solution", "",
                     "Decimal point? Unit?"};
    if (std::abs(shortfall_L) < settled_L) break;
  }
  return water_kg;
}

}  // namespace

Result<std::vector<Substance>> read_ingredients(const Recipe& recipe,
                                                const speciation::Equilibria& equilibria) {
  std::vector<Substance> substances;
  Problems problems;
  const auto collect = [&](const Problems& more, const std::string& where) {
    for (Problem problem : more) {
      if (!problem.where.starts_with(where)) problem.where = where + ": " + problem.where;
      problems.push_back(std::move(problem));
    }
  };
  for (const Ingredient& ingredient : recipe.ingredients) {
    auto formula = matter::Formula::parse(ingredient.formula, ingredient.where);
    if (!formula) {
      collect(formula.problems(), ingredient.where);
      continue;
    }
    if (formula->charge() != 0) {
      problems.push_back({Fault::bad_input, ingredient.where, ingredient.formula + " carries a charge",
                          "a neutral formula", "Name the salt, acid or base that brings the ion."});
      continue;
    }
    auto parts = speciation::parts_of(*formula, equilibria);
    if (!parts) {
      collect(parts.problems(), ingredient.where);
      continue;
    }
    auto ions = speciation::nominal_ions(*formula, equilibria);
    substances.push_back({*std::move(formula), *std::move(parts), std::move(ions), ingredient.mol});
  }
  if (!problems.empty()) return problems;
  return substances;
}

Result<Contents> weigh_in(const Recipe& recipe, const std::vector<Substance>& substances) {
  Contents contents{components_of(substances), 1 + water_brought_kg(substances)};
  if (!recipe.per_litre) return contents;
  const auto water_kg = water_of_a_litre(recipe, contents.component_mol);
  if (!water_kg) return water_kg.problems();
  contents.water_kg = *water_kg;
  return contents;
}

}  // namespace bathwright::solution
