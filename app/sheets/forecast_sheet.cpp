#include <algorithm>
#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/forecast_sheet.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/sheets/tank_parts.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

namespace bathwright::sheets {
namespace {

using forecast::Day;

std::string day_of(const std::optional<double>& day) { return day ? fixed(*day, 1) : "not met"; }

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
    row.push_back(fixed(day.pH, 2));
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
  std::vector<Column> columns = {{"limit"}, {sampled ? "day, median" : "day", Align::number}};
  if (sampled) columns.push_back({"5 to 95 %"}), columns.push_back({"chance", Align::number});
  Table table(columns);
  for (const auto& limit : page.limits) {
    if (!limit.day_p50 && !limit.day_p05 && limit.share == 0) continue;
    std::vector<std::string> row = {limit.name, day_of(limit.day_p50)};
    if (sampled) {
      row.push_back(day_of(limit.day_p05) + " to " + day_of(limit.day_p95));
      row.push_back(fixed(100 * limit.share, 0) + " %");
    }
    table.add(row);
  }
  return table.empty()
             ? Lines{"  None within " + std::to_string(page.forecast.policy().horizon_days) + " days."}
             : table.lines();
}

}  // namespace

Lines forecast_sheet(const ForecastPage& page) {
  Lines lines;
  const Day& last = page.run.days.back();
  tank_title(lines, page.tank, page.tank.working_volume.v, page.tank.temperature);
  say(lines, deferral);
  say(lines, "Policy: " + page.policy_file + ", " + std::to_string(last.day) +
                 " days. State: " + page.state_from + ".");
  if (page.bands)
    say(lines, std::to_string(page.bands->samples) +
                   " samples of what the policy and the bath type state as uncertain.");
  heading(lines, "Limits met");
  append(lines, limits_table(page));
  for (const BleedToHold& bleed : page.bleeds)
    say(lines,
        "  To hold " + bleed.limit + ": bleed " + figure(bleed.litres_per_day, 3) + " L a day more, " +
            figure(100 * bleed.litres_per_day / page.tank.working_volume.v, 2) + " % of the tank.",
        2);
  heading(lines, "Levels by day, g/L");
  append(lines, levels_by_day(page));
  if (!page.steady_state) say(lines, "  It does not settle: " + page.why_unsettled + ".", 2);
  heading(lines, "Cost and waste");
  say(lines,
      "  Chemicals " + figure(last.cost, 4) + " " + page.tank.currency + ", waste " +
          figure(last.waste_L, 3) + " L, drag-out " + figure(last.drag_out_L, 3) + " L, water " +
          figure(last.top_up_L, 3) + " L" +
          (last.turnovers > 0 ? ", metal turnovers " + fixed(last.turnovers, 2) : "") + ".",
      2);
  return lines;
}

}  // namespace bathwright::sheets
