#include "planner.hpp"

#include <algorithm>
#include <bathwright/units/show.hpp>
#include <cmath>

#include "conflicts.hpp"
#include "steps.hpp"
#include "take_out.hpp"
#include "waits.hpp"
#include "weighing.hpp"

namespace bathwright::dosing {
namespace {

using bath::Aim;
using bath::Chemistry;
using bath::Quantity;
using bath::Tank;
using bath::TankState;
using units::significant;

constexpr double met_relative = 0.002, met_pH = 0.02;  // nearer than that no scale or meter can tell

/// Less than half a gram of a chemical, or than a twentieth of a percent of the tank in water, is nothing
/// anybody adds.
bool is_nothing(const Situation& s, const Supply& supply, double kg) {
  return kg <= (supply.is_water() ? 5e-4 * s.target_L : 5e-4);
}

/// What raising every aim from nothing costs, each by the chemical that does it at least `price`.
template <class Price>
double cost_of_all(const Situation& s, const std::vector<Aim>& aims, Price price) {
  double sum = 0;
  for (const Aim& aim : aims) {
    const Quantity* quantity = s.chemistry.type().quantity(aim.quantity);
    if (!quantity) continue;
    double least = HUGE_VAL;
    for (const Supply& supply : s.supplies) {
      const double grams_per_kg =
          s.chemistry.quantity_mol(*quantity, supply.brings.component_mol) * quantity->formula.molar_mass().v;
      if (grams_per_kg > 1e-9) least = std::min(least, price(supply) * aim.aim * s.target_L / grams_per_kg);
    }
    if (std::isfinite(least)) sum += least;
  }
  return sum > 0 ? sum : 1;
}

std::vector<Column> columns_of(const Situation& s, const Wish& wish) {
  const auto cost = [](const Supply& supply) { return supply.price_per_kg; };
  const auto salt = [](const Supply& supply) { return supply.salt_mol_per_kg; };
  const double per_cost = weight::price / cost_of_all(s, wish.aims, cost);
  const double per_salt = weight::price / cost_of_all(s, wish.aims, salt);
  std::vector<Column> columns;
  for (const Supply& supply : s.supplies) {
    Column column{supply.brings};
    constexpr double second = 1e-3;  // what decides between equals
    column.price = wish.least == Wish::Least::cost
                       ? per_cost * supply.price_per_kg + second * per_salt * supply.salt_mol_per_kg
                       : per_salt * supply.salt_mol_per_kg + second * per_cost * supply.price_per_kg;
    column.price += 1e-9;  // of what is free, no more than is needed
    if (wish.whole_packages && supply.by_the_bag) column.package = *supply.item->package;
    columns.push_back(std::move(column));
  }
  // The last column: litres of bath taken out, before anything goes in.
  const double volume = s.now_view.volume_L;
  Column decant;
  for (const double mol : s.now.component_mol) decant.brings.component_mol.push_back(-mol / volume);
  decant.brings.water_kg = -s.now.water_kg / volume;
  decant.price = weight::decant / s.tank.working_volume.v + per_cost * s.tank.dosing.waste_price_per_L;
  constexpr double most = 0.9;  // of the tank
  decant.upper = wish.may_decant ? most * volume : 0;
  columns.push_back(std::move(decant));
  return columns;
}

/// Counts what is missed.
void count_misses(const Settling& settling, const Settled& end, Amounts& amounts) {
  for (std::size_t g = 0; g < settling.goals().size(); ++g) {
    const Goal& goal = settling.goals()[g];
    if (goal.of == Goal::Of::volume) continue;
    const double counts = penalty(goal, end.rows[g].deviation);
    amounts.penalty += counts;
    const bool merely_strong = goal.of == Goal::Of::level && end.rows[g].deviation > 0 &&
                               goal.value + end.rows[g].deviation * goal.unit <= goal.high * (1 + 1e-6);
    if (!merely_strong) amounts.missing += counts;
  }
}

/// How much would have to evaporate for what does not go in, and what that is.
Outcome lacking_room(const Situation& s, Settling settling, const Settled& end, Amounts& amounts) {
  const Goal& volume = settling.goals().back();
  constexpr double rounding = 1e-4;
  const double full = volume.value + filled_freeboard * (volume.high - volume.value);
  if (end.rows.back().deviation * volume.unit + volume.value < full - rounding * volume.unit) return Done{};
  // Evaporated is water that goes in with a minus. It counts next to nothing, so that the same chemicals are
  // chosen as with room enough, not those of least volume.
  Column dry{{std::vector<double>(s.now.component_mol.size(), 0), 1}, -1e-5 * weight::decant / s.target_L};
  constexpr double most = 0.5;  // of the tank
  dry.lower = -most * s.target_L;
  dry.upper = 0;
  std::vector<Column> columns = settling.columns();
  columns.push_back(std::move(dry));
  std::vector<Goal> goals = settling.goals();
  goals.back().above = {{(full - volume.value) / volume.unit, 0}, {HUGE_VAL, weight::spilled}};
  std::vector<double> amount = end.amount;
  amount.push_back(0);
  const auto dried = Settling(s.chemistry, s.now, std::move(goals), std::move(columns)).settle(amount);
  if (!dried) return dried.problems();
  amounts.lacks_room_L = -dried->amount.back();
  for (std::size_t c = 0; c < s.supplies.size(); ++c)
    amounts.rest_kg.push_back(std::max(0.0, dried->amount[c] - end.amount[c]));
  return Done{};
}

/// The solids at their limits.
std::vector<std::string> saturated(const Settling& settling, const Settled& end) {
  constexpr double at_it = 2e-3;  // log10
  std::vector<std::string> names;
  for (std::size_t g = 0; g < settling.goals().size(); ++g)
    if (settling.goals()[g].of == Goal::Of::solid && end.rows[g].deviation > -at_it)
      names.push_back(settling.goals()[g].dissolved);
  return names;
}

/// Holds a column at an amount.
void fix(Column& column, double amount) { column.lower = column.upper = amount; }

/// Amounts as scales show them: the salts first, then the water and the trim of the pH, which make up for
/// them. Whole packages stay whole, and what is not needed is not called for by a rounding.
Result<Settled> weighed(const Situation& s, Settling& settling, Settled end) {
  const auto hold = [&](auto chosen) {
    for (std::size_t c = 0; c < s.supplies.size(); ++c) {
      const Supply& supply = s.supplies[c];
      double& kg = end.amount[c];
      if (is_nothing(s, supply, kg)) kg = 0;
      if (kg > 0 && !chosen(supply)) continue;
      Column& column = settling.columns()[c];
      if (s.request.weighable && column.package == 0) kg = weighable_kg(supply.item->stock, kg);
      column.package = 0;
      fix(column, kg);
    }
  };
  hold([&](const Supply& supply) { return !supply.is_water() && !supply.trims(); });
  double& litres = end.amount.back();
  if (s.request.weighable) litres = std::round(litres);
  if (litres < 5e-4 * s.target_L) litres = 0;
  fix(settling.columns().back(), litres);
  auto trimmed = settling.settle(end.amount);
  if (!trimmed) return trimmed.problems();
  end = *std::move(trimmed);
  hold([](const Supply&) { return true; });
  return settling.settle(end.amount);
}

/// Water fills up to the mark. Above it it would only thin what stands over its aim, and everything else
/// would have to be bought for the litres above; it may do so where a window is missed otherwise.
Result<Settled> without_needless_water(const Situation& s, Settling& settling, Settled best) {
  constexpr double needless =
      1e-3 * weight::outside;  // of the merit: less than a thousandth outside a window
  constexpr int most_rounds = 4;
  const Goal& volume = settling.goals().back();
  const std::vector<Column> as_it_was = settling.columns();
  Settled lower = best;
  for (int round = 0; round < most_rounds; ++round) {
    const double over_L = volume.value + lower.rows.back().deviation * volume.unit - s.target_L;
    if (over_L <= 5e-4 * s.target_L) break;
    bool less = false;
    for (std::size_t c = 0; c < s.supplies.size(); ++c) {
      if (!s.supplies[c].is_water() || lower.amount[c] <= 0) continue;
      lower.amount[c] = settling.columns()[c].upper = std::max(0.0, lower.amount[c] - over_L);
      less = true;
    }
    if (!less) break;
    auto settled = settling.settle(lower.amount);
    if (!settled) return settled.problems();
    lower = *std::move(settled);
  }
  if (lower.merit <= best.merit + needless) return lower;
  settling.columns() = as_it_was;
  return best;
}

Result<Amounts> amounts_from(const Situation& s, const Wish& wish, std::vector<Column> columns) {
  // Where bath is taken out, all of it is made up for, what lies inside the noise too.
  const std::map<std::string, double> none;
  Settling settling(s.chemistry, s.now,
                    goals_of(s.tank, s.chemistry, s.now, s.solids,
                             {wish.aims, wish.may_decant ? none : s.dead_band, s.without_source,
                              s.now_view.pH, s.target_L, wish.may_decant, wish.bring_down}),
                    std::move(columns));
  auto freely = settling.settle(std::vector<double>(s.supplies.size() + 1, 0));
  if (!freely) return freely.problems();
  auto best = without_needless_water(s, settling, *std::move(freely));
  if (!best) return best.problems();
  Amounts amounts;
  amounts.conflicts = conflicts(settling, *best, wish.may_decant);
  if (Outcome found = lacking_room(s, settling, *best, amounts); !found) amounts.lacks_room_L = 0;
  auto end = weighed(s, settling, *std::move(best));
  if (!end) return end.problems();
  count_misses(settling, *end, amounts);
  amounts.saturated = saturated(settling, *end);
  amounts.decant_L = end->amount.back();
  amounts.kg = std::move(end->amount);
  amounts.kg.pop_back();
  return amounts;
}

/// What does not end at its aim, and whether all of it ends inside its window at least.
struct Unmet {
  std::vector<std::string> words;
  bool inside = true;

  void add(const Aim& aim, double value, std::string what) {
    const double rounding = 1e-9 * std::abs(aim.aim);
    const bool in_window = value >= aim.low - rounding && value <= aim.high + rounding;
    inside = inside && in_window;
    words.push_back(std::move(what) + (in_window ? "; inside its window" : ""));
  }
};

/// Whether a level that ends low is nobody's fault and no addition's task.
bool not_missed(const Situation& s, const Aim& aim, const Quantity& quantity, double level) {
  return quantity.unwanted && level < aim.aim &&
         (level >= aim.low || s.without_source.contains(aim.quantity));
}

bool raises(const Situation& s, const Quantity& quantity) {
  return std::ranges::any_of(s.supplies, [&](const Supply& supply) {
    return s.chemistry.quantity_mol(quantity, supply.brings.component_mol) > 1e-9;
  });
}

Unmet unmet_aims(const Situation& s, const bath::TankView& end, const Amounts& amounts) {
  Unmet unmet;
  const auto& quantities = s.chemistry.type().quantities;
  for (const Aim& aim : s.tank.aims) {
    const auto band = s.dead_band.find(aim.quantity);
    const double left_alone = band == s.dead_band.end() ? 0 : band->second;
    if (aim.quantity == "pH") {
      if (std::abs(end.pH - aim.aim) > std::max(met_pH, left_alone + met_pH / 2))
        unmet.add(aim, end.pH, "pH ends at " + significant(end.pH, 3) + ", aim " + significant(aim.aim, 3));
      continue;
    }
    for (std::size_t q = 0; q < quantities.size(); ++q) {
      if (quantities[q].id != aim.quantity) continue;
      const double level = end.quantity_g_per_L[q];
      if (std::abs(level - aim.aim) <= left_alone + met_relative * aim.aim) continue;
      if (not_missed(s, aim, quantities[q], level)) continue;
      unmet.add(aim, level,
                quantities[q].label + " ends at " + significant(level, 4) + " g/L, aim " +
                    significant(aim.aim, 4) + " g/L" +
                    (level > aim.aim ? "; only taking bath out brings it lower"
                     : amounts.lacks_room_L > 0.5
                         ? "; there is no room for more: " + significant(amounts.lacks_room_L, 2) +
                               " L have to evaporate first"
                     : raises(s, quantities[q]) && !amounts.saturated.empty()
                         ? "; held back to keep " + amounts.saturated.front()
                         : ""));
    }
  }
  return unmet;
}

std::vector<std::string> left_alone(const Situation& s) {
  std::vector<std::string> lines;
  for (const auto& [id, band] : s.dead_band) {
    const Aim& aim = *s.tank.aim(id);
    const Quantity* quantity = s.chemistry.type().quantity(id);
    const double level = quantity ? s.chemistry.quantity_g_per_L(*quantity, s.now) : s.now_view.pH;
    const double filled = quantity ? level * s.now_view.volume_L / s.target_L : level;
    if (std::abs(filled - aim.aim) <= (quantity ? met_relative * aim.aim : met_pH / 2)) continue;
    const std::string unit = quantity ? " g/L" : "";
    lines.push_back((quantity ? quantity->label : "pH") + " " + significant(level, quantity ? 4 : 3) + unit +
                    ", aim " + significant(aim.aim, quantity ? 4 : 3) + unit +
                    ": inside the noise, left alone");
  }
  return lines;
}

std::vector<Rest> rest_of(const Situation& s, const Amounts& amounts) {
  std::vector<Rest> rest;
  for (std::size_t c = 0; c < amounts.rest_kg.size(); ++c) {
    const Supply& supply = s.supplies[c];
    const double kg = weighable_kg(supply.item->stock, amounts.rest_kg[c]);
    if (supply.is_water() || is_nothing(s, supply, kg)) continue;
    rest.push_back({addition_of(*supply.item, kg), amounts.lacks_room_L});
  }
  return rest;
}

}  // namespace

Result<Amounts> amounts_of_kind(const Situation& s, const Wish& wish) {
  const std::vector<Column> columns = columns_of(s, wish);
  auto all = amounts_from(s, wish, columns);
  if (!all) return all;
  bool acid = false, alkali = false;
  for (std::size_t c = 0; c < s.supplies.size(); ++c) {
    if (all->kg[c] == 0) continue;
    acid = acid || s.supplies[c].is_acid();
    alkali = alkali || s.supplies[c].is_alkali();
  }
  if (!acid || !alkali) return all;
  const auto without = [&](bool (Supply::*of_the_kind)() const) {
    std::vector<Column> kept = columns;
    for (std::size_t c = 0; c < s.supplies.size(); ++c)
      if ((s.supplies[c].*of_the_kind)()) fix(kept[c], 0);
    return amounts_from(s, wish, std::move(kept));
  };
  auto no_acid = without(&Supply::is_acid), no_alkali = without(&Supply::is_alkali);
  if (!no_acid) return no_alkali;
  if (!no_alkali) return no_acid;
  const auto cost = [&](const Amounts& amounts) {
    double sum = 0;
    for (std::size_t c = 0; c < s.supplies.size(); ++c) sum += amounts.kg[c] * s.supplies[c].price_per_kg;
    return sum;
  };
  constexpr double as_near = 1e-4;
  if (std::abs(no_acid->penalty - no_alkali->penalty) > as_near)
    return no_acid->penalty < no_alkali->penalty ? no_acid : no_alkali;
  return cost(*no_acid) < cost(*no_alkali) ? no_acid : no_alkali;
}

Result<Plan> plan_with(const Situation& s, const Wish& wish, const Amounts& amounts) {
  Plan plan;
  plan.kind = wish.kind;
  plan.decant_L = amounts.decant_L;
  plan.cost = amounts.decant_L * s.tank.dosing.waste_price_per_L;
  plan.conflicts = amounts.conflicts;
  std::vector<Portioned> portioned;
  for (std::size_t c = 0; c < s.supplies.size(); ++c) {
    if (amounts.kg[c] == 0) continue;
    const Supply& supply = s.supplies[c];
    portioned.push_back({supply.item, &supply.brings, amounts.kg[c]});
    plan.cost += amounts.kg[c] * supply.price_per_kg;
    plan.salt_load_mol += amounts.kg[c] * supply.salt_mol_per_kg;
  }
  const auto taken_out = take_out(s.chemistry, s.now, amounts.decant_L);
  if (!taken_out) return taken_out.problems();
  auto steps = make_steps(s.tank, s.chemistry, taken_out->left, std::move(portioned));
  if (!steps) return steps.problems();
  plan.additions = std::move(steps->additions);
  plan.steps = std::move(steps->steps);
  if (amounts.decant_L > 0) put_first(plan, taken_out->step);
  plan.rest = rest_of(s, amounts);
  plan.final_state = std::move(steps->final_state);
  plan.keep_apart = std::move(steps->keep_apart);
  auto end = s.chemistry.view(plan.final_state);
  if (!end) return end.problems();
  plan.final_view = *std::move(end);
  Unmet unmet = unmet_aims(s, plan.final_view, amounts);
  plan.unmet = std::move(unmet.words);
  plan.left_alone = left_alone(s);
  plan.waits = waits(s.tank, s.chemistry, plan.final_view);
  plan.feasible = unmet.inside && steps->refused.empty();
  for (const Refusal& refusal : steps->refused)
    plan.unmet.push_back(refusal.reason + " (" + refusal.rule + ")");
  for (const Step& step : plan.steps)
    for (const Check& check : step.checks) plan.feasible = plan.feasible && (check.ok || !check.stops);
  return plan;
}

Result<Plan> plan_of_kind(const Situation& situation, const Wish& wish) {
  const auto amounts = amounts_of_kind(situation, wish);
  if (!amounts) return amounts.problems();
  return plan_with(situation, wish, *amounts);
}

}  // namespace bathwright::dosing
