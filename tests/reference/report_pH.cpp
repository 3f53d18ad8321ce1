// pH of buffers, acids, bases and salts, and the dissociation of HSO4^-.
#include <bathwright/activity/debye_huckel_slope.hpp>
#include <cmath>
#include <cstdio>
#include <numbers>

#include "mixture.hpp"
#include "report.hpp"

namespace bathwright::reference {
namespace {

constexpr double trace_of_chloride_molal = 1e-6;  // shows gamma_Cl and moves nothing

/// The pH as standards define it, from a solution with a trace of chloride. The activity of one ion is no
/// measurable quantity; -log10(a_H gamma_Cl) is, and the convention says what gamma_Cl is:
///   pH = -log10(a_H gamma_Cl) + log10 gamma_Cl(convention),
///   log10 gamma_Cl(convention) = -A sqrt(I) / (1 + 1.5 sqrt(I)),  I <= 0.1 mol/kg
/// Source: Buck, R. P. et al., Pure Appl. Chem. 74 (2002) 2169 (the convention of Bates & Guggenheim, 1960).
double conventional_pH(const Mixture& mixture, const speciation::Equilibrium& answer) {
  const double root = std::sqrt(answer.ionic_strength);
  const double A = 3 * activity::osmotic_slope(mixture.solver->temperature()) / std::numbers::ln10;
  const double ln_gamma_Cl = answer.ln_gamma[*mixture.solver->system().species_index("Cl^-")];
  return answer.pH() - ln_gamma_Cl / std::numbers::ln10 - A * root / (1 + 1.5 * root);
}

}  // namespace

Computed compute_pH(const Figure& figure, activity::ModelKind model) {
  Recipe recipe = read_recipe(figure.conditions, figure.system);
  const bool saturated_lime = figure.system == "Ca(OH)2" && figure.conditions == "saturated";
  if (saturated_lime) recipe["Ca(OH)2"] = 0;
  if (recipe.empty()) return {{}, "conditions not read", {}};
  const double acid = recipe.begin()->second;
  if (figure.quantity == "pH") recipe["NaCl"] += trace_of_chloride_molal;
  auto mixture = mix(recipe, figure.t_C, model);
  if (!mixture) return {{}, text(mixture.problems()), {}};
  speciation::Task task = mixture->task;
  const speciation::ChemicalSystem& system = mixture->solver->system();
  if (saturated_lime) {
    task.solids.assign(system.solids().size(), speciation::SolidRule::report_only);
    task.solids[*system.solid("Ca(OH)2")] = speciation::SolidRule::in_excess;
  }
  const auto answer = mixture->solver->solve(task);
  if (!answer) return {{}, text(answer.problems()), {}};
  std::string why = doubt(*mixture->solver, *answer);
  if (figure.quantity != "pH") {
    const std::size_t sulfate = *system.species_index("SO4^2-");
    const double degree = answer->molality[sulfate] / acid;
    const auto u = standard_uncertainty(*mixture->solver, task, *answer, [&](const auto& shift) {
      return degree * (shift.ln_molality[sulfate] + shift.ln_water_kg);
    });
    return {degree, std::move(why), {}, u};
  }
  const auto u =
      standard_uncertainty(*mixture->solver, task, *answer, [](const auto& shift) { return shift.pH(); });
  if (answer->ionic_strength > dilute_molal) return {answer->pH(), std::move(why), "unscaled", u};
  char note[32];
  std::snprintf(note, sizeof note, "unscaled pH %.3f", answer->pH());
  return {conventional_pH(*mixture, *answer), std::move(why), note, u};
}

}  // namespace bathwright::reference
