#include "views.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <bathwright/sheets/log_sheet.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/units/show.hpp>
#include <chrono>
#include <cmath>
#include <set>

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

/// A sentence with its formulae as people see them.
std::string pretty_words(const std::string& sentence) {
  std::string out, word;
  const auto end_word = [&] {
    std::string tail;
    while (!word.empty() && (word.back() == ':' || word.back() == ',' || word.back() == ';'))
      tail.insert(tail.begin(), word.back()), word.pop_back();
    const bool may_be_formula = !word.empty() && word.front() >= 'A' && word.front() <= 'Z' &&
                                word.find_first_of("0123456789^") != std::string::npos;
    out += (may_be_formula ? pretty(word) : word == "degC" ? "°C" : word) + tail;
    word.clear();
  };
  for (const char c : sentence) {
    if (c == ' ') {
      end_word();
      out += c;
    } else {
      word += c;
    }
  }
  end_word();
  return out;
}

/// "edta nickel" of the id "edta-nickel".
std::string method_words(std::string id) {
  if (id.empty()) return "a concentration";
  std::ranges::replace(id, '-', ' ');
  return id;
}

/// As short as its column is narrow: powers of ten where zeros would fill it.
std::string small_figure(double value) {
  return value > 0 && value < 1e-3 ? fmt::format("{:.2e}", value) : figure(value, 3);
}

std::string room_words(double kg, double log10_room, bool covered, const Units& units) {
  if (!covered) return "";
  if (std::isfinite(kg)) return units.mass(kg, 2);
  return units::significant(100 * std::pow(10, -log10_room), 2) + " %";
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

/// A chart of levels, volumes or masses in the units that are shown.
void convert(charts::Chart& chart, const bath::BathType* type, const Units& units) {
  LevelUnit unit{chart.unit, 1};
  if (const bath::Quantity* quantity = type ? type->quantity(chart.level_of) : nullptr)
    unit = units.level(*quantity, nullptr);
  if (chart.unit == "L") unit = {units.volume_symbol(), units.volume_value(1)};
  if (unit.symbol == chart.unit) return;
  const double times = unit.per_g_per_L;
  const auto scale = [&](std::vector<double>& values) {
    for (double& value : values) value *= times;
  };
  chart.unit = unit.symbol;
  chart.least_height *= times;
  for (auto& line : chart.lines) scale(line.y);
  for (auto& band : chart.bands) scale(band.low), scale(band.high);
  for (auto& found : chart.found) found.y *= times, found.u *= times;
  for (auto& limit : chart.limits) {
    limit.at *= times;
    limit.name = "limit " + fmt::format("{:.4g}", limit.at);
  }
  if (chart.window)
    chart.window = {times * chart.window->low, times * chart.window->aim, times * chart.window->high};
}

/// Why days that are not today are in g/L, where they are.
constexpr const char* needs_density =
    "Levels of other days are in g/L: the unit chosen in the settings needs the density of each day, which is not "
    "kept.";

}  // namespace

const dosing::Plan* shown_plan(const Worked& worked, int plan) {
  if (worked.own && !worked.own->plans.empty()) return &worked.own->plans.front();
  if (!worked.sheet || worked.sheet->plans.empty()) return nullptr;
  return &worked.sheet->plans[std::min(static_cast<std::size_t>(plan), worked.sheet->plans.size() - 1)];
}

ReadingsView readings_view(const Draft& draft, const std::vector<int>& line_of_row, const Worked* worked,
                           const Units& units) {
  ReadingsView view;
  view.sampled = draft.sampled.substr(0, draft.sampled.rfind(':'));
  std::ranges::replace(view.sampled, 'T', ' ');
  view.volume = draft.volume;
  view.temperature = draft.temperature;
  view.pH = draft.pH;
  for (const DraftRow& row : draft.rows) {
    ReadingRow shown;
    shown.quantity = pretty(row.quantity);
    for (const std::string& method : row.methods) shown.methods.push_back(method_words(method));
    shown.method = row.method;
    shown.sample = row.sample;
    shown.titrant = row.titrant;
    shown.burette = row.burette;
    shown.value = row.value;
    shown.is_value = row.is_value();
    shown.value_unit = "g/L";
    if (const bath::Quantity* quantity =
            worked && worked->shop ? worked->shop->type().quantity(row.quantity) : nullptr)
      shown.value_unit = units.typed(*quantity);
    view.rows.push_back(std::move(shown));
  }
  if (!worked) return view;
  if (worked->analysed)
    for (std::size_t i = 0; i < draft.rows.size(); ++i) {
      if (draft.rows[i].is_empty()) continue;
      for (const auto& level : worked->analysed->analysis.results)
        if (const bath::Quantity* quantity = worked->shop->type().quantity(level.quantity);
            quantity && level.quantity == draft.rows[i].quantity) {
          const LevelUnit unit = units.level(*quantity, worked->now ? &*worked->now : nullptr);
          view.rows[i].result = figure(unit.of(level.value.v)) + " ± " +
                                units::significant(unit.of(level.standard_uncertainty.v), 2) + " " +
                                unit.symbol;
        }
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
      view.suspects.push_back(pretty_words(suspect.what + ": " + suspect.reason + " " + suspect.try_this));
    for (const std::string& change : worked->analysed->changed_since) view.suspects.push_back(change);
  }
  return view;
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

ChemistryView chemistry_view(const Worked& worked, const Units& units) {
  ChemistryView view;
  if (!worked.shop || !worked.now) return view;
  const bath::TankView& now = *worked.now;
  const bath::Chemistry& chemistry = worked.shop->chemistry;
  view.working_at = units.temperature(chemistry.working_temperature().v);
  view.idle_at = units.temperature(chemistry.idle_temperature().v);
  view.figures = {{"pH", fixed(now.pH, 2)},
                  {"ionic strength", figure(now.ionic_strength, 3) + " mol/kg"},
                  {"water activity", fixed(now.water_activity, 3)},
                  {"density", units.density(now.density_kg_per_L)}};
  constexpr std::size_t most_ions = 10;
  for (const bath::SpeciesView& species : now.species) {
    if (view.ions.size() == most_ions) break;
    view.ions.push_back({species.name, pretty(species.name), small_figure(species.molality),
                         small_figure(std::pow(10, species.log10_activity)), figure(species.gamma, 3),
                         species.molality / now.species.front().molality});
  }
  for (const bath::Headroom& room : now.headroom) {
    SolidRow row;
    row.id = room.solid;
    row.name = pretty(room.solid);
    row.working = room_words(room.working_kg, room.working_log10, room.covers_working, units);
    row.idle = room_words(room.idle_kg, room.idle_log10, room.covers_idle, units);
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
      const AmountUnit mass = units.amount_unit("kg");
      one.x_title = mass.symbol + " added";
      charts::Series line{"", charts::Meaning::predicted, {}, {}};
      for (const PathPoint& point : worked.path)
        line.x.push_back(point.kg * mass.per_one), line.y.push_back(value(point.view));
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
  for (const std::string& warning : now.warnings) view.doubts.push_back(pretty_words(warning));
  return view;
}

LineView line_view(const ShopFolder& shop, const LogNow& log, int selected) {
  LineView view;
  view.selected = selected;
  for (const bath::Tank& tank : *shop.tanks) {
    TankOnLine shown;
    const std::size_t space = tank.name.find(' ');
    shown.name = tank.name.substr(0, space);
    if (space != std::string::npos) shown.kind = tank.name.substr(space + 1);
    const double mark = tank.working_volume.v;
    shown.vessel = {1, tank.freeboard.v / mark, false};
    shown.word = "not analysed";
    const auto seen = log.seen.find(tank.name);
    if (seen != log.seen.end()) {
      const LastSeen& last = seen->second;
      if (last.volume_L) {
        shown.vessel.level = *last.volume_L / mark;
        shown.vessel.level_known = true;
        shown.word = "in window";
      }
      if (!last.high.empty())
        shown.state = charts::State::act, shown.word = pretty(last.high.front()) + " high";
      if (!last.low.empty()) shown.state = charts::State::act, shown.word = "add " + pretty(last.low.front());
      if (!last.stop.empty())
        shown.state = charts::State::stop, shown.word = "stop: " + pretty(last.stop.front());
      if (last.slip_open && shown.state != charts::State::stop)
        shown.state = charts::State::act, shown.word = "slip is open";
    }
    view.tanks.push_back(std::move(shown));
    view.shop = tank.shop;
  }
  return view;
}

SlipView slip_view(const std::optional<work::OpenSlip>& slip, const std::optional<shifts::Calendar>& calendar,
                   const Units& units) {
  SlipView view;
  if (!slip) return view;
  view.number = slip->seq;
  view.issued = "issued " + sheets::local_time(slip->at, calendar) + " by " + slip->by;
  view.approved_by_second = !slip->approved_by.empty();
  view.approved = view.approved_by_second ? "approved by " + slip->approved_by
                                          : "nobody has approved it yet: a second person reads it and signs";
  view.all_done = true;
  for (const work::SlipStep& step : slip->steps) {
    SlipView::Row row;
    row.step = step.number;
    row.what = std::to_string(step.number) + "  " + units.amount(step.amount, step.unit) + " " + step.name;
    if (!units.as_on_paper(step.unit))
      row.what += " (" + sheets::measured(step.amount, step.unit) + " on paper)";
    if (step.portions > 1) row.what += fmt::format(", {} of {}", step.portion, step.portions);
    row.how = step.how;
    if (step.wait_h > 0) row.wait = "then wait " + sheets::waiting(step.wait_h) + ", stirred";
    if (step.done_as)
      row.done = "entry " + std::to_string(*step.done_as) + ", " + sheets::local_time(step.done_at, calendar);
    view.all_done = view.all_done && step.done_as.has_value();
    view.steps.push_back(std::move(row));
  }
  return view;
}

namespace {

/// The first thing an entry says, for a row of a table.
std::string first_words(const logbook::Entry& entry) {
  const work::Json body = work::Json::parse(entry.body, nullptr, false);
  if (!body.is_object()) return "";
  for (const char* key : {"note", "reason", "outcome", "name"})
    if (body.contains(key) && body[key].is_string()) return body[key].get<std::string>();
  if (body.contains("chemical") && body["chemical"].is_string()) {
    const work::Json amount = body.value("amount", work::Json());
    return (amount.is_number()   ? figure(amount.get<double>()) + " " + body.value("unit", "")
            : amount.is_string() ? amount.get<std::string>()
                                 : std::string()) +
           " " + body["chemical"].get<std::string>();
  }
  if (body.contains("results") && body["results"].is_array()) {
    std::string text;
    for (const work::Json& result : body["results"])
      if (result.is_object() && result.value("value", work::Json()).is_number())
        text += (text.empty() ? "" : ", ") + pretty(result.value("quantity", "")) + " " +
                figure(result["value"].get<double>(), 3);
    return text;
  }
  const work::Json* plan = body.contains("plan") ? &body["plan"] : nullptr;
  if (!plan && body.contains("plans") && body["plans"].is_array() && !body["plans"].empty())
    plan = &body["plans"].front();
  if (plan && plan->is_object() && plan->contains("additions") && (*plan)["additions"].is_array()) {
    std::string text;
    for (const work::Json& one : (*plan)["additions"])
      if (one.is_object() && one.value("amount", work::Json()).is_number())
        text += (text.empty() ? "" : ", ") + figure(one["amount"].get<double>(), 3) + " " +
                one.value("unit", "") + " " + one.value("chemical", "");
    return text;
  }
  return "";
}

LogRow row_of(const logbook::Entry& entry, const std::optional<shifts::Calendar>& calendar) {
  LogRow row;
  row.number = entry.seq;
  row.seq = std::to_string(entry.seq);
  row.at = sheets::local_time(entry.happened.empty() ? entry.at : entry.happened, calendar);
  row.kind = std::string(logbook::name(entry.kind));
  row.tank = entry.tank;
  row.by = entry.by + (entry.witness.empty() ? "" : " and " + entry.witness);
  row.words = first_words(entry);
  if (entry.about)
    row.words = "of entry " + std::to_string(*entry.about) + (row.words.empty() ? "" : ": " + row.words);
  return row;
}

}  // namespace

ShiftView shift_view(const LogNow& log, shifts::UtcTime now) {
  ShiftView view;
  if (!log.calendar || !log.told) {
    view.shift = "No shifts are set";
    view.clock = "Settings has them: the strip then shows this shift's work and what is due.";
    return view;
  }
  const shifts::ShiftSpan& shift = log.told->shift;
  const std::string from = log.calendar->zone().local_text(shift.from),
                    to = log.calendar->zone().local_text(shift.to);
  view.shift = shift.label;
  view.clock = from.substr(from.size() - 5) + " to " + to.substr(to.size() - 5) + ", now " +
               log.calendar->zone().local_text(now).substr(11);
  const auto share = [&](shifts::UtcTime time) {
    return std::chrono::duration<double>(time - shift.from) /
           std::chrono::duration<double>(shift.to - shift.from);
  };
  view.elapsed = std::clamp(share(now), 0.0, 1.0);
  for (auto entry = log.told->entries.rbegin(); entry != log.told->entries.rend(); ++entry) {
    view.entries.push_back(row_of(*entry, log.calendar));
    if (const auto time = logbook::utc_from_iso(entry->at)) view.entries.back().place = share(*time);
  }
  for (const auto& [slip, approved_by, must_be_approved] : log.told->open_slips)
    view.open.push_back("slip " + std::to_string(slip.seq) + " of " +
                        slip.tank.substr(0, slip.tank.find(' ')) +
                        (must_be_approved && approved_by.empty() ? ", waits for approval" : ""));
  for (const shifts::Due& due : log.told->due)
    view.due.push_back(due.tank.substr(0, due.tank.find(' ')) + " " +
                       pretty(due.what.substr(due.what.rfind(' ') + 1)) + (due.overdue ? " (overdue)" : ""));
  return view;
}

LogView log_view(const LogNow& log) {
  LogView view;
  for (const logbook::Entry& entry : log.entries) view.rows.push_back(row_of(entry, log.calendar));
  view.shown_text = log.entry_text;
  for (const Problem& problem : log.problems) view.faults.push_back(problem.text());
  return view;
}

ForecastView forecast_view(const Forecasted& told, const Units& units) {
  ForecastView view;
  for (const Problem& problem : told.problems) view.faults.push_back(problem.text());
  if (!told.problems.empty()) return view;
  view.from = "from " + told.from;
  const Levers& levers = told.levers;
  constexpr double longest_horizon = 730;
  view.levers = {{"bleed", units.volume(levers.bleed_L_per_day) + "/day", levers.bleed_L_per_day, 0, 0},
                 {"drag-out", figure(levers.drag_out, 3) + " times", levers.drag_out, 0.2, 3},
                 {"work", figure(levers.load, 3) + " times", levers.load, 0, 3},
                 {"horizon", std::to_string(levers.horizon_days) + " days",
                  static_cast<double>(levers.horizon_days), 14, longest_horizon}};
  for (std::size_t i = 0; i < told.limits.size(); ++i) {
    const auto& limit = told.limits[i];
    LimitRow row;
    row.name = pretty_words(limit.name);
    if (const bath::Quantity* quantity = told.shop->type().quantity(limit.quantity)) {
      const LevelUnit unit = units.level(*quantity, nullptr);
      row.name = quantity->label + (limit.from_below ? " above " : " below ") +
                 figure(unit.of(limit.g_per_L)) + " " + unit.symbol;
    }
    row.why = std::string(forecast::name(limit.cause));
    if (limit.day) {
      row.state = charts::State::act;
      row.when = (*limit.day < 0.5 ? std::string("now") : "day " + fixed(*limit.day, 0)) +
                 (told.dates[i].empty() ? "" : ", " + told.dates[i]);
      if (told.sampled && limit.day_p05 && limit.day_p95)
        row.span = fixed(*limit.day_p05, 0) + " to " + fixed(*limit.day_p95, 0);
    } else {
      row.when = limit.share > 0 ? fixed(100 * limit.share, 0) + " % of the samples"
                                 : "not in " + std::to_string(levers.horizon_days) + " days";
    }
    view.limits.push_back(std::move(row));
  }
  std::ranges::stable_sort(view.limits, [](const LimitRow& a, const LimitRow& b) {
    return a.state == charts::State::act && b.state != charts::State::act;
  });
  const auto money = [&](double value) {
    return fixed(value, 2) + (told.currency.empty() ? "" : " " + told.currency);
  };
  view.figures = {{"chemicals and water a day", money(told.summary.cost)},
                  {"waste a day", units.volume(told.summary.waste_L) + ", " + money(told.summary.waste_cost)},
                  {"water a day", units.volume(told.summary.top_up_L)},
                  {"metal lost a day", units.mass(told.summary.metal_lost_kg, 3)}};
  double most_bleed = 0;
  for (const auto& bleed : told.bleeds) {
    if (!bleed.litres_per_day) continue;
    view.figures.emplace_back("bleed that holds " + told.shop->type().quantity(bleed.quantity)->label,
                              units.volume(*bleed.litres_per_day) + " more a day");
    most_bleed = std::max(most_bleed, levers.bleed_L_per_day + *bleed.litres_per_day);
  }
  constexpr double usual_bleed = 200;
  view.levers[0].high = std::max({usual_bleed, 2 * levers.bleed_L_per_day, 1.5 * most_bleed});
  view.charts = told.page.charts;
  for (charts::Chart& chart : view.charts) convert(chart, &told.shop->type(), units);
  view.may_print = told.sheet.has_value();
  view.notes = told.notes;
  if (units.only_for_now()) view.notes.insert(view.notes.begin(), needs_density);
  return view;
}

TrendsView trends_view(const TrendsAnswer& answer, const bath::BathType* type, const Units& units) {
  TrendsView view{answer.empty, answer.charts, answer.findings, {}};
  for (charts::Chart& chart : view.charts) convert(chart, type, units);
  if (units.only_for_now() && !view.charts.empty()) view.notes.emplace_back(needs_density);
  return view;
}

}  // namespace bathwright::desktop
