#include "waits.hpp"

#include <algorithm>
#include <cmath>

namespace bathwright::dosing {
namespace {

std::string unit_of(bath::CountedIn counted) {
  switch (counted) {
    case bath::CountedIn::ampere_hour:
      return "Ah";
    case bath::CountedIn::gram_deposited:
      return "g deposited";
    case bath::CountedIn::m2_of_work:
      return "m2 of work";
    case bath::CountedIn::hour:
      return "h";
    case bath::CountedIn::m2_surface_hour:
      return "m2 h of surface";
  }
  return "";
}

/// mol of a quantity that one unit of a use brings to the tank, or takes out of it.
double change_mol(const bath::Chemistry& chemistry, const bath::Quantity& quantity, const bath::Use& use) {
  double mol = 0;
  for (const bath::Use::Effect& effect : use.effects)
    if (effect.quantity == quantity.id) mol += effect.g_per_unit / quantity.formula.molar_mass().v;
  const bath::Quantity* metal = chemistry.type().quantity(use.deposits);
  if (!metal || metal->counts.size() != 1) return mol;
  const double plated_mol =
      use.counted_in == bath::CountedIn::ampere_hour
          ? bath::metal_mol_per_Ah(use) * (use.cathode_efficiency - use.anode_efficiency)
      : use.counted_in == bath::CountedIn::gram_deposited ? 1 / bath::metal_of(*metal).v
                                                          : 0;
  if (!std::isfinite(plated_mol)) return mol;
  const auto& [component, count] = *metal->counts.begin();
  std::vector<double> taken(chemistry.components().size(), 0);
  for (std::size_t i = 0; i < taken.size(); ++i)
    if (chemistry.components()[i] == component) taken[i] = plated_mol / count;
  return mol - chemistry.quantity_mol(quantity, taken);
}

}  // namespace

std::vector<Wait> waits(const bath::Tank& tank, const bath::Chemistry& chemistry, const bath::TankView& end) {
  constexpr double met = 0.005;  // of the aim: nobody waits for less
  std::vector<Wait> found;
  const auto& quantities = chemistry.type().quantities;
  for (const bath::Aim& aim : tank.aims)
    for (std::size_t q = 0; q < quantities.size(); ++q) {
      const bath::Quantity& quantity = quantities[q];
      if (quantity.id != aim.quantity) continue;
      const double excess = end.quantity_g_per_L[q] - aim.aim;
      if (std::abs(excess) <= met * aim.aim) continue;
      const bool sold = std::ranges::any_of(tank.shelf, [&](const bath::ShelfItem& item) {
        const auto brings = chemistry.brings(item.stock);
        return brings && chemistry.quantity_mol(quantity, brings->component_mol) > 1e-9;
      });
      if (excess < 0 && (sold || quantity.unwanted)) continue;
      for (const bath::Use& use : chemistry.type().uses) {
        const double g_per_unit = change_mol(chemistry, quantity, use) * quantity.formula.molar_mass().v;
        if (g_per_unit * excess >= 0) continue;
        found.push_back({quantity.id, quantity.label, use.label, -excess * end.volume_L / g_per_unit,
                         unit_of(use.counted_in), excess > 0});
        break;
      }
    }
  return found;
}

}  // namespace bathwright::dosing
