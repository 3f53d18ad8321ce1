#include "dissolving.hpp"

#include <algorithm>
#include <bathwright/matter/reactive_kind.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

#include "heat.hpp"

namespace bathwright::dosing {
namespace {

constexpr double share_of_solubility = 0.8;
constexpr double least_L_per_kg = 2;
constexpr double slurry_L_per_kg = 5;
constexpr double most_warming_apart_C = 40;
constexpr double strong_heat_kJ_per_kg = 400;
constexpr double trim_dilution = 10;
constexpr double sparing_kg_per_kg = 0.01;  // less than this in a kg of water is a slurry
constexpr double freely_kg_per_kg = 1;      // nobody needs to know more

/// What dissolves of a product in a kg of water, with or without the bath around it.
struct Solubility {
  double kg_per_kg = freely_kg_per_kg;
  bool known = false;  ///< a solid of the tables limits it, or could
};

Solubility solubility(const speciation::Solver& solver, const bath::Brings& brings,
                      const bath::TankState* in) {
  const auto& solids = solver.system().solids();
  Solubility found;
  enum class Answer : std::uint8_t { clear, saturated, unknown };
  const auto try_kg = [&](double kg) {
    speciation::Task task;
    task.component_mol.assign(brings.component_mol.size(), 0);
    task.water_kg = 1 + kg * brings.water_kg;
    for (std::size_t i = 0; i < task.component_mol.size(); ++i)
      task.component_mol[i] = kg * brings.component_mol[i] + (in ? in->component_mol[i] / in->water_kg : 0.0);
    const auto answer = solver.solve(task);
    if (!answer) return Answer::unknown;
    for (std::size_t k = 0; k < solids.size(); ++k) {
      if (!std::isfinite(answer->saturation_index[k]) || !solver.covers(k) || solids[k].slow) continue;
      found.known = true;
      if (answer->saturation_index[k] > 0) return Answer::saturated;
    }
    return Answer::clear;
  };
  constexpr double least = 1e-4;
  if (try_kg(least) == Answer::saturated) {
    found.kg_per_kg = 0;
    return found;
  }
  double low = least, high = freely_kg_per_kg;
  if (try_kg(high) == Answer::clear) return found;
  for (int halving = 0; halving < 12; ++halving) {
    const double middle = std::sqrt(low * high);
    (try_kg(middle) == Answer::clear ? low : high) = middle;
  }
  found.kg_per_kg = low;
  return found;
}

std::string degrees(double t) { return units::significant(t, 3) + " degC"; }

DissolvingNeed of_liquid(const bath::AdditionRule* rule, const matter::StockChemical& stock, Role role) {
  DissolvingNeed need;
  const bool stated = rule && rule->thin_to_parts > 0;
  if (!stated && role != Role::pH_trim) return need;
  const double parts = stated ? rule->thin_to_parts : trim_dilution;
  need.apart = true;
  need.water_L_per_kg = need.bath_L_per_kg = parts / stock.kg_per_L;
  need.from = "one part to " + std::to_string(std::lround(parts)) +
              (stated ? ", as the bath type says" : " for a trim of the pH");
  return need;
}

}  // namespace

DissolvingNeed dissolving_need(const bath::Chemistry& chemistry, const bath::TankState& state,
                               const matter::StockChemical& stock, const bath::Brings& brings,
                               const bath::AdditionRule* rule, Role role) {
  if (role == Role::water) return {};
  if (stock.liquid) return of_liquid(rule, stock, role);
  DissolvingNeed need;
  need.apart = true;
  const double heat = heat_kJ_per_kg(stock);
  const bool heats = heat > strong_heat_kJ_per_kg;
  const double for_heat = std::max(0.0, heat / (water_kJ_per_kg_C * most_warming_apart_C));
  const speciation::Solver* solver = &chemistry.working();
  std::optional<Result<speciation::Solver>> cold;
  if (heats && chemistry.working_temperature().v > need.at_C) {
    cold = solver->at_temperature(units::Celsius{need.at_C});
    if (*cold) solver = &**cold;
  }
  need.at_C = solver->temperature().v;
  const Solubility in_water = solubility(*solver, brings, nullptr),
                   in_bath = solubility(*solver, brings, &state);
  const auto litres = [&](const Solubility& s) {
    return std::max({1 / (share_of_solubility * std::max(s.kg_per_kg, 1e-9)), for_heat, least_L_per_kg});
  };
  // What water does not dissolve and the bath only slowly, an oxide or a cyanide of its metal, is stirred up
  // in it.
  need.slurry = in_water.kg_per_kg < sparing_kg_per_kg && litres(in_bath) > slurry_L_per_kg;
  if (need.slurry) {
    need.bath_L_per_kg = slurry_L_per_kg;
    need.from = "stirred to a slurry; it dissolves in the tank";
    return need;
  }
  if (in_water.kg_per_kg >= sparing_kg_per_kg && !matter::is_of_kind(stock.formula, "cyanide"))
    need.water_L_per_kg = litres(in_water);
  if (in_bath.kg_per_kg >= sparing_kg_per_kg) need.bath_L_per_kg = litres(in_bath);
  if (heats)
    need.from = "so that it warms by no more than " + degrees(most_warming_apart_C);
  else if (in_water.known)
    need.from = "at most 80 % of what dissolves at " + degrees(need.at_C);
  else
    need.from = "taken as freely soluble: the tables have no solid of it";
  return need;
}

}  // namespace bathwright::dosing
