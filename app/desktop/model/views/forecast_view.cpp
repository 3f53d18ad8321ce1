#include <fmt/format.h>

#include <algorithm>
#include <bathwright/sheets/names.hpp>

#include "views.hpp"
#include "words.hpp"

namespace bathwright::desktop {
namespace {

using sheets::figure;
using sheets::fixed;

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
  const sheets::ForecastPage page = told.in(units);
  for (std::size_t i = 0; i < told.limits.size(); ++i) {
    const auto& limit = told.limits[i];
    LimitRow row;
    row.name = pretty_words(sheets::limit_words(page, limit));
    row.why = std::string(forecast::name(limit.cause));
    if (limit.day) {
      row.state = charts::State::act;
      row.when = (*limit.day < 0.5 ? std::string("now") : "day " + fixed(*limit.day, 0)) +
                 (told.dates[i].empty() ? "" : ", " + told.dates[i]);
      if (told.bands && limit.day_p05 && limit.day_p95)
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
  const auto money = [&](double value) { return sheets::money(value, told.currency); };
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
  view.charts = sheets::forecast_charts(page).charts;
  view.may_print = told.complete;
  view.notes = told.notes;
  return view;
}

TrendsView trends_view(const TrendsAnswer& answer, const bath::BathType* type, const Units& units) {
  TrendsView view{answer.empty, {}, answer.findings, {}};
  if (!answer.trends) return view;
  view.charts = sheets::trends_charts(*answer.trends, type, units).charts;
  const std::string note = sheets::trends_note(*answer.trends, type, units);
  if (!note.empty() && !view.charts.empty()) view.notes.push_back(note);
  return view;
}

}  // namespace bathwright::desktop
