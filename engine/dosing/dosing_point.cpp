#include "dosing_point.hpp"

#include <algorithm>
#include <bathwright/units/show.hpp>
#include <cmath>

namespace bathwright::dosing {
namespace {

using speciation::Equilibrium;
using units::significant;

constexpr const char* place = "at the dosing point";

bath::TankState mixture(const bath::TankState& tank, const bath::TankState& portion, double share) {
  bath::TankState there = portion;
  for (std::size_t i = 0; i < there.component_mol.size(); ++i)
    there.component_mol[i] += share * tank.component_mol[i];
  there.water_kg += share * tank.water_kg;
  return there;
}

/// What forms there and neither before nor in the stirred tank.
void check_solids(const bath::Chemistry& chemistry, const Equilibrium& there, const Equilibrium& before,
                  const Equilibrium& after, std::vector<Check>& checks) {
  const auto& solids = chemistry.working().system().solids();
  std::vector<std::string> forming;
  std::string names;
  for (std::size_t k = 0; k < solids.size(); ++k) {
    const auto above = [&](const Equilibrium& one) {
      return std::isfinite(one.saturation_index[k]) && one.saturation_index[k] > 0;
    };
    if (solids[k].slow || !chemistry.working().covers(k) || !above(there) || above(before) || above(after))
      continue;
    if (std::ranges::find(forming, solids[k].formula) != forming.end()) continue;
    forming.push_back(solids[k].formula);
    names += (names.empty() ? "" : ", ") + solids[k].formula;
  }
  if (forming.empty()) return;
  checks.push_back({std::string("solids ") + place, false, false,
                    names + " may form where it goes in and dissolve again in the stirred tank: slowly"});
}

void check_pH(const bath::Tank& tank, const bath::BathType& type, const Equilibrium& there,
              const Equilibrium& before, std::vector<Check>& checks) {
  double low = -HUGE_VAL, high = HUGE_VAL;
  if (const bath::Aim* aim = tank.aim("pH")) low = aim->low, high = aim->high;
  for (const bath::Window& window : type.windows)
    if (window.subject == "pH") {
      if (!std::isnan(window.stop_low)) low = window.stop_low;
      if (!std::isnan(window.stop_high)) high = window.stop_high;
    }
  constexpr double brief = 1;
  const double pH = there.pH();
  const bool ok = pH >= std::min(low, before.pH()) - brief && pH <= std::max(high, before.pH()) + brief;
  if (!ok)
    checks.push_back(
        {std::string("pH ") + place, false, false,
         "pH " + significant(pH, 3) + " where it goes in: thinner, slower, into the strongest flow"});
}

}  // namespace

void check_dosing_point(const bath::Tank& tank, const bath::Chemistry& chemistry,
                        const bath::TankState& before, const bath::TankState& portion,
                        const Equilibrium& tank_before, const Equilibrium& tank_after,
                        const matter::StockChemical& stock, const GasRule& gases,
                        std::vector<Check>& checks) {
  const bath::TankState there = mixture(before, portion, tank.dosing.mixing_share);
  const auto solved = chemistry.speciate(there);
  if (!solved) {
    checks.push_back(
        {std::string("mixture ") + place, false, false,
         "could not be worked out: it is too strong there. Thinner, slower, into the strongest flow"});
    return;
  }
  check_solids(chemistry, *solved, tank_before, tank_after, checks);
  check_pH(tank, chemistry.type(), *solved, tank_before, checks);
  gases.check_dosing_point(*solved, stock, checks);
}

}  // namespace bathwright::dosing
