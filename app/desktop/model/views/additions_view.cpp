#include <fmt/format.h>

#include <algorithm>
#include <bathwright/sheets/analysis_sheet.hpp>
#include <bathwright/sheets/names.hpp>
#include <cmath>
#include <set>

#include "views.hpp"
#include "words.hpp"

namespace bathwright::desktop {
namespace {

using sheets::fixed;
using sheets::money;
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

/// "nickel 70.2, boric acid 42.0 g/L, pH 4.20": a unit stands after the last level that has it.
std::string levels_after(const dosing::Step& step, const bath::Tank& tank, const bath::BathType& type,
                         const Units& units) {
  std::string text, unit_before;
  const sheets::Medium in = units.medium_of(step.predicted);
  for (const auto& judged : sheets::judge(tank, type, step.predicted.quantity_g_per_L, step.predicted.pH)) {
    const LevelUnit unit = sheets::unit_of(judged, type, units, in);
    const double level = unit.of(judged.found);
    if (!unit_before.empty() && unit.symbol != unit_before) text += " " + unit_before;
    text += (text.empty() ? "" : ", ") + judged.label + " " +
            fixed(level, judged.unit.empty() ? 2 : decimals_of(level));
    unit_before = unit.symbol;
  }
  return unit_before.empty() ? text : text + " " + unit_before;
}

}  // namespace

const dosing::Plan* shown_plan(const Worked& worked, const std::string& kind) {
  if (worked.own) {
    const auto& sheet = worked.own->sheet;
    return sheet && !sheet->plans.empty() ? &sheet->plans.front() : nullptr;
  }
  if (!worked.sheet || worked.sheet->plans.empty()) return nullptr;
  return &worked.sheet->plans[index_of_plan(*worked.sheet, kind)];
}

const bath::TankView* end_of(const Worked& worked) {
  const auto& [points, whole] = worked.path;
  return whole && points.size() > 1 ? &points.back().view : nullptr;
}

sheets::Medium medium_of(const Worked& worked, const Units& units) {
  const sheets::Medium now = worked.now ? units.medium_of(*worked.now) : sheets::Medium{};
  return worked.analysed ? sheets::medium_of(worked.analysed->analysis, now.water_kg_per_L) : now;
}

StateView state_view(const Worked& worked, const Units& units) {
  StateView view;
  if (!worked.shop || !worked.now) return view;
  const bath::Tank& tank = worked.shop->tank;
  const bath::BathType& type = worked.shop->type();
  const double pH = worked.analysed ? worked.analysed->analysis.pH : worked.now->pH;
  view.from = worked.analysed ? "from the readings above" : worked.read ? worked.read->from : "";
  const auto now = sheets::judge(tank, type, worked.now->quantity_g_per_L, pH);
  const bath::TankView* end = end_of(worked);
  const auto then = end ? sheets::judge(tank, type, end->quantity_g_per_L, end->pH) : now;
  const sheets::Medium in = medium_of(worked, units), in_then = end ? units.medium_of(*end) : in;
  for (std::size_t i = 0; i < now.size(); ++i) {
    const sheets::Judged& judged = now[i];
    const LevelUnit unit = sheets::unit_of(judged, type, units, in);
    const int decimals =
        judged.unit.empty() ? 2 : decimals_of(unit.of(std::max(judged.found, judged.aim->aim)));
    ComponentRow row;
    row.name = judged.label;
    row.unit = unit.symbol;
    row.strip = {judged.aim->low, judged.aim->aim, judged.aim->high, judged.found, std::nullopt, 0};
    if (end) {
      row.strip.predicted = then[i].found;
      row.predicted = fixed(sheets::unit_of(then[i], type, units, in_then).of(then[i].found), decimals);
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

namespace {

const dosing::Addition* of_chemical(const dosing::Plan& plan, const std::string& id) {
  const auto addition = std::ranges::find(plan.additions, id, &dosing::Addition::chemical);
  return addition == plan.additions.end() ? nullptr : &*addition;
}

/// What may be dragged: of the plan, or of the list a person made of it, with what the last check says it
/// costs.
std::vector<AdditionRow> amounts(const bath::Tank& tank, const dosing::Plan& planned,
                                 const std::optional<OwnList>& own, const dosing::Plan* checked,
                                 const Units& units) {
  std::vector<AdditionRow> rows;
  const auto add = [&](const std::string& name, const std::string& unit, double amount, double largest,
                       const std::string& cost) {
    const AmountUnit shown = units.amount_unit(unit);
    rows.push_back({name, shown.symbol, amount * shown.per_one, largest * shown.per_one, cost});
  };
  if (own ? own->take_out_L.has_value() : planned.decant_L > 0) {
    const double litres = own ? *own->take_out_L : planned.decant_L;
    add("bath taken out", "L", litres, 2 * std::max(planned.decant_L, litres),
        money(litres * tank.dosing.waste_price_per_L, tank.currency));
  }
  if (!own)
    for (const dosing::Addition& addition : planned.additions)
      add(addition.name, addition.unit, addition.amount, 2 * addition.amount,
          money(addition.cost, tank.currency));
  else
    for (const auto& [id, kg] : own->kg) {
      const matter::StockChemical* stock = stock_of(tank, id);
      if (!stock) {  // the tank file was changed meanwhile
        add(id + " (no longer on the shelf)", "kg", kg, kg, "");
        continue;
      }
      const dosing::Addition* before = of_chemical(planned, id);
      const dosing::Addition* priced = checked ? of_chemical(*checked, id) : nullptr;
      const double amount = stock->liquid ? kg / stock->kg_per_L : kg;
      constexpr double usual = 25;  // a bag
      add(stock->name, stock->liquid ? "L" : "kg", amount,
          before ? 2 * before->amount : std::max(usual, amount),
          priced && priced->kg > 0 ? money(priced->cost * kg / priced->kg, tank.currency) : "");
    }
  return rows;
}

std::vector<StepRow> steps_of(const dosing::Plan& plan, const bath::Tank& tank, const bath::BathType& type,
                              const Units& units) {
  std::vector<StepRow> rows;
  std::set<std::string> told;  // what to look at is said once, at the step it begins with
  for (const dosing::Step& step : plan.steps) {
    StepRow row;
    row.number = std::to_string(step.number);
    const std::string amount = units.amount(step.amount, step.unit);
    row.what = step.takes_out ? "take out " + amount + " of bath" : amount + " " + step.name;
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
    rows.push_back(std::move(row));
  }
  return rows;
}

/// Whether the plan may be signed for, or why not.
std::string verdict(const dosing::Plan* plan, bool checked, const work::Analysed& analysed) {
  if (!checked) return "the list is being checked";
  if (!plan || !plan->feasible) return "not as it stands: see what stops it";
  if (plan->additions.empty()) return "nothing to add";
  if (!analysed.analysis.suspects.empty()) return "a reading is suspect: settle that first";
  if (!analysed.changed_since.empty()) return "the log has later changes: analyse the tank as it is now";
  return "";
}

}  // namespace

AdditionsView additions_view(const Worked& worked, const std::string& chosen,
                             const std::optional<OwnList>& own, const Units& units) {
  AdditionsView view;
  if (!worked.shop || !worked.analysed || !worked.sheet || worked.sheet->plans.empty()) return view;
  const bath::Tank& tank = worked.shop->tank;
  const std::size_t index = index_of_plan(*worked.sheet, chosen);
  view.plan = static_cast<int>(index);
  view.edited = own.has_value();
  view.checked = worked.is_checked(own);
  for (const dosing::Plan& one : worked.sheet->plans)
    view.plans.push_back(
        one.kind + ", " + money(one.cost, tank.currency) +
        (one.chances ? ", " + fixed(100 * one.chances->in_every_window, 0) + " %" : std::string()));
  for (const bath::ShelfItem& item : tank.shelf) view.shelf.emplace_back(item.stock.id, item.stock.name);
  for (const std::string& id : matter::StockCatalogue::built_in().ids())
    if (!tank.on_shelf(id))
      view.shelf.emplace_back(id, stock_of(tank, id)->name + " (not on this tank's shelf)");
  const dosing::Plan* plan = shown_plan(worked, chosen);
  const dosing::Plan& planned = worked.sheet->plans[index];
  view.additions = amounts(tank, planned, own, plan, units);
  const dosing::AdditionSheet& sheet = worked.own && worked.own->sheet ? *worked.own->sheet : *worked.sheet;
  for (const dosing::Refusal& refusal : sheet.refused)
    view.refused.push_back(pretty_words(refusal.reason + " (" + refusal.rule + ")"));
  if (worked.own)
    for (const Problem& problem : worked.own->problems) view.refused.push_back(pretty_words(problem.text()));
  view.cautions = sheet.cautions;
  const std::string hindrance = verdict(plan, view.checked, *worked.analysed);
  view.ready = hindrance.empty();
  view.verdict = view.ready ? "ready: a second person approves it" : hindrance;
  if (!plan) return view;
  view.steps = steps_of(*plan, tank, worked.shop->type(), units);
  view.unmet = plan->unmet;
  view.conflicts = plan->conflicts;
  if (plan->chances)
    view.chance = fixed(100 * plan->chances->in_every_window, 0) + " % chance of ending inside every window" +
                  (plan->second_look ? "; worth a second look: " + pretty(plan->second_look->at) : "");
  return view;
}

}  // namespace bathwright::desktop
