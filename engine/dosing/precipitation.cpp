#include "precipitation.hpp"

#include <algorithm>
#include <bathwright/bath/interlock.hpp>

namespace bathwright::dosing {
namespace {

constexpr double first_share = 0.5;  // common practice: half the need, settle, analyse again

/// Whether the solid forms at the working or the idle temperature.
bool forms(const bath::TankView& view, const std::string& solid) {
  return std::ranges::any_of(view.headroom, [&](const bath::Headroom& room) {
    return room.solid == solid &&
           ((room.covers_working && room.working_log10 < 0) || (room.covers_idle && room.idle_log10 < 0));
  });
}

/// The formula of a solid by its name: "Na2CO3.10H2O (natron)".
std::string formula_in(const std::string& name) { return name.substr(0, name.find(" (")); }

class Search {
 public:
  Search(const bath::Tank& tank, const bath::Chemistry& chemistry, const Plan& plan)
      : tank_(tank), chemistry_(chemistry), plan_(plan) {}

  /// By one chemical as one solid; nothing where they do not do it.
  [[nodiscard]] std::optional<Removal> removal(const bath::Quantity& quantity, double excess_mol,
                                               const bath::ShelfItem& item,
                                               const bath::WatchedSolid& solid) const {
    const auto held = bath::held_by(chemistry_, plan_.final_state, plan_.final_view.pH);
    const auto rule = bath::interlock(chemistry_.type(), held, item.stock);
    if (rule && rule->level == bath::Level::stop) return std::nullopt;
    const auto formula = matter::Formula::parse(formula_in(solid.name));
    if (!formula) return std::nullopt;
    const auto holds = chemistry_.brings_per_mol(*formula);
    const auto brings = chemistry_.brings(item.stock);
    if (!holds || !brings) return std::nullopt;
    const double per_solid = chemistry_.quantity_mol(quantity, holds->component_mol);
    if (!(per_solid > 0) || chemistry_.quantity_mol(quantity, brings->component_mol) > 0) return std::nullopt;
    const double solid_mol = excess_mol / per_solid;
    for (std::size_t i = 0; i < holds->component_mol.size(); ++i) {
      const bool partner = holds->component_mol[i] > 0 && brings->component_mol[i] > 0 &&
                           !quantity.counts.contains(chemistry_.components()[i]);
      if (!partner) continue;
      const double kg = solid_mol * holds->component_mol[i] / brings->component_mol[i];
      const auto view = chemistry_.quick_view(bath::Chemistry::after(plan_.final_state, *brings, kg));
      if (!view || !forms(*view, solid.name)) continue;
      return Removal{quantity.id, quantity.label,  item.stock.id, item.stock.name, solid.name,
                     kg,          first_share * kg};
    }
    return std::nullopt;
  }

  [[nodiscard]] std::vector<Removal> all() const {
    std::vector<Removal> found;
    for (const bath::Aim& aim : tank_.aims) {
      const bath::Quantity* quantity = chemistry_.type().quantity(aim.quantity);
      if (!quantity) continue;
      const double excess_g_per_L = chemistry_.quantity_g_per_L(*quantity, plan_.final_state) - aim.aim;
      constexpr double met_relative = 1e-3;  // nobody weighs barium for less
      if (!(excess_g_per_L > met_relative * aim.aim)) continue;
      const double excess_mol =
          excess_g_per_L * chemistry_.volume_L(plan_.final_state) / quantity->formula.molar_mass().v;
      for (const bath::ShelfItem& item : tank_.shelf)
        for (const bath::WatchedSolid& solid : chemistry_.type().solids)
          if (auto one = removal(*quantity, excess_mol, item, solid)) found.push_back(*std::move(one));
    }
    return found;
  }

 private:
  const bath::Tank& tank_;
  const bath::Chemistry& chemistry_;
  const Plan& plan_;
};

}  // namespace

std::vector<Removal> removals(const bath::Tank& tank, const bath::Chemistry& chemistry, const Plan& plan) {
  return Search(tank, chemistry, plan).all();
}

}  // namespace bathwright::dosing
