#include <algorithm>
#include <bathwright/bath/interlock.hpp>
#include <bathwright/dosing/check_plan.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <deque>

#include "steps.hpp"
#include "take_out.hpp"

namespace bathwright::dosing {
namespace {

using bath::Chemistry;
using bath::ShelfItem;
using bath::Tank;

/// The chemical with the price and the rule of the shelf, where it stands there.
ShelfItem item_of(const Tank& tank, const matter::StockChemical& stock) {
  const ShelfItem* on_shelf = tank.on_shelf(stock.id);
  ShelfItem item = on_shelf ? *on_shelf : ShelfItem{};
  item.stock = stock;
  return item;
}

double outside(const bath::Aim& aim, double level) {
  return std::max({aim.low - level, level - aim.high, 0.0});
}

/// Levels that end farther outside their windows than they are now.
std::vector<std::string> levels_left(const Tank& tank, const Chemistry& chemistry, const bath::TankView& now,
                                     const bath::TankView& end) {
  std::vector<std::string> left;
  constexpr double rounding = 1e-6;
  const auto judge = [&](const bath::Aim& aim, const std::string& label, const std::string& unit, double was,
                         double is) {
    if (outside(aim, is) > outside(aim, was) + rounding)
      left.push_back(label + " ends at " + units::significant(is, 4) + unit + ", window " +
                     units::significant(aim.low, 4) + " to " + units::significant(aim.high, 4) + unit);
  };
  const auto& quantities = chemistry.type().quantities;
  for (const bath::Aim& aim : tank.aims) {
    if (aim.quantity == "pH") judge(aim, "pH", "", now.pH, end.pH);
    for (std::size_t q = 0; q < quantities.size(); ++q)
      if (quantities[q].id == aim.quantity)
        judge(aim, quantities[q].label, " g/L", now.quantity_g_per_L[q], end.quantity_g_per_L[q]);
  }
  return left;
}

}  // namespace

Result<AdditionSheet> check_plan(const Tank& tank, const Chemistry& chemistry, const bath::TankState& now,
                                 const std::vector<Wanted>& wanted, double take_out_L) {
  AdditionSheet sheet;
  auto view = chemistry.view(now);
  if (!view) return view.problems();
  sheet.now = *std::move(view);
  const bath::Held held = bath::held_by(chemistry, now, sheet.now.pH);

  std::deque<ShelfItem> items;  // whose addresses stay
  std::deque<bath::Brings> brings;
  std::vector<Portioned> amounts;
  std::vector<std::string> warnings;
  Problems problems;
  for (const Wanted& one : wanted) {
    if (!(one.kg >= 0) || !std::isfinite(one.kg)) {
      problems.push_back(
          {Fault::bad_input, one.stock.id, units::significant(one.kg, 3) + " kg", "0 or more", ""});
      continue;
    }
    // Told even of what the bath type has no component for, before that is told.
    if (const auto lock = bath::interlock(chemistry.type(), held, one.stock)) {
      if (lock->level == bath::Level::stop) {
        sheet.refused.push_back(
            {one.stock.id + " must not go into this bath: " + lock->why, "interlock: " + lock->rule});
        continue;
      }
      warnings.push_back(one.stock.name + ": " + lock->why);
    }
    auto what = chemistry.brings(one.stock);
    if (!what) {
      problems.insert(problems.end(), what.problems().begin(), what.problems().end());
      continue;
    }
    items.push_back(item_of(tank, one.stock));
    brings.push_back(*std::move(what));
    if (one.kg > 0) amounts.push_back({&items.back(), &brings.back(), one.kg});
  }
  const auto taken_out = take_out(chemistry, now, take_out_L);
  if (!taken_out) problems.insert(problems.end(), taken_out.problems().begin(), taken_out.problems().end());
  if (!problems.empty()) return problems;

  auto made = make_steps(tank, chemistry, taken_out->left, std::move(amounts), Sequence::as_given);
  if (!made) return made.problems();
  Steps steps = *std::move(made);
  Plan plan;
  plan.kind = "own list";
  plan.additions = std::move(steps.additions);
  plan.steps = std::move(steps.steps);
  plan.decant_L = take_out_L;
  if (take_out_L > 0) put_first(plan, taken_out->step);
  plan.final_state = std::move(steps.final_state);
  plan.keep_apart = std::move(steps.keep_apart);
  auto end = chemistry.view(plan.final_state);
  if (!end) return end.problems();
  plan.final_view = *std::move(end);
  plan.unmet = levels_left(tank, chemistry, sheet.now, plan.final_view);
  plan.cost = take_out_L * tank.dosing.waste_price_per_L;
  for (const Addition& addition : plan.additions) plan.cost += addition.cost;
  for (Refusal& refusal : steps.refused) sheet.refused.push_back(std::move(refusal));
  plan.feasible = sheet.refused.empty() && std::ranges::none_of(plan.steps, [](const Step& step) {
                    return std::ranges::any_of(step.checks, [](const Check& c) { return !c.ok && c.stops; });
                  });
  Tank with_all = tank;  // cautions speak of what stands on the shelf
  for (const ShelfItem& item : items)
    if (!tank.on_shelf(item.stock.id)) with_all.shelf.push_back(item);
  sheet.cautions = cautions_for(with_all, chemistry.type(), plan);
  sheet.cautions.insert(sheet.cautions.end(), warnings.begin(), warnings.end());
  sheet.plans.push_back(std::move(plan));
  return sheet;
}

}  // namespace bathwright::dosing
