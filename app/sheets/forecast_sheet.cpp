#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/forecast_sheet.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/sheets/tank_parts.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <filesystem>

namespace bathwright::sheets {
namespace {

using forecast::Day;

std::string day_of(const std::optional<double>& day) { return day ? fixed(*day, 1) : "not met"; }

/// "9.6 to 32.6", "9.6 or later", "not met".
std::string between(const forecast::LimitMet& limit) {
  if (!limit.day_p05) return "not met";
  return fixed(*limit.day_p05, 1) + (limit.day_p95 ? " to " + fixed(*limit.day_p95, 1) : " or later");
}

/// "18 Apr 2026", where the policy says when it starts.
std::string date_of(const ForecastPage& page, const std::optional<double>& day) {
  constexpr std::array months = {"Jan", "Feb", "Mar", "Apr", "May", "Jun",
                                 "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"};
  if (!day) return "";
  const auto date = page.forecast.policy().calendar.date(static_cast<int>(std::floor(*day)));
  if (!date) return "";
  return std::to_string(static_cast<unsigned>(date->day())) + ' ' +
         months[static_cast<unsigned>(date->month()) - 1] + ' ' +
         std::to_string(static_cast<int>(date->year()));
}

/// "day 41 (18 Apr 2026)".
std::string day_and_date(const ForecastPage& page, int day) {
  const std::string date = date_of(page, day);
  return "day " + std::to_string(day) + (date.empty() ? "" : " (" + date + ')');
}

std::string per_cent(double share) { return fixed(100 * share, 0) + " %"; }

/// At most seven days of a run, evenly spread, the first and the last among them.
std::vector<std::size_t> shown_days(std::size_t count) {
  constexpr std::size_t most = 7;
  const std::size_t rows = std::min(most, count);
  std::vector<std::size_t> days;
  for (std::size_t i = 0; i < rows; ++i) days.push_back(rows == 1 ? 0 : i * (count - 1) / (rows - 1));
  return days;
}

/// Quantities whose level is not always 0, as many as a page is wide.
std::vector<std::size_t> shown_quantities(const forecast::Run& run, const bath::BathType& type) {
  constexpr std::size_t most = 6;
  std::vector<std::size_t> shown;
  for (std::size_t q = 0; q < type.quantities.size() && shown.size() < most; ++q)
    if (!type.quantities[q].salt_view &&
        std::ranges::any_of(run.days, [&](const Day& d) { return d.quantity_g_per_L[q] > 1e-9; }))
      shown.push_back(q);
  return shown;
}

Lines levels_by_day(const ForecastPage& page) {
  const bath::BathType& type = page.forecast.chemistry().type();
  const auto quantities = shown_quantities(page.run, type);
  std::vector<Column> columns = {{"day", Align::number}};
  for (const std::size_t q : quantities) columns.push_back({pretty(type.quantities[q].id), Align::number});
  columns.push_back({"pH", Align::number});
  Table table(columns);
  for (const std::size_t d : shown_days(page.run.days.size())) {
    const Day& day = page.run.days[d];
    std::vector<std::string> row = {std::to_string(day.day)};
    for (const std::size_t q : quantities) row.push_back(figure(day.quantity_g_per_L[q], 3));
    row.push_back(std::isnan(day.pH) ? "" : fixed(day.pH, 2));
    table.add(row);
  }
  if (page.steady_state) {
    std::vector<std::string> row = {"settled"};
    for (const std::size_t q : quantities) row.push_back(figure((*page.steady_state)[q], 3));
    row.emplace_back();
    table.add(row);
  }
  return table.lines();
}

Lines limits_table(const ForecastPage& page) {
  const bool sampled = page.bands != nullptr;
  const bool dated = page.forecast.policy().calendar.starts.has_value();
  std::vector<Column> columns = {{"limit"}, {"day", Align::number}};
  if (dated) columns.push_back({"date"});
  if (sampled) columns.push_back({"5 to 95 %"}), columns.push_back({"chance", Align::number});
  columns.push_back({"why"});
  Table table(columns);
  for (const auto& limit : page.limits) {
    if (!limit.day && limit.share == 0) continue;
    std::vector<std::string> row = {limit.name, day_of(limit.day)};
    if (dated) row.push_back(date_of(page, limit.day));
    if (sampled) {
      row.push_back(between(limit));
      row.push_back(per_cent(limit.share));
    }
    row.emplace_back(forecast::name(limit.cause));
    table.add(row);
  }
  return table.empty() ? Lines{"  None within " + std::to_string(page.run.days.back().day) + " days."}
                       : table.lines();
}

/// What brings and takes the quantity of a limit, the largest first: "deposition 6.6, drag-out -0.04 kg".
std::string turnover_of(const ForecastPage& page, const std::string& quantity) {
  const auto& all = page.forecast.chemistry().type().quantities;
  const auto at =
      static_cast<std::size_t>(std::ranges::find(all, quantity, &bath::Quantity::id) - all.begin());
  const double days = std::max(1, page.run.days.back().day);
  auto flows = page.run.ledger.flows;
  std::ranges::stable_sort(flows, std::greater{}, [&](const auto& flow) { return std::abs(flow.kg[at]); });
  std::string text;
  constexpr std::size_t most = 3;
  for (std::size_t f = 0; f < std::min(most, flows.size()); ++f)
    if (std::abs(flows[f].kg[at]) > 1e-3 * std::abs(flows.front().kg[at]))
      text += (text.empty() ? "" : ", ") + flows[f].name + ' ' + figure(1000 * flows[f].kg[at] / days, 3);
  return text;
}

void say_what_holds(Lines& lines, const ForecastPage& page) {
  for (const BleedToHold& bleed : page.bleeds) {
    std::string text = "  To hold " + bleed.limit + ": ";
    if (bleed.litres_per_day)
      text += "bleed " + figure(*bleed.litres_per_day, 3) + " L a day more, " +
              figure(100 * *bleed.litres_per_day / page.tank.working_volume.v, 2) + " % of the tank.";
    else
      text += "no bleed was found. " + bleed.why_no_bleed;
    if (!bleed.why_no_load.empty())
      text += " The work that it carries was not found: " + bleed.why_no_load;
    else if (bleed.load)
      text += *bleed.load == 0
                  ? " As it is bled now it carries no work."
                  : " As it is bled now it carries " + figure(100 * *bleed.load, 2) + " % of this work.";
    say(lines, text, 2);
  }
}

void say_influences(Lines& lines, const ForecastPage& page) {
  if (page.sensitivity.empty()) return;
  constexpr std::size_t most_limits = 3, most_inputs = 3;
  Table table({{"limit"}, {"input"}, {"±", Align::number}, {"moves it, days", Align::number}});
  for (std::size_t l = 0; l < std::min(most_limits, page.sensitivity.size()); ++l) {
    const auto& of_limit = page.sensitivity[l];
    for (std::size_t i = 0; i < std::min(most_inputs, of_limit.influences.size()); ++i) {
      const auto& one = of_limit.influences[i];
      table.add({i == 0 ? of_limit.limit : "", one.input, per_cent(one.u_rel), fixed(one.days, 1)});
    }
  }
  if (table.empty()) return;
  heading(lines, "What the days hang on");
  append(lines, table.lines());
}

void say_cost(Lines& lines, const ForecastPage& page) {
  heading(lines, "Cost and waste, a day");
  const forecast::Day& last = page.run.days.back();
  const double days = std::max(1, last.day);
  Table table({{"chemical"}, {"kg", Align::number}, {page.tank.currency, Align::number}});
  auto chemicals = page.run.ledger.chemicals;
  std::ranges::stable_sort(chemicals, std::greater{}, &forecast::Ledger::Chemical::cost);
  for (const auto& one : chemicals)
    if (one.kg > 0) table.add({one.stock, figure(one.kg / days, 3), fixed(one.cost / days, 2)});
  if (!table.empty()) {
    table.add({"all", "", fixed(last.cost / days, 2)});
    append(lines, table.lines());
  }
  say(lines,
      "  Waste " + figure(last.waste_L / days, 3) + " L, drag-out " + figure(last.drag_out_L / days, 3) +
          " L, water to fill up " + figure(last.top_up_L / days, 3) + " L." +
          (last.turnovers > 0 ? " Metal turnovers " + fixed(last.turnovers, 2) + " in all." : ""),
      2);
  for (const auto& metal : page.run.ledger.metals)
    if (metal.dragged_kg + metal.bled_kg > 0)
      say(lines,
          "  " + metal.element + " lost: drag-out " + figure(1000 * metal.dragged_kg / days, 3) +
              " g, bleed " + figure(1000 * metal.bled_kg / days, 3) + " g" +
              (metal.cost > 0 ? ", worth " + figure(metal.cost / days, 3) + ' ' + page.tank.currency : "") +
              '.',
          2);
}

void say_rinses(Lines& lines, const ForecastPage& page) {
  const forecast::Rinsed& rinsed = page.run.rinsed;
  if (rinsed.stages.empty()) return;
  const bath::BathType& type = page.forecast.chemistry().type();
  heading(lines, "Rinses on the last day, g/L");
  const auto quantities = shown_quantities(page.run, type);
  std::vector<Column> columns = {{"rinse"}};
  for (const std::size_t q : quantities) columns.push_back({pretty(type.quantities[q].id), Align::number});
  Table table(columns);
  const auto row = [&](const std::string& name, const std::vector<double>& values, double times) {
    std::vector<std::string> cells = {name};
    for (const std::size_t q : quantities) cells.push_back(figure(times * values[q], 3));
    table.add(cells);
  };
  for (const auto& stage : rinsed.stages) row(stage.name, stage.g_per_L, 1);
  if (rinsed.waste_L_per_day > 0) {
    row("to treatment, g a day", rinsed.kg_per_day, 1000);
    row("to treatment, g/L", rinsed.g_per_L, 1);
  }
  append(lines, table.lines());
  say(lines,
      "  To treatment " + figure(rinsed.waste_L_per_day, 3) + " L a day" +
          (rinsed.returned_L_per_day > 0
               ? "; back to the tank " + figure(rinsed.returned_L_per_day, 3) + " L a day."
               : "."),
      2);
}

void say_policies(Lines& lines, const ForecastPage& page) {
  if (page.policies.empty()) return;
  heading(lines, "Policies side by side, a day");
  Table table({{"policy"},
               {"chemicals", Align::number},
               {"waste", Align::number},
               {page.tank.currency + " in all", Align::number},
               {"waste L", Align::number},
               {"first limit met"}});
  for (const PolicySummary& one : page.policies) {
    const forecast::Summary& s = one.summary;
    table.add({std::filesystem::path(one.file).stem().string(), fixed(s.cost, 2), fixed(s.waste_cost, 2),
               fixed(s.cost + s.waste_cost, 2), figure(s.waste_L, 3),
               s.holds ? "none in " + std::to_string(one.horizon_days) + " days"
                       : s.met.front().name + ", day " + fixed(*s.met.front().day, 1)});
  }
  append(lines, table.lines());
  const PolicySummary* best = cheapest_that_holds(page.policies);
  say(lines,
      best ? "  Cheapest that holds every limit: " + best->file + "." : "  None of them holds every limit.",
      2);
}

}  // namespace

std::string iso_date(const forecast::Policy& policy, const std::optional<double>& day) {
  if (!day) return "";
  const auto date = policy.calendar.date(static_cast<int>(std::floor(*day)));
  if (!date) return "";
  return fmt::format("{:04}-{:02}-{:02}", static_cast<int>(date->year()),
                     static_cast<unsigned>(date->month()), static_cast<unsigned>(date->day()));
}

const PolicySummary* cheapest_that_holds(const std::vector<PolicySummary>& policies) {
  const PolicySummary* best = nullptr;
  const auto all = [](const PolicySummary& one) { return one.summary.cost + one.summary.waste_cost; };
  for (const PolicySummary& one : policies)
    if (one.summary.holds && (!best || all(one) < all(*best))) best = &one;
  return best;
}

Lines forecast_sheet(const ForecastPage& page) {
  Lines lines;
  const Day& last = page.run.days.back();
  tank_title(lines, page.tank, page.tank.working_volume.v, page.tank.temperature);
  say(lines, deferral);
  const std::string from = date_of(page, 0);
  say(lines, "Policy: " + page.policy_file + ", " + std::to_string(last.day) + " days" +
                 (from.empty() ? "" : " from " + from) + ". State: " + page.state_from + ".");
  if (page.bands)
    say(lines, std::to_string(page.bands->samples) +
                   " samples of what the policy and the bath type state as uncertain.");
  for (const std::string& note : page.forecast.notes()) say(lines, "Not counted: " + note + '.');
  if (!page.run.ended.empty()) stops(lines, {"it ends before its horizon: " + page.run.ended.front().text()});
  if (page.run.beyond)
    stops(lines, {"beyond what the constants describe from " + day_and_date(page, page.run.beyond->day) +
                  " on: " + page.run.beyond->why + ". Neither pH nor solubility is told from there."});
  if (page.run.indicative && (!page.run.beyond || page.run.indicative->day < page.run.beyond->day))
    say(lines, "pH and solubility are indicative only from " + day_and_date(page, page.run.indicative->day) +
                   " on: " + page.run.indicative->why + '.');
  heading(lines, "Limits met");
  append(lines, limits_table(page));
  std::vector<std::string> told;
  for (const auto& limit : page.limits) {
    if (limit.quantity.empty() || !limit.day || std::ranges::count(told, limit.quantity) > 0) continue;
    told.push_back(limit.quantity);
    say(lines,
        "  " + page.forecast.chemistry().type().quantity(limit.quantity)->label +
            ", g a day: " + turnover_of(page, limit.quantity) + '.',
        2);
  }
  say_what_holds(lines, page);
  say_influences(lines, page);
  heading(lines, "Levels by day, g/L");
  append(lines, levels_by_day(page));
  if (!page.steady_state) say(lines, "  It does not settle: " + page.why_unsettled + ".", 2);
  say_cost(lines, page);
  say_rinses(lines, page);
  say_policies(lines, page);
  return lines;
}

}  // namespace bathwright::sheets
