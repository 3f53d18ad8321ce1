// Solubility of single salts and hydrates, gypsum in salt, blue vitriol in acid, two salts at once,
// constants.
#include <algorithm>
#include <cmath>
#include <regex>

#include "mixture.hpp"
#include "report.hpp"

namespace bathwright::reference {
namespace {

using speciation::SolidRule;

struct Saturated {
  double molality;  ///< of the salt dissolved, per kg of liquid water
  std::string doubt;
};

/// Dissolves each solid that gives the salt's ions (hydrates included) to saturation in the background; the
/// least soluble one is the stable one.
Result<Saturated> saturate(const std::string& salt, const Recipe& background, double t_C,
                           activity::ModelKind model) {
  const auto& equilibria = speciation::Equilibria::built_in(activity::convention(model));
  const auto formula = matter::Formula::parse(salt);
  if (!formula) return formula.problems();
  const auto parts = speciation::parts_of(*formula, equilibria);
  if (!parts) return parts.problems();
  Recipe recipe = background;
  recipe[salt] += 0;
  const auto mixture = mix(recipe, t_C, model);
  if (!mixture) return mixture.problems();
  const auto& solver = *mixture->solver;
  std::optional<Saturated> best;
  std::string trouble = "no solid of this composition has a constant at this temperature";
  for (std::size_t k = 0; k < solver.system().solids().size(); ++k) {
    const speciation::SystemSolid& solid = solver.system().solids()[k];
    bool same = solver.covers(k);
    for (std::size_t i = 0; i < solid.made_of.size(); ++i) {
      const auto part = parts->basis.find(solver.system().components()[i]);
      same = same && solid.made_of[i] == (part == parts->basis.end() ? 0 : part->second);
    }
    if (!same) continue;
    speciation::Task task = mixture->task;
    task.solids.assign(solver.system().solids().size(), SolidRule::report_only);
    task.solids[k] = SolidRule::in_excess;
    const auto answer = solver.solve(task);
    if (!answer) {
      trouble = text(answer.problems());
      continue;
    }
    const double molality = -answer->solid_mol[k] / answer->water_kg;
    if (!best || molality < best->molality) best = Saturated{molality, doubt(solver, *answer)};
  }
  if (!best) return Problem{Fault::out_of_range, "", trouble, "", ""};
  return *best;
}

/// log10 Ksp of the least soluble form, hydroxides and oxides written with OH^-.
Computed solubility_product(const Figure& figure, activity::ModelKind model) {
  const auto& equilibria = speciation::Equilibria::built_in(activity::convention(model));
  const double log10_Kw = equilibria.species().at("OH^-").formation.log10_at({figure.t_C});
  std::optional<double> least;
  for (const speciation::SolidData& solid : equilibria.solids()) {
    if (solid.formula != figure.system) continue;
    const auto protons = solid.gives.find("H^+");
    const double hydroxides = protons == solid.gives.end() ? 0 : -protons->second;
    const double log10_Ksp = solid.dissolution.log10_at({figure.t_C}) + hydroxides * log10_Kw;
    if (!least || log10_Ksp < *least) least = log10_Ksp;
  }
  if (!least) return {{}, "no such solid in the tables"};
  return {least, {}};
}

double molar_mass(const std::string& formula) {
  const auto parsed = matter::Formula::parse(formula);
  return parsed ? parsed->molar_mass().v : std::nan("");
}

std::string before(const std::string& text, std::string_view end) { return text.substr(0, text.find(end)); }

}  // namespace

Computed compute_solubility(const Figure& figure, activity::ModelKind model) {
  if (figure.quantity == "log10_Ksp") return solubility_product(figure, model);
  Recipe background;
  std::string salt = before(figure.system, " in ");
  if (salt == "gypsum") salt = "CaSO4.2H2O";
  std::smatch acid;
  static const std::regex molal_acid(R"(([0-9.]+) mol H2SO4 per kg water)");
  if (std::regex_search(figure.conditions, acid, molal_acid))
    background["H2SO4"] = std::stod(acid[1]);
  else if (figure.conditions.starts_with("m("))
    background = read_recipe(figure.conditions, figure.system);
  else if (!figure.conditions.starts_with("pure water"))
    return {{}, "conditions not read"};
  const auto found = saturate(salt, background, figure.t_C, model);
  if (!found) return {{}, text(found.problems())};
  const double m = found->molality;
  if (figure.unit == "mol/kg water" || figure.unit == "mol/kg") return {m, found->doubt};
  if (figure.unit == "g per 100 g water") return {m * molar_mass(salt) / 10, found->doubt};
  if (figure.quantity == "CuSO4_mass_percent_of_saturated_solution") {
    const double copper = m * molar_mass("CuSO4"), acid_g = background["H2SO4"] * molar_mass("H2SO4");
    return {100 * copper / (1000 + copper + acid_g), found->doubt};
  }
  return {{}, "the unit needs a density"};
}

}  // namespace bathwright::reference
