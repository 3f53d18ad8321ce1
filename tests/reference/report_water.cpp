// The activity of water: pairs of solutions that share their vapour, saturated salts, salt solutions.
#include <cmath>
#include <regex>

#include "report.hpp"
#include "saturate.hpp"

namespace bathwright::reference {
namespace {

struct Water {
  double ln_activity;
  std::string doubt;
  double u_ln_activity;
};

Result<Water> water_over(const Recipe& recipe, double t_C, activity::ModelKind model) {
  const auto mixture = mix(recipe, t_C, model);
  if (!mixture) return mixture.problems();
  const auto answer = mixture->solver->solve(mixture->task);
  if (!answer) return answer.problems();
  const auto u = standard_uncertainty(*mixture->solver, mixture->task, *answer,
                                      [](const auto& shift) { return shift.ln_water_activity; });
  return Water{answer->ln_water_activity, doubt(*mixture->solver, *answer), u.value_or(0)};
}

/// Vapour pressure of pure water in the same table, kPa.
std::optional<double> pure_water_kPa(double t_C) {
  for (const Figure& figure : read_figures("vapour"))
    if (figure.system == "H2O" && figure.t_C == t_C) return figure.published;
  return std::nullopt;
}

}  // namespace

/// Finds the molality of the second salt that gives the same water activity, by bisection.
Computed compute_isopiestic(const Figure& figure, activity::ModelKind model) {
  static const std::regex second(R"(isopiestic_molality_of_(\w+))");
  std::smatch salt;
  const Recipe recipe = read_recipe(figure.conditions, figure.system);
  if (recipe.size() != 1 || !std::regex_match(figure.quantity, salt, second))
    return {{}, "conditions not read", {}};
  const auto known = water_over(recipe, figure.t_C, model);
  if (!known) return {{}, text(known.problems()), {}};
  double low = 0, high = 1;
  auto found = water_over({{salt[1], high}}, figure.t_C, model);
  while (found && found->ln_activity > known->ln_activity) {
    low = high;
    high *= 1.5;
    found = water_over({{salt[1], high}}, figure.t_C, model);
  }
  constexpr double settled = 1e-6;  // mol/kg
  while (found && high - low > settled) {
    const double middle = (low + high) / 2;
    found = water_over({{salt[1], middle}}, figure.t_C, model);
    if (found) (found->ln_activity > known->ln_activity ? low : high) = middle;
  }
  if (!found) return {{}, text(found.problems()), {}};
  constexpr double step = 1e-3;  // of the molality
  const auto beyond = water_over({{salt[1], high * (1 + step)}}, figure.t_C, model);
  if (!beyond) return {{}, text(beyond.problems()), {}};
  const double slope = (beyond->ln_activity - found->ln_activity) / (high * step);
  return {high,
          known->doubt.empty() ? found->doubt : known->doubt,
          {},
          std::hypot(known->u_ln_activity, found->u_ln_activity) / std::abs(slope)};
}

Computed compute_vapour(const Figure& figure, activity::ModelKind model) {
  if (figure.conditions.starts_with("saturated solution")) {
    const auto found = saturate({figure.system}, {}, figure.t_C, model);
    if (!found) return {{}, text(found.problems()), {}};
    return {found->water_activity, found->doubt, {}, found->u_water_activity};
  }
  const auto pure = pure_water_kPa(figure.t_C);
  const Recipe recipe = read_recipe(figure.conditions, figure.system);
  if (figure.quantity != "vapour_pressure" || recipe.empty() || !pure)
    return {{}, "not computed by the engine", {}};
  const auto found = water_over(recipe, figure.t_C, model);
  if (!found) return {{}, text(found.problems()), {}};
  return {std::exp(found->ln_activity) * *pure, found->doubt, "times the pressure of pure water of the table",
          std::exp(found->ln_activity) * *pure * found->u_ln_activity};
}

}  // namespace bathwright::reference
