#include <bathwright/matter/formula.hpp>
#include <bathwright/shopfiles/solution_file.hpp>
#include <cmath>

#include "promises.hpp"

using namespace bathwright;

fuzz::BrokenPromise fuzz::solution_file(std::string_view input) {
  const auto solution = shopfiles::read_solution_text("file.toml", input);
  if (!solution) return in_words(solution.problems(), "file.toml", input);
  if (!std::isfinite(solution->temperature.v)) return "a temperature that is not one";
  if (solution->pH.has_value() == solution->counter_ion.empty())
    return "pH without its counter-ion, or the reverse";
  for (const solution::Ingredient& ingredient : solution->ingredients) {
    if (!(ingredient.mol >= 0) || !std::isfinite(ingredient.mol)) return "an amount that is not one";
    if (!matter::Formula::parse(ingredient.formula))
      return "an ingredient no formula reads: " + ingredient.formula;
  }
  for (const auto& [gas, atm] : solution->gases_atm) {
    if (!(atm >= 0 && atm <= 100)) return "a pressure that cannot be: " + gas;
  }
  return {};
}
