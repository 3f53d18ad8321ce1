#include <fmt/format.h>

#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <cmath>
#include <set>

#include "views.hpp"
#include "words.hpp"

namespace bathwright::desktop {
namespace {

using sheets::fixed;
using sheets::pretty;
using sheets::Standing;

charts::State state_of(Standing standing) {
  switch (standing) {
    case Standing::stop:
      return charts::State::stop;
    case Standing::low:
    case Standing::high:
      return charts::State::act;
    default:
      return charts::State::in_window;
  }
}

/// Decimals that show three figures of a level, fewer where it is large.
int decimals_of(double value) {
  constexpr double coarse = 1000, one_decimal = 10;
  value = std::abs(value);
  if (value >= coarse) return 0;
  if (value >= one_decimal) return 1;
  return value >= 1 || value == 0 ? 2 : std::min(6, 2 - static_cast<int>(std::floor(std::log10(value))));
}

/// A judged figure in the unit it is shown in: a level of a quantity, or a pH.
LevelUnit unit_of(const sheets::Judged& judged, const bath::BathType& type, const bath::TankView* in,
                  const Units& units) {
  const bath::Quantity* quantity = judged.unit == "g/L" ? type.quantity(judged.aim->quantity) : nullptr;
  return quantity ? units.level(*quantity, in) : LevelUnit{judged.unit, 1};
}

/// "nickel 70.2, boric acid 42.0 g/L, pH 4.20": a unit stands after the last level that has it.
std::string levels_after(const dosing::Step& step, const bath::Tank& tank, const bath::BathType& type,
                         const Units& units) {
  std::string text, unit_before;
  for (const auto& judged : sheets::judge(tank, type, step.predicted.quantity_g_per_L, step.predicted.pH)) {
    const LevelUnit unit = unit_of(judged, type, &step.predicted, units);
    const double level = unit.of(judged.found);
    if (!unit_before.empty() && unit.symbol != unit_before) text += " " + unit_before;
    text += (text.empty() ? "" : ", ") + judged.label + " " +
            fixed(level, judged.unit.empty() ? 2 : decimals_of(level));
    unit_before = unit.symbol;
  }
  return unit_before.empty() ? text : text + " " + unit_before;
}

}  // namespace

const dosing::Plan* shown_plan(const Worked& worked, int plan) {
  if (worked.own && !worked.own->plans.empty()) return &worked.own->plans.front();
  if (!worked.sheet || worked.sheet->plans.empty()) return nullptr;
  return &worked.sheet->plans[std::min(static_cast<std::size_t>(plan), worked.sheet->plans.size() - 1)];
}

StateView state_view(const Worked& worked, const dosing::Plan* plan, const Units& units) {
  StateView view;
  if (!worked.shop || !worked.now) return view;
  const bath::Tank& tank = worked.shop->tank;
  const bath::BathType& type = worked.shop->type();
  const double pH = worked.analysed ? worked.analysed->analysis.pH : worked.now->pH;
  view.from = worked.analysed ? "from the readings above" : worked.read ? worked.read->from : "";
  const auto now = sheets::judge(tank, type, worked.now->quantity_g_per_L, pH);
  const auto then =
      plan ? sheets::judge(tank, type, plan->final_view.quantity_g_per_L, plan->final_view.pH) : now;
  for (std::size_t i = 0; i < now.size(); ++i) {
    const sheets::Judged& judged = now[i];
    const LevelUnit unit = unit_of(judged, type, &*worked.now, units);
    const int decimals =
        judged.unit.empty() ? 2 : decimals_of(unit.of(std::max(judged.found, judged.aim->aim)));
    ComponentRow row;
    row.name = judged.label;
    row.unit = unit.symbol;
    row.strip = {judged.aim->low, judged.aim->aim, judged.aim->high, judged.found, std::nullopt, 0};
    if (plan && !plan->additions.empty()) {
      row.strip.predicted = then[i].found;
      row.predicted = fixed(unit_of(then[i], type, &plan->final_view, units).of(then[i].found), decimals);
    }
    if (worked.analysed)
      for (const auto& level : worked.analysed->analysis.reconciled)
        if (level.quantity == judged.aim->quantity) row.strip.u = level.standard_uncertainty.v;
    row.found = fixed(unit.of(judged.found), decimals);
    row.aim = fixed(unit.of(judged.aim->aim), decimals);
    row.state = state_of(judged.standing);
    row.word = std::string(sheets::words(judged.standing));
    view.rows.push_back(std::move(row));
  }
  return view;
}

AdditionsView additions_view(const Worked& worked, int chosen,
                             const std::vector<std::pair<std::string, double>>& edited, const Units& units) {
  AdditionsView view;
  const dosing::Plan* plan = shown_plan(worked, chosen);
  if (!worked.shop || !worked.sheet || !plan) return view;
  const bath::Tank& tank = worked.shop->tank;
  const bath::BathType& type = worked.shop->type();
  view.plan = chosen;
  view.edited = !edited.empty();
  const auto money = [&](double cost) {
    return fixed(cost, 2) + (tank.currency.empty() ? "" : " " + tank.currency);
  };
  for (const dosing::Plan& one : worked.sheet->plans)
    view.plans.push_back(
        one.kind + ", " + money(one.cost) +
        (one.chances ? ", " + fixed(100 * one.chances->in_every_window, 0) + " %" : std::string()));
  for (const bath::ShelfItem& item : tank.shelf) view.shelf.emplace_back(item.stock.id, item.stock.name);
  for (const std::string& id : matter::StockCatalogue::built_in().ids())
    if (!tank.on_shelf(id))
      view.shelf.emplace_back(id, stock_of(tank, id)->name + " (not on this tank's shelf)");
  const dosing::Plan& planned =
      worked.sheet->plans[std::min(static_cast<std::size_t>(chosen), worked.sheet->plans.size() - 1)];
  const auto planned_amount = [&](const std::string& id) {
    const auto addition = std::ranges::find(planned.additions, id, &dosing::Addition::chemical);
    return addition == planned.additions.end() ? 0 : addition->amount;
  };
  const auto cost_of = [&](const std::string& id) {
    const auto addition = std::ranges::find(plan->additions, id, &dosing::Addition::chemical);
    return addition == plan->additions.end() ? std::string() : money(addition->cost);
  };
  if (edited.empty())
    for (const dosing::Addition& addition : planned.additions) {
      const AmountUnit unit = units.amount_unit(addition.unit);
      const double amount = addition.amount * unit.per_one;
      view.additions.push_back({addition.name, unit.symbol, amount, 2 * amount, money(addition.cost)});
    }
  for (const auto& [id, kg] : edited) {
    const matter::StockChemical* stock = stock_of(tank, id);
    const double amount = stock->liquid ? kg / stock->kg_per_L : kg, planned_one = planned_amount(id);
    constexpr double usual = 25;  // a bag
    const AmountUnit unit = units.amount_unit(stock->liquid ? "L" : "kg");
    view.additions.push_back({stock->name, unit.symbol, amount * unit.per_one,
                              unit.per_one * (planned_one > 0 ? 2 * planned_one : std::max(usual, amount)),
                              cost_of(id)});
  }
  std::set<std::string> told;  // what to look at is said once, at the step it begins with
  for (const dosing::Step& step : plan->steps) {
    StepRow row;
    row.number = std::to_string(step.number);
    row.what = units.amount(step.amount, step.unit) + " " + step.name;
    if (step.portions > 1) row.what += fmt::format(", {} of {}", step.portion, step.portions);
    row.how = step.how;
    row.then = levels_after(step, tank, type, units) + ", " + units.volume(step.predicted.volume_L);
    if (step.wait_h > 0) row.wait = "wait " + sheets::waiting(step.wait_h) + ", stirred";
    for (const dosing::Check& check : step.checks) {
      if (check.ok || (!check.stops && !told.insert(check.name).second)) continue;
      (check.stops ? row.stops : row.watch).push_back(pretty_words(check.name + ": " + check.detail));
    }
    row.checks = static_cast<int>(step.checks.size());
    row.refused = !row.stops.empty();
    view.steps.push_back(std::move(row));
  }
  const dosing::AdditionSheet& sheet = worked.own ? *worked.own : *worked.sheet;
  for (const dosing::Refusal& refusal : sheet.refused)
    view.refused.push_back(pretty_words(refusal.reason + " (" + refusal.rule + ")"));
  view.cautions = sheet.cautions;
  view.unmet = plan->unmet;
  if (plan->chances)
    view.chance = fixed(100 * plan->chances->in_every_window, 0) + " % chance of ending inside every window" +
                  (plan->second_look ? "; worth a second look: " + pretty(plan->second_look->at) : "");
  view.conflicts = plan->conflicts;
  view.ready = plan->feasible && !plan->additions.empty() && worked.analysed->analysis.suspects.empty() &&
               worked.analysed->changed_since.empty();
  view.verdict = !plan->feasible                               ? "not as it stands: see what stops it"
                 : plan->additions.empty()                     ? "nothing to add"
                 : !worked.analysed->analysis.suspects.empty() ? "a reading is suspect: settle that first"
                 : !worked.analysed->changed_since.empty()
                     ? "the log has later changes: analyse the tank as it is now"
                     : "ready: a second person approves it";
  return view;
}

}  // namespace bathwright::desktop
