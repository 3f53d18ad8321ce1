// Mean activity coefficients and osmotic coefficients on the nominal ions (README.md).
#include <cmath>
#include <regex>

#include "mixture.hpp"
#include "report.hpp"

namespace bathwright::reference {
namespace {

struct Judged {
  double value;
  std::string doubt;
};

/// One salt at a molality: ln gamma_mean = (1/nu) sum nu_i ln(a_i / (nu_i m)), phi = -ln a_w / (M_w nu m).
Result<Judged> single_salt(const Recipe& recipe, const Figure& figure, activity::ModelKind model) {
  const auto mixture = mix(recipe, figure.t_C, model);
  if (!mixture) return mixture.problems();
  const auto answer = mixture->solver->solve(mixture->task);
  if (!answer) return answer.problems();
  const double m = recipe.begin()->second;
  std::string why = doubt(*mixture->solver, *answer);
  if (figure.quantity == "osmotic_coefficient") {
    std::smatch nu;
    static const std::regex pattern(R"(nu=(\d))");
    std::regex_search(figure.unit, nu, pattern);
    return Judged{-answer->ln_water_activity / (activity::water_kg_per_mol * std::stod(nu[1]) * m),
                  std::move(why)};
  }
  const auto formula = matter::Formula::parse(recipe.begin()->first);
  if (!formula) return formula.problems();
  const auto& equilibria = speciation::Equilibria::built_in(activity::convention(model));
  const speciation::Composition ions = speciation::nominal_ions(*formula, equilibria);
  if (ions.empty()) return Problem{Fault::out_of_range, "", "the formula has no reading as ions", "", ""};
  double sum = 0, nu = 0;
  for (const auto& [name, count] : ions) {
    sum +=
        count * (answer->ln_activity[*mixture->solver->system().species_index(name)] - std::log(count * m));
    nu += count;
  }
  return Judged{std::exp(sum / nu), std::move(why)};
}

}  // namespace

Computed compute_activity(const Figure& figure, activity::ModelKind model) {
  if (figure.t_C < 0) return {{}, "below 0 degC"};
  const Recipe recipe = read_recipe(figure.conditions, figure.system);
  if (recipe.size() != 1) return {{}, "conditions not read"};
  const auto found = single_salt(recipe, figure, model);
  if (!found) return {{}, text(found.problems())};
  double value = found->value;
  std::smatch other;
  static const std::regex relative(R"(relative to ([0-9.]+) mol/kg)");
  if (std::regex_search(figure.conditions, other, relative)) {
    const auto base = single_salt({{recipe.begin()->first, std::stod(other[1])}}, figure, model);
    if (!base) return {{}, text(base.problems())};
    value /= base->value;
  }
  return {value, found->doubt};
}

}  // namespace bathwright::reference
