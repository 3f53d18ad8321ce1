#include "goals.hpp"

#include <algorithm>
#include <bathwright/units/show.hpp>
#include <cmath>

namespace bathwright::dosing {
namespace {

/// Stretches that begin at `value` and end at `ends`, in g/L or pH, each of its weight; the last has no end.
std::vector<Stretch> stretches(std::initializer_list<std::pair<double, double>> ends, double unit) {
  std::vector<Stretch> list;
  double reached = 0;
  for (const auto& [end, weight] : ends) {
    if (end <= reached) continue;
    list.push_back({(end - reached) / unit, weight});
    reached = end;
  }
  return list;
}

/// What is outside its window is to come a tenth of the window inside; what is inside must not leave it, not
/// even when an amount is rounded.
double edge_inside(double edge, double width, double today, bool upper) {
  constexpr double well_inside = 0.1, just_inside = 0.02;
  const double inward = upper ? -width : width;
  if (upper ? today > edge : today < edge) return edge + well_inside * inward;
  const double just = edge + just_inside * inward;
  return upper ? std::max(just, today) : std::min(just, today);
}

Goal goal_of(const bath::Aim& aim, const bath::Quantity* quantity, double today, double dead_band,
             bool has_source, bool bring_down) {
  Goal goal;
  goal.of = quantity ? Goal::Of::level : Goal::Of::pH;
  goal.quantity = quantity;
  goal.value = aim.aim;
  goal.unit = !quantity ? 1 : aim.aim > 0 ? aim.aim : aim.high;
  const bool unwanted = quantity && quantity->unwanted;
  const bool not_missed = unwanted && !has_source;
  // There is no less than nothing.
  goal.low = quantity && (aim.low <= 0 || not_missed) ? -HUGE_VAL : aim.low;
  goal.high = aim.high;
  const double width = aim.high - aim.low;
  const double up = std::max(edge_inside(aim.high, width, today, true) - aim.aim, 0.0);
  const double down = std::max(aim.aim - edge_inside(aim.low, width, today, false), 0.0);
  // What is too strong today cannot be helped by adding, nor what is too weak and on no shelf: it counts
  // little where it stands. The pH can be helped.
  const double stands = quantity && !bring_down ? std::min(today - aim.aim, up) : 0;
  goal.above = stretches({{std::min(dead_band, up), 0},
                          {stands, weight::stays_strong},
                          {up, weight::off_aim},
                          {HUGE_VAL, weight::outside}},
                         goal.unit);
  goal.below = stretches({{std::min(dead_band, down), 0},
                          {down, unwanted     ? 0
                                 : has_source ? weight::off_aim
                                              : weight::stays_weak},
                          {HUGE_VAL, not_missed                       ? 0
                                     : has_source || today >= aim.low ? weight::outside
                                                                      : weight::stays_weak}},
                         goal.unit);
  return goal;
}

Goal limit_of(const bath::Quantity& quantity, double value, bool from_below) {
  Goal goal;
  goal.quantity = &quantity;
  goal.value = goal.unit = value;
  goal.low = from_below ? -HUGE_VAL : value;
  goal.high = from_below ? value : HUGE_VAL;
  goal.above = {{HUGE_VAL, from_below ? weight::hard_limit : 0}};
  goal.below = {{HUGE_VAL, from_below ? 0 : weight::hard_limit}};
  return goal;
}

Goal saturation_of(const SolidLimit& limit, const bath::Chemistry& chemistry, bool idle) {
  Goal goal;
  goal.of = Goal::Of::solid;
  goal.solid = limit.index;
  goal.dissolved =
      limit.solid + " dissolved at " +
      units::show(idle ? chemistry.idle_temperature() : chemistry.working_temperature(), "degC", 3);
  goal.idle = idle;
  goal.value = goal.high = idle ? limit.idle : limit.working;
  goal.low = -HUGE_VAL;
  goal.above = {{HUGE_VAL, idle ? weight::crystallises : weight::hard_limit}};
  goal.below = {{HUGE_VAL, 0}};
  return goal;
}

}  // namespace

double penalty(const Goal& goal, double deviation) {
  double left = std::abs(deviation), sum = 0;
  for (const Stretch& stretch : deviation > 0 ? goal.above : goal.below) {
    const double part = std::min(left, stretch.width);
    if (stretch.weight > 0) sum += part * stretch.weight;
    left -= part;
    if (left <= 0) break;
  }
  return sum;
}

std::vector<Goal> goals_of(const bath::Tank& tank, const bath::Chemistry& chemistry,
                           const bath::TankState& now, const std::vector<SolidLimit>& solids,
                           const GoalRules& rules) {
  std::vector<Goal> goals;
  const auto as_filled = [&](const bath::Quantity& quantity) {
    return chemistry.quantity_mol(quantity, now.component_mol) * quantity.formula.molar_mass().v /
           rules.target_L;
  };
  for (const bath::Aim& aim : rules.aims) {
    const auto band = rules.dead_band.find(aim.quantity);
    const bath::Quantity* quantity = chemistry.type().quantity(aim.quantity);
    goals.push_back(goal_of(aim, quantity, quantity ? as_filled(*quantity) : rules.pH_today,
                            band == rules.dead_band.end() ? 0 : band->second,
                            !rules.without_source.contains(aim.quantity), rules.bring_down));
  }
  for (const bath::Window& window : chemistry.type().windows) {
    const bath::Quantity* quantity = chemistry.type().quantity(window.subject);
    if (!quantity) continue;
    const double today = as_filled(*quantity);
    if (window.stop_high > 0) goals.push_back(limit_of(*quantity, std::max(window.stop_high, today), true));
    if (window.stop_low > 0 && today > 0)
      goals.push_back(limit_of(*quantity, std::min(window.stop_low, today), false));
  }
  for (const SolidLimit& solid : solids) {
    if (!solid.near) continue;
    for (const bool idle : {false, true})
      if (std::isfinite(idle ? solid.idle : solid.working))
        goals.push_back(saturation_of(solid, chemistry, idle));
  }
  Goal volume;
  volume.of = Goal::Of::volume;
  volume.value = rules.target_L;
  volume.unit = tank.working_volume.v;
  volume.low = -HUGE_VAL;
  volume.high = std::max(tank.working_volume.v + tank.freeboard.v, rules.target_L);
  volume.below = {{HUGE_VAL, weight::under_mark}};
  volume.above = stretches({{filled_freeboard * (volume.high - volume.value),
                             rules.to_the_mark ? 1.5 * weight::decant : weight::over_mark},
                            {HUGE_VAL, weight::spilled}},
                           volume.unit);
  goals.push_back(std::move(volume));
  return goals;
}

}  // namespace bathwright::dosing
