#include <fmt/format.h>

#include <algorithm>
#include <bathwright/sheets/names.hpp>

#include "views.hpp"
#include "words.hpp"

namespace bathwright::desktop {
namespace {

using sheets::figure;
using sheets::fixed;

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
