#include "steps.hpp"

#include <algorithm>
#include <bathwright/units/show.hpp>
#include <cmath>

namespace bathwright::dosing {
namespace {

using bath::AdditionRule;
using bath::BathType;
using bath::Chemistry;
using bath::Headroom;
using bath::Tank;
using bath::TankState;
using bath::TankView;
using units::significant;

const AdditionRule* rule_for(const BathType& type, const std::string& stock_id) {
  const auto found = std::find_if(type.additions.begin(), type.additions.end(),
                                  [&](const AdditionRule& rule) { return rule.supply == stock_id; });
  return found == type.additions.end() ? nullptr : &*found;
}

/// Water comes first; what the bath type does not order comes last.
std::uint32_t place(const BathType& type, const Portioned& one) {
  if (one.item->stock.formula == "H2O") return 0;
  const AdditionRule* rule = rule_for(type, one.item->stock.id);
  return rule ? rule->order : std::numeric_limits<std::uint32_t>::max();
}

/// Whole portions that keep each within its largest single rise and pH step.
int portions_of(const BathType& type, const Portioned& one, double volume_L, double pH_step) {
  const AdditionRule* rule = rule_for(type, one.item->stock.id);
  double largest_rise =
      one.item->largest_rise_g_per_L.value_or(rule ? rule->largest_rise_g_per_L : bath::not_given);
  constexpr double rounding = 1e-9;  // an addition of exactly the rule's size is one portion
  int portions = 1;
  if (largest_rise > 0)
    portions = std::max(
        portions, static_cast<int>(
                      std::ceil(one.kg * one.item->stock.assay * 1000 / volume_L / largest_rise - rounding)));
  if (rule && rule->largest_pH_step > 0)
    portions =
        std::max(portions, static_cast<int>(std::ceil(std::abs(pH_step) / rule->largest_pH_step - rounding)));
  return portions;
}

std::string degrees(units::Celsius t) { return significant(t.v, 3) + " degC"; }

/// One check per watched solid and temperature.
void check_solids(const Chemistry& chemistry, const TankView& view, std::vector<Check>& checks) {
  for (const Headroom& room : view.headroom) {
    if (room.slow) continue;
    const auto judge = [&](double log10_room, bool covered, units::Celsius t, bool stops) {
      if (!covered) return;
      const bool ok = log10_room >= 0;
      std::string detail = significant(100 * std::pow(10, -log10_room), 3) + " % of saturation";
      if (!ok && !room.sign_in_tank.empty()) detail += ": " + room.sign_in_tank;
      checks.push_back({room.solid + " at " + degrees(t), ok, stops, std::move(detail)});
    };
    judge(room.working_log10, room.covers_working, chemistry.working_temperature(), true);
    // What crystallises over an idle weekend is for a person to weigh: the aims may allow nothing else.
    judge(room.idle_log10, room.covers_idle, chemistry.idle_temperature(), false);
  }
}

void check_volume(const Tank& tank, const TankView& view, std::vector<Check>& checks) {
  const double brim = tank.working_volume.v + tank.freeboard.v;
  checks.push_back({"freeboard", view.volume_L <= brim, true,
                    significant(view.volume_L, 5) + " L of " + significant(brim, 5) + " L to the brim"});
}

/// The bath type's hard limits on what it holds, sodium and calcium among them; a step may not cross one, or
/// go farther beyond it than the tank already is.
void check_limits(const BathType& type, const TankView& before, const TankView& view,
                  std::vector<Check>& checks) {
  for (std::size_t q = 0; q < type.quantities.size(); ++q)
    for (const bath::Window& window : type.windows) {
      if (window.subject != type.quantities[q].id) continue;
      const double level = view.quantity_g_per_L[q], was = before.quantity_g_per_L[q];
      const bool over = level > window.stop_high && level > was,
                 under = level < window.stop_low && level < was;
      if (over || under)
        checks.push_back({type.quantities[q].label, false, true,
                          significant(level, 3) + " g/L, stop " + (over ? "above " : "below ") +
                              significant(over ? window.stop_high : window.stop_low, 3)});
    }
}

/// A tank that starts outside may stay there until its pH is trimmed, but no step may take it farther out.
void check_pH(const Tank& tank, const BathType& type, double pH_at_start, const TankView& view,
              std::vector<Check>& checks) {
  double low = -HUGE_VAL, high = HUGE_VAL;
  if (const bath::Aim* aim = tank.aim("pH")) low = aim->low, high = aim->high;
  for (const bath::Window& window : type.windows)
    if (window.subject == "pH") {
      low = std::isnan(window.stop_low) ? std::min(low, window.low) : window.stop_low;
      high = std::isnan(window.stop_high) ? std::max(high, window.high) : window.stop_high;
    }
  constexpr double margin = 0.1;  // salts move the pH a little without adding acid
  const bool ok =
      !(view.pH < std::min(low, pH_at_start - margin)) && !(view.pH > std::max(high, pH_at_start + margin));
  checks.push_back({"pH on the way", ok, true,
                    "pH " + significant(view.pH, 3) + ", stop below " + significant(low, 3) + " and above " +
                        significant(high, 3)});
}

Addition addition_of(const bath::ShelfItem& item, double kg) {
  Addition addition;
  addition.chemical = item.stock.id;
  addition.name = item.stock.name;
  addition.kg = kg;
  addition.unit = item.stock.liquid ? "L" : "kg";
  addition.amount = item.stock.liquid ? kg / item.stock.kg_per_L : kg;
  addition.cost = item.price_per_kg() * kg;
  return addition;
}

}  // namespace

Result<Steps> make_steps(const Tank& tank, const Chemistry& chemistry, TankState state,
                         std::vector<Portioned> amounts) {
  const BathType& type = chemistry.type();
  std::stable_sort(amounts.begin(), amounts.end(),
                   [&](const Portioned& a, const Portioned& b) { return place(type, a) < place(type, b); });
  Steps result;
  const auto at_start = chemistry.quick_view(state);
  if (!at_start) return at_start.problems();
  for (const Portioned& one : amounts) {
    const TankState whole = Chemistry::after(state, *one.brings, one.kg);
    const auto before = chemistry.speciate(state), after = chemistry.speciate(whole);
    if (!before) return before.problems();
    if (!after) return after.problems();
    const AdditionRule* rule = rule_for(type, one.item->stock.id);
    const int portions = portions_of(type, one, chemistry.volume_L(whole), after->pH() - before->pH());
    const Addition addition = addition_of(*one.item, one.kg);
    for (int portion = 1; portion <= portions; ++portion) {
      Step step;
      step.number = static_cast<int>(result.steps.size()) + 1;
      step.chemical = addition.chemical;
      step.name = addition.name;
      step.unit = addition.unit;
      step.kg = one.kg / portions;
      step.amount = addition.amount / portions;
      step.portion = portion;
      step.portions = portions;
      if (rule) step.how = rule->how;
      if (rule) step.wait_h = rule->wait_h;
      state = Chemistry::after(std::move(state), *one.brings, step.kg);
      auto predicted = chemistry.quick_view(state);
      if (!predicted) return predicted.problems();
      step.predicted = *std::move(predicted);
      check_volume(tank, step.predicted, step.checks);
      check_pH(tank, type, at_start->pH, step.predicted, step.checks);
      check_limits(type, *at_start, step.predicted, step.checks);
      check_solids(chemistry, step.predicted, step.checks);
      result.steps.push_back(std::move(step));
    }
    result.additions.push_back(addition);
  }
  result.final_state = std::move(state);
  return result;
}

std::vector<std::string> cautions_for(const Tank& tank, const BathType& type, const Plan& plan) {
  std::vector<std::string> cautions;
  const auto say = [&](const std::string& text) {
    if (std::find(cautions.begin(), cautions.end(), text) == cautions.end()) cautions.push_back(text);
  };
  const auto added = [&](const std::string& id) {
    return std::any_of(plan.additions.begin(), plan.additions.end(),
                       [&](const Addition& a) { return a.chemical == id; });
  };
  const auto stock_name = [&](const std::string& id) {
    const bath::ShelfItem* item = tank.on_shelf(id);
    return item ? item->stock.name + ": " : std::string();
  };
  const auto matters = [&](const std::string& subject) {
    return subject.empty() || added(subject) || tank.aim(subject) != nullptr;
  };
  std::vector<std::string> spoken_for;  // chemicals the bath type itself warns of
  for (const bath::Level level : {bath::Level::stop, bath::Level::warn, bath::Level::notice})
    for (const bath::Caution& caution : type.cautions)
      if (caution.level == level && matters(caution.subject)) {
        say(stock_name(caution.subject) + caution.text);
        spoken_for.push_back(caution.subject);
      }
  for (const Addition& addition : plan.additions)
    if (const bath::ShelfItem* item = tank.on_shelf(addition.chemical);
        item && std::find(spoken_for.begin(), spoken_for.end(), addition.chemical) == spoken_for.end())
      for (const std::string& caution : item->stock.cautions) say(item->stock.name + ": " + caution);
  say("The supplier's safety data sheet, local codes and licensed practice decide; this sheet does not "
      "replace them.");
  return cautions;
}

}  // namespace bathwright::dosing
