// Solubility of single salts and hydrates, gypsum in salt, blue vitriol in acid, two salts at once,
// constants.
#include <map>
#include <regex>
#include <tuple>

#include "report.hpp"
#include "saturate.hpp"

namespace bathwright::reference {
namespace {

/// The formula without its crystal water: "CaSO4.2H2O" -> CaSO4.
std::string without_crystal_water(const std::string& formula) { return formula.substr(0, formula.find('.')); }

/// log10 Ksp of the least soluble form that does form in a day, hydroxides and oxides written with OH^-. A
/// handbook that names no crystal water means the precipitate, whatever it holds; an anhydrous form that is
/// slow does not stand for it.
Computed solubility_product(const Figure& figure, activity::ModelKind model) {
  const auto& equilibria = speciation::Equilibria::built_in(activity::convention(model));
  const double log10_Kw = equilibria.species().at("OH^-").formation.log10_at({figure.t_C});
  std::optional<std::tuple<bool, double, double>> best;  // slow forms only where there is no other
  for (const speciation::SolidData& solid : equilibria.solids()) {
    if (solid.formula != figure.system && without_crystal_water(solid.formula) != figure.system) continue;
    const auto protons = solid.gives.find("H^+");
    const double hydroxides = protons == solid.gives.end() ? 0 : -protons->second;
    const std::tuple candidate{solid.slow, solid.dissolution.log10_at({figure.t_C}) + hydroxides * log10_Kw,
                               solid.dissolution.uncertainty_at({figure.t_C})};
    if (!best || candidate < *best) best = candidate;
  }
  if (!best) return {{}, "no such solid in the tables", {}};
  return {std::get<1>(*best), {}, {}, std::get<2>(*best)};
}

/// "CuSO4.5H2O in H2SO4" -> CuSO4: the salt without its crystal water; minerals by their formula.
std::string salt_of(const std::string& system) {
  static const std::map<std::string, std::string> minerals{{"gypsum", "CaSO4"}, {"gibbsite", "Al(OH)3"}};
  const std::string name = system.substr(0, system.find(" in "));
  const auto mineral = minerals.find(name);
  return mineral == minerals.end() ? without_crystal_water(name) : mineral->second;
}

/// Nothing where the conditions are not read.
std::optional<std::vector<Content>> read_background(const std::string& conditions) {
  if (conditions.starts_with("pure water") || conditions == "doubly saturated") return std::vector<Content>{};
  std::smatch at;
  static const std::regex molal(R"(([0-9.]+) mol (\w+) per kg water)"),
      molality(R"(^m\((\w+)\)=([0-9.]+) mol/kg)"), other(R"(^(\w+) ([0-9.]+) (mol/L|g/L|mass %))");
  using Unit = Content::Unit;
  if (std::regex_search(conditions, at, molal))
    return std::vector<Content>{{at[2], std::stod(at[1]), Unit::mol_per_kg_water}};
  if (std::regex_search(conditions, at, molality))
    return std::vector<Content>{{at[1], std::stod(at[2]), Unit::mol_per_kg_water}};
  if (std::regex_search(conditions, at, other)) {
    const Unit unit = at[3] == "mol/L" ? Unit::mol_per_L
                      : at[3] == "g/L" ? Unit::g_per_L
                                       : Unit::mass_percent_of_solvent;
    return std::vector<Content>{{at[1], std::stod(at[2]), unit}};
  }
  return std::nullopt;
}

double mass_percent(const std::string& formula, const Saturated& found) {
  double solutes_g = 0;
  for (const auto& [name, molality] : found.contents) solutes_g += molality * molar_mass(name);
  return 100 * found.contents.at(formula) * molar_mass(formula) / (1000 + solutes_g);
}

/// The solubility in the unit of the row.
std::optional<double> in_unit(const Figure& figure, const std::string& salt, const Saturated& found) {
  const double m = found.contents.at(salt), mol_per_L = m / found.volume_L;
  if (figure.unit.starts_with("mol/kg")) return m;
  if (figure.unit == "g per 100 g water") return m * molar_mass(salt) / 10;
  if (figure.unit == "mass %") return mass_percent(salt, found);
  if (figure.unit == "mol/L") return mol_per_L;
  if (figure.unit == "mmol/L") return 1e3 * mol_per_L;
  if (figure.unit == "g/L Al2O3") return mol_per_L / 2 * molar_mass("Al2O3");
  if (figure.unit == "g/L") return mol_per_L * molar_mass(salt);
  if (figure.unit == "mg/L") return 1e3 * mol_per_L * molar_mass(salt);
  return std::nullopt;
}

}  // namespace

Computed compute_solubility(const Figure& figure, activity::ModelKind model) {
  if (figure.quantity == "log10_Ksp") return solubility_product(figure, model);
  const auto background = read_background(figure.conditions);
  if (!background) return {{}, "conditions not read", {}};
  std::vector<std::string> salts{salt_of(figure.system)};
  if (figure.conditions == "doubly saturated") {  // "NaCl + KCl (both solids)", "KCl_mass_percent"
    static const std::regex pair(R"(^(\S+) \+ (\S+) )");
    std::smatch at;
    if (!std::regex_search(figure.system, at, pair)) return {{}, "conditions not read", {}};
    salts = {at[1], at[2]};
    if (!figure.quantity.starts_with(salts.front())) std::swap(salts.front(), salts.back());
  }
  const auto found = saturate(salts, *background, figure.t_C, model);
  if (!found) return {{}, text(found.problems()), {}};
  const auto value = in_unit(figure, salts.front(), *found);
  if (!value) return {{}, "unit not read", {}};
  Saturated more = *found;
  more.contents[salts.front()] += found->u_contents;
  more.volume_L = volume_L(more.contents, figure.t_C, model);
  return {value, found->doubt, {}, std::abs(*in_unit(figure, salts.front(), more) - *value)};
}

}  // namespace bathwright::reference
