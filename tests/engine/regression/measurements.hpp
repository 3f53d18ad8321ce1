// Tasks for the tests of the fit, with measurements made by the engine itself.
#pragma once

#include <bathwright/regression/fit.hpp>
#include <bathwright/solution/solution.hpp>
#include <catch2/catch.hpp>

namespace bathwright::regression {

inline const speciation::Equilibria& built_in(
    activity::Convention convention = activity::Convention::interaction) {
  return speciation::Equilibria::built_in(convention);
}

inline activity::Interaction interaction(activity::InteractionParameter parameter,
                                         std::vector<std::string> solutes, double value = 0) {
  return {parameter, std::move(solutes), value, "made up", "test"};
}

inline Unknown unknown(const activity::Interaction& what) {
  Unknown found;
  found.what.emplace<activity::Interaction>(what);
  found.where = "test";
  return found;
}

inline speciation::Equilibria stating(const std::vector<activity::Interaction>& all,
                                      activity::Convention convention = activity::Convention::interaction) {
  const auto with = built_in(convention).with_interactions(all);
  INFO((with ? std::string{} : text(with.problems())));
  REQUIRE(with);
  return *with;
}

/// A solution of salts, mol per kg of water, at 25 degC.
inline Measurement measured(Quantity quantity, const std::vector<std::pair<std::string, double>>& salts,
                            double uncertainty, const std::string& of = {}) {
  Measurement m;
  m.quantity = quantity;
  m.of = of;
  for (const auto& [formula, mol] : salts) m.recipe.ingredients.push_back({formula, mol, "test"});
  m.recipe.may_form = solution::MayForm::none;
  m.uncertainty = uncertainty;
  m.where = "test:1";
  m.label = "made up";
  return m;
}

/// Its value as the engine computes it with these equilibria.
inline void make(Measurement& m, const speciation::Equilibria& equilibria, activity::ModelKind model) {
  solution::Recipe recipe = m.recipe;
  recipe.model = model;
  const auto solved = solution::solve(recipe, equilibria);
  INFO((solved ? std::string{} : text(solved.problems())));
  REQUIRE(solved);
  switch (m.quantity) {
    case Quantity::osmotic_coefficient:
      m.value = solved->osmotic_coefficient;
      return;
    case Quantity::water_activity:
      m.value = solved->water_activity;
      return;
    case Quantity::pH:
      m.value = solved->pH;
      return;
    case Quantity::mean_activity_coefficient:
      m.value = solved->mean_activity.at(m.of);
      return;
    case Quantity::solubility:
      for (const auto& solid : solved->solids)
        if (solid.name == m.of) m.value = solid.dissolved_mol;
      return;
    case Quantity::molality:
    case Quantity::partial_pressure:
      FAIL("not made here");
  }
}

}  // namespace bathwright::regression
