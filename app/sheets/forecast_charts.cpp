#include <fmt/format.h>

#include <algorithm>
#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/forecast_charts.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <functional>

namespace bathwright::sheets {
namespace {

using charts::Chart;
using charts::Meaning;
using forecast::Band;
using forecast::Day;
using forecast::LimitMet;

constexpr std::size_t most_charts = 12;
constexpr double moves = 0.02;       // a level that changes by less is not drawn unless it meets a limit
constexpr double near_share = 0.30;  // of saturation: a solid farther from it is not drawn

class Pages {
 public:
  explicit Pages(const ForecastPage& page) : page_(page), type_(page.forecast.chemistry().type()) {
    for (const Day& day : page.run.days) days_.push_back(day.day);
  }

  charts::Page run() {
    charts::Page out;
    out.title = page_.tank.name;
    out.words = {"Forecast of " + std::to_string(page_.run.days.back().day) + " days under " +
                     page_.policy_file + ", from " + page_.state_from + ".",
                 soonest()};
    levels(out.charts);
    solids(out.charts);
    if (type_.acid_by_pH()) {
      out.charts.push_back(plain("pH", "", band_of(&forecast::Bands::pH), [](const Day& d) { return d.pH; }));
      out.charts.back().least_height = 0.4;
    }
    out.charts.push_back(plain("chemicals, cost since the start", page_.tank.currency,
                               band_of(&forecast::Bands::cost), [](const Day& d) { return d.cost; }));
    if (page_.run.days.back().waste_L > 0)
      out.charts.push_back(plain("waste since the start", "L", band_of(&forecast::Bands::waste_L),
                                 [](const Day& d) { return d.waste_L; }));
    if (out.charts.size() > most_charts) out.charts.resize(most_charts);
    out.foot =
        std::string(page_.bands ? "Dashed: the middle of " + std::to_string(page_.bands->samples) +
                                      " samples; shaded: 5 to 95 of 100. "
                                : "Dashed: computed. ") +
        "Hatched: beyond a limit. Predictions, for a person to weigh: SDS, local codes and licensed practice decide.";
    return out;
  }

 private:
  using OfDay = std::function<double(const Day&)>;

  [[nodiscard]] const Band* band_of(Band forecast::Bands::*which) const {
    return page_.bands ? &(page_.bands->*which) : nullptr;
  }

  [[nodiscard]] std::string soonest() const {
    const LimitMet* first = nullptr;
    for (const LimitMet& limit : page_.limits)
      if (limit.day_p50 && (!first || *limit.day_p50 < *first->day_p50)) first = &limit;
    if (!first) return "No limit is met in this time.";
    std::string words = "First limit: " + first->name + ", day " + fixed(*first->day_p50, 1);
    if (page_.bands && first->day_p05 && first->day_p95)
      words += " (" + fixed(*first->day_p05, 1) + " to " + fixed(*first->day_p95, 1) + ")";
    return words + ".";
  }

  /// The computed line and its band: of the samples where there are some, else of the run.
  void add_line(
      Chart& chart, const std::string& name, const Band* band, const OfDay& of_day,
      const std::function<double(double)>& shown = [](double v) { return v; }) const {
    charts::Series line{name, Meaning::predicted, {}, {}};
    if (band) {
      charts::Band area;
      for (std::size_t i = 0; i < page_.bands->day.size(); ++i) {
        line.x.push_back(page_.bands->day[i]);
        line.y.push_back(shown(band->p50[i]));
        area.x.push_back(page_.bands->day[i]);
        const double a = shown(band->p05[i]), b = shown(band->p95[i]);
        area.low.push_back(std::min(a, b));
        area.high.push_back(std::max(a, b));
      }
      chart.bands.push_back(std::move(area));
    } else {
      line.x = days_;
      for (const Day& day : page_.run.days) line.y.push_back(shown(of_day(day)));
    }
    chart.lines.push_back(std::move(line));
  }

  [[nodiscard]] Chart framed(const std::string& title, const std::string& unit) const {
    Chart chart;
    chart.title = title;
    chart.unit = unit;
    chart.x_title = "day";
    chart.x_scale = charts::Scale::days;
    return chart;
  }

  [[nodiscard]] Chart plain(const std::string& title, const std::string& unit, const Band* band,
                            const OfDay& of_day) const {
    Chart chart = framed(title, unit);
    add_line(chart, "", band, of_day);
    return chart;
  }

  void add_moment(Chart& chart, const LimitMet& limit) const {
    if (!limit.day_p50) return;
    chart.moments.push_back({*limit.day_p50, "day " + fixed(*limit.day_p50, 0)});
  }

  void levels(std::vector<Chart>& out) const {
    struct Candidate {
      double soonest;
      Chart chart;
    };
    std::vector<Candidate> candidates;
    for (std::size_t q = 0; q < type_.quantities.size(); ++q) {
      const bath::Quantity& quantity = type_.quantities[q];
      const auto level = [q](const Day& day) { return day.quantity_g_per_L[q]; };
      Chart chart = framed(quantity.label + " " + pretty(quantity.id), "g/L");
      chart.level_of = quantity.id;
      double soonest = HUGE_VAL;
      for (const LimitMet& limit : page_.limits) {
        if (limit.quantity != quantity.id) continue;
        chart.limits.push_back(
            {limit.g_per_L, limit.from_below, "limit " + fmt::format("{:.4g}", limit.g_per_L)});
        if (limit.day_p50) soonest = std::min(soonest, *limit.day_p50);
        add_moment(chart, limit);
      }
      const auto [least, most] = std::ranges::minmax(page_.run.days, {}, level);
      const bool still = level(most) - level(least) < moves * std::max(level(most), 1e-9);
      if (soonest == HUGE_VAL && (still || quantity.salt_view)) continue;
      chart.found.push_back({0, level(page_.run.days.front()), 0});
      add_line(chart, "", page_.bands ? &page_.bands->quantity[q] : nullptr, level);
      candidates.push_back({soonest, std::move(chart)});
    }
    std::ranges::stable_sort(candidates, {}, &Candidate::soonest);
    for (Candidate& candidate : candidates) out.push_back(std::move(candidate.chart));
  }

  void solids(std::vector<Chart>& out) const {
    // Ten times saturated is nothing a tank holds: the line ends before.
    const auto per_cent = [](double log10_room) {
      return log10_room > -1 ? 100 * std::pow(10, -log10_room) : bath::not_given;
    };
    const bath::Chemistry& chemistry = page_.forecast.chemistry();
    for (std::size_t s = 0; s < type_.solids.size(); ++s) {
      const auto at_work = [s](const Day& d) { return d.working_log10[s]; };
      const auto at_rest = [s](const Day& d) { return d.idle_log10[s]; };
      double closest = 0;
      for (const Day& day : page_.run.days)
        for (const double room : {at_work(day), at_rest(day)})
          if (std::isfinite(room)) closest = std::max(closest, std::pow(10, -room));
      if (closest < near_share) continue;
      Chart chart = framed(pretty(type_.solids[s].name), "% of saturation");
      chart.y_scale = charts::Scale::log10;
      chart.limits.push_back({100, true, "crystallises"});
      const auto add = [&](const std::string& name, const Band* band, const OfDay& of_day) {
        const auto covered = [&](const Day& day) { return std::isfinite(of_day(day)); };
        if (std::ranges::any_of(page_.run.days, covered)) add_line(chart, name, band, of_day, per_cent);
      };
      const auto at = [](units::Celsius t) { return "at " + units::significant(t.v, 3) + " °C"; };
      add(at(chemistry.working_temperature()), page_.bands ? &page_.bands->working[s] : nullptr, at_work);
      add(at(chemistry.idle_temperature()), page_.bands ? &page_.bands->idle[s] : nullptr, at_rest);
      out.push_back(std::move(chart));
    }
  }

  const ForecastPage& page_;
  const bath::BathType& type_;
  std::vector<double> days_;
};

}  // namespace

charts::Page forecast_charts(const ForecastPage& page) { return Pages(page).run(); }

}  // namespace bathwright::sheets
