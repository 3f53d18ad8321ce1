// Mean activity coefficients and osmotic coefficients on the nominal ions (README.md).
#include <cmath>
#include <regex>

#include "mixture.hpp"
#include "report.hpp"

namespace bathwright::reference {
namespace {

/// With m_i the molalities of the nominal ions of all salts:
///   phi = -ln a_w / (M_w sum m_i);  ln gamma_mean(salt) = (1/nu) sum nu_i ln(a_i / m_i)
Computed of_solution(const Figure& figure, const Recipe& recipe, const std::string& salt,
                     activity::ModelKind model) {
  const auto mixture = mix(recipe, figure.t_C, model);
  if (!mixture) return {{}, text(mixture.problems()), {}};
  const auto answer = mixture->solver->solve(mixture->task);
  if (!answer) return {{}, text(answer.problems()), {}};
  const speciation::Composition totals = nominal_totals(recipe, model);
  std::string why = doubt(*mixture->solver, *answer);
  if (figure.quantity == "osmotic_coefficient") {
    double sum = 0;
    std::smatch nu;
    static const std::regex stated(R"(nu=(\d))");
    if (std::regex_search(figure.unit, nu, stated))
      sum = std::stod(nu[1]) * recipe.begin()->second;
    else
      for (const auto& [ion, molality] : totals) sum += molality;
    const double per_ln = 1 / (activity::water_kg_per_mol * sum);
    const auto u = standard_uncertainty(*mixture->solver, mixture->task, *answer,
                                        [&](const auto& shift) { return shift.ln_water_activity * per_ln; });
    return {-answer->ln_water_activity * per_ln, std::move(why), {}, u};
  }
  double sum = 0, nu = 0;
  std::vector<std::pair<std::size_t, double>> ions;
  for (const auto& [ion, count] : nominal_totals({{salt, 1}}, model)) {
    const auto j = mixture->solver->system().species_index(ion);
    if (!j) return {{}, "the formula has no reading as ions", {}};
    sum += count * (answer->ln_activity[*j] - std::log(totals.at(ion)));
    nu += count;
    ions.emplace_back(*j, count);
  }
  const double mean = std::exp(sum / nu);
  const auto u = standard_uncertainty(*mixture->solver, mixture->task, *answer, [&](const auto& shift) {
    double moved = 0;
    for (const auto& [j, count] : ions) moved += count * shift.ln_activity[j];
    return mean * moved / nu;
  });
  return {mean, std::move(why), {}, u};
}

}  // namespace

Computed compute_activity(const Figure& figure, activity::ModelKind model) {
  if (figure.t_C < 0) return {{}, "below 0 degC", {}};
  const Recipe recipe = read_recipe(figure.conditions, figure.system);
  if (recipe.empty()) return {{}, "conditions not read", {}};
  const std::string salt = figure.quantity.ends_with("_HCl") ? "HCl" : recipe.begin()->first;
  Computed found = of_solution(figure, recipe, salt, model);
  std::smatch other;
  static const std::regex relative(R"(relative to ([0-9.]+) mol/kg)");
  if (found.value && std::regex_search(figure.conditions, other, relative)) {
    const Computed base = of_solution(figure, {{salt, std::stod(other[1])}}, salt, model);
    if (!base.value) return base;
    // The uncertainty of both is that of one set of constants; what of it is in common is not taken out.
    if (found.u)
      found.u = std::hypot(*found.u, base.u.value_or(0) * *found.value / *base.value) / *base.value;
    *found.value /= *base.value;
  }
  return found;
}

}  // namespace bathwright::reference
