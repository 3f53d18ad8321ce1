#include "views.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

namespace bathwright::desktop {
namespace {

using sheets::figure;
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

/// The line a problem of the typed readings names; 0 where it names none.
int line_of(const Problem& problem) {
  const std::size_t colon = problem.where.find(':');
  return colon == std::string::npos ? 0 : std::atoi(problem.where.c_str() + colon + 1);
}

/// The row whose block holds a line; -1 for none.
int row_at(int line, const std::vector<int>& line_of_row) {
  int found = -1;
  for (std::size_t row = 0; row < line_of_row.size(); ++row)
    if (line_of_row[row] > 0 && line_of_row[row] <= line) found = static_cast<int>(row);
  return found;
}

std::string without_place(const Problem& problem) {
  Problem told = problem;
  const std::size_t last = problem.where.rfind(' ');
  told.where = last == std::string::npos ? "" : problem.where.substr(last + 1);
  return told.text();
}

std::string room_words(double kg, double log10_room, bool covered) {
  if (!covered) return "";
  if (std::isfinite(kg)) return units::significant(kg, 2) + " kg";
  return units::significant(100 * std::pow(10, -log10_room), 2) + " %";
}

}  // namespace

const dosing::Plan* shown_plan(const Worked& worked, int plan) {
  if (worked.own && !worked.own->plans.empty()) return &worked.own->plans.front();
  if (!worked.sheet || worked.sheet->plans.empty()) return nullptr;
  return &worked.sheet->plans[std::min(static_cast<std::size_t>(plan), worked.sheet->plans.size() - 1)];
}

ReadingsView readings_view(const Draft& draft, const std::vector<int>& line_of_row, const Worked* worked) {
  ReadingsView view;
  view.volume = draft.volume;
  view.temperature = draft.temperature;
  view.pH = draft.pH;
  for (const DraftRow& row : draft.rows) {
    ReadingRow shown;
    shown.quantity = pretty(row.quantity);
    for (const std::string& method : row.methods)
      shown.methods.push_back(method.empty() ? "as a concentration" : method);
    shown.method = row.method;
    shown.sample = row.sample;
    shown.titrant = row.titrant;
    shown.burette = row.burette;
    shown.value = row.value;
    shown.is_value = row.is_value();
    view.rows.push_back(std::move(shown));
  }
  if (!worked) return view;
  if (worked->analysed)
    for (std::size_t i = 0; i < draft.rows.size(); ++i) {
      if (draft.rows[i].is_empty()) continue;
      for (const auto& level : worked->analysed->analysis.results)
        if (level.quantity == draft.rows[i].quantity)
          view.rows[i].result =
              figure(level.value.v) + " ± " + units::significant(level.standard_uncertainty.v, 2) + " g/L";
    }
  for (const Problem& problem : worked->problems) {
    const int row = row_at(line_of(problem), line_of_row);
    if (row >= 0)
      view.rows[static_cast<std::size_t>(row)].fault = without_place(problem);
    else
      view.faults.push_back(problem.text());
  }
  if (worked->analysed) {
    for (const auto& suspect : worked->analysed->analysis.suspects)
      view.suspects.push_back(suspect.what + ": " + suspect.reason + " " + suspect.try_this);
    for (const std::string& change : worked->analysed->changed_since) view.suspects.push_back(change);
  }
  return view;
}

StateView state_view(const Worked& worked, const dosing::Plan* plan) {
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
    const int decimals = judged.unit.empty() ? 2 : judged.found < 10 ? 2 : 1;
    ComponentRow row;
    row.name = judged.label;
    row.unit = judged.unit;
    row.strip = {judged.aim->low, judged.aim->aim, judged.aim->high, judged.found, std::nullopt, 0};
    if (plan && !plan->additions.empty()) row.strip.predicted = then[i].found;
    if (worked.analysed)
      for (const auto& level : worked.analysed->analysis.results)
        if (level.quantity == judged.aim->quantity) row.strip.u = level.standard_uncertainty.v;
    row.found = fixed(judged.found, decimals);
    row.aim = fmt::format("{:g}", judged.aim->aim);
    row.state = state_of(judged.standing);
    row.word = std::string(sheets::words(judged.standing));
    view.rows.push_back(std::move(row));
  }
  return view;
}

AdditionsView additions_view(const Worked& worked, int chosen,
                             const std::vector<std::pair<std::string, double>>& edited) {
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
  for (const dosing::Plan& one : worked.sheet->plans) view.plans.push_back(one.kind + ", " + money(one.cost));
  const dosing::Plan& planned =
      worked.sheet->plans[std::min(static_cast<std::size_t>(chosen), worked.sheet->plans.size() - 1)];
  for (const dosing::Addition& addition : planned.additions) {
    AdditionRow row{addition.name, addition.unit, addition.amount, 2 * addition.amount, ""};
    const double per_kg = addition.kg > 0 ? addition.amount / addition.kg : 1;
    for (const auto& [id, kg] : edited)
      if (id == addition.chemical) row.amount = kg * per_kg;
    row.cost = money(addition.amount > 0 ? addition.cost * row.amount / addition.amount : 0);
    view.additions.push_back(std::move(row));
  }
  for (const dosing::Step& step : plan->steps) {
    StepRow row;
    row.number = std::to_string(step.number);
    row.what = figure(step.amount) + " " + step.unit + " " + step.name;
    if (step.portions > 1) row.what += fmt::format(", {} of {}", step.portion, step.portions);
    row.how = step.how;
    for (const auto& judged : sheets::judge(tank, type, step.predicted.quantity_g_per_L, step.predicted.pH))
      row.then += judged.label + " " + fixed(judged.found, judged.unit.empty() ? 2 : 1) + ", ";
    row.then += fixed(step.predicted.volume_L, 0) + " L";
    if (step.wait_h > 0) row.wait = "wait " + figure(step.wait_h, 2) + " h, stirred";
    for (const dosing::Check& check : step.checks) {
      if (check.ok) continue;
      (check.stops ? row.stops : row.watch).push_back(check.name + ": " + check.detail);
    }
    row.checks = static_cast<int>(step.checks.size());
    row.refused = !row.stops.empty();
    view.steps.push_back(std::move(row));
  }
  const dosing::AdditionSheet& sheet = worked.own ? *worked.own : *worked.sheet;
  for (const dosing::Refusal& refusal : sheet.refused)
    view.refused.push_back(refusal.reason + " (" + refusal.rule + ")");
  view.cautions = sheet.cautions;
  view.unmet = plan->unmet;
  if (plan->probability_in_window)
    view.chance = fixed(100 * *plan->probability_in_window, 0) + " % chance of ending inside every window";
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

ChemistryView chemistry_view(const Worked& worked) {
  ChemistryView view;
  if (!worked.shop || !worked.now) return view;
  const bath::TankView& now = *worked.now;
  const bath::Chemistry& chemistry = worked.shop->chemistry;
  view.working_at = units::significant(chemistry.working_temperature().v, 3) + " °C";
  view.idle_at = units::significant(chemistry.idle_temperature().v, 3) + " °C";
  view.figures = {{"pH", fixed(now.pH, 2)},
                  {"ionic strength", figure(now.ionic_strength, 3) + " mol/kg"},
                  {"water activity", fixed(now.water_activity, 3)},
                  {"density", fixed(now.density_kg_per_L, 3) + " kg/L"}};
  constexpr std::size_t most_ions = 10;
  for (const bath::SpeciesView& species : now.species) {
    if (view.ions.size() == most_ions) break;
    view.ions.push_back({pretty(species.name), figure(species.molality, 3),
                         figure(std::pow(10, species.log10_activity), 3), figure(species.gamma, 3),
                         species.molality / now.species.front().molality});
  }
  for (const bath::Headroom& room : now.headroom) {
    SolidRow row;
    row.name = pretty(room.solid);
    row.working = room_words(room.working_kg, room.working_log10, room.covers_working);
    row.idle = room_words(room.idle_kg, room.idle_log10, room.covers_idle);
    row.working_share = room.covers_working ? std::pow(10, -room.working_log10) : 0;
    row.idle_share = room.covers_idle ? std::pow(10, -room.idle_log10) : 0;
    row.forms = row.working_share >= 1 || row.idle_share >= 1;
    view.solids.push_back(std::move(row));
  }
  const auto near = [](const SolidRow& row) { return std::max(row.working_share, row.idle_share); };
  std::ranges::stable_sort(view.solids, std::greater{}, near);
  if (worked.path.size() > 1) {
    const auto chart = [&](std::string title, std::string unit, auto&& value) {
      charts::Chart one;
      one.title = std::move(title);
      one.unit = std::move(unit);
      one.x_title = "kg added";
      charts::Series line{"", charts::Meaning::predicted, {}, {}};
      for (const PathPoint& point : worked.path)
        line.x.push_back(point.kg), line.y.push_back(value(point.view));
      one.lines.push_back(std::move(line));
      return one;
    };
    view.path.push_back(chart("pH", "", [](const bath::TankView& v) { return v.pH; }));
    view.path.back().least_height = 0.2;
    if (!now.headroom.empty()) {
      charts::Chart rooms =
          chart("nearest solid at " + view.idle_at, "% of saturation", [](const bath::TankView& v) {
            double nearest = 0;
            for (const auto& room : v.headroom)
              if (room.covers_idle && !room.slow) nearest = std::max(nearest, std::pow(10, -room.idle_log10));
            return 100 * nearest;
          });
      rooms.limits = {{100, true, "crystallises"}};
      view.path.push_back(std::move(rooms));
    }
  }
  view.doubts = now.warnings;
  return view;
}

}  // namespace bathwright::desktop
