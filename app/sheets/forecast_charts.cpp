#include <fmt/format.h>

#include <algorithm>
#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/forecast_charts.hpp>
#include <bathwright/sheets/names.hpp>
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
      out.charts.push_back(plain(
          "waste since the start", page_.units.volume_symbol(), band_of(&forecast::Bands::waste_L),
          [](const Day& d) { return d.waste_L; },
          [&](double litres, int) { return page_.units.volume_value(litres); }));
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
  using Shown = std::function<double(double value, int day)>;

  [[nodiscard]] const Band* band_of(Band forecast::Bands::*which) const {
    return page_.bands ? &(page_.bands->*which) : nullptr;
  }

  [[nodiscard]] std::string soonest() const {
    const LimitMet* first = nullptr;
    for (const LimitMet& limit : page_.limits)
      if (limit.day_p50 && (!first || *limit.day_p50 < *first->day_p50)) first = &limit;
    if (!first) return "No limit is met in this time.";
    std::string words = "First limit: " + limit_words(page_, *first) + ", day " + fixed(*first->day_p50, 1);
    if (page_.bands && first->day_p05 && first->day_p95)
      words += " (" + fixed(*first->day_p05, 1) + " to " + fixed(*first->day_p95, 1) + ")";
    return words + ".";
  }

  /// The computed line and its band: of the samples where there are some, else of the run.
  void add_line(
      Chart& chart, const std::string& name, const Band* band, const OfDay& of_day,
      const Shown& shown = [](double v, int) { return v; }) const {
    charts::Series line{name, Meaning::predicted, {}, {}};
    if (band) {
      charts::Band area;
      for (std::size_t i = 0; i < page_.bands->day.size(); ++i) {
        const int day = page_.bands->day[i];
        line.x.push_back(day);
        line.y.push_back(shown(band->p50[i], day));
        area.x.push_back(day);
        const double a = shown(band->p05[i], day), b = shown(band->p95[i], day);
        area.low.push_back(std::min(a, b));
        area.high.push_back(std::max(a, b));
      }
      chart.bands.push_back(std::move(area));
    } else {
      line.x = days_;
      for (const Day& day : page_.run.days) line.y.push_back(shown(of_day(day), day.day));
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

  [[nodiscard]] Chart plain(
      const std::string& title, const std::string& unit, const Band* band, const OfDay& of_day,
      const Shown& shown = [](double v, int) { return v; }) const {
    Chart chart = framed(title, unit);
    add_line(chart, "", band, of_day, shown);
    return chart;
  }

  void add_moment(Chart& chart, const LimitMet& limit) const {
    if (!limit.day_p50) return;
    chart.moments.push_back({*limit.day_p50, "day " + fixed(*limit.day_p50, 0)});
  }

  /// Where a unit needs the density, the limit goes with that of each day, so that its line is met when it
  /// is.
  [[nodiscard]] charts::Limit drawn(const LimitMet& limit, const Shown& shown) const {
    const int told_on = static_cast<int>(std::round(limit.day.value_or(page_.run.days.back().day)));
    charts::Limit out{shown(limit.g_per_L, told_on), limit.from_below, "", {}, {}};
    out.name = "limit " + fmt::format("{:.4g}", out.at);
    if (!page_.units.needs_medium()) return out;
    for (const Day& day : page_.run.days) {
      out.x.push_back(day.day);
      out.y.push_back(shown(limit.g_per_L, day.day));
    }
    return out;
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
      const LevelUnit unit = page_.units.level(quantity, medium_on(page_.run, 0));
      const Shown shown = [&](double g_per_L, int day) {
        return page_.units.needs_medium() ? page_.units.level(quantity, medium_on(page_.run, day)).of(g_per_L)
                                          : unit.of(g_per_L);
      };
      Chart chart = framed(quantity.label + " " + pretty(quantity.id), unit.symbol);
      double soonest = HUGE_VAL;
      for (const LimitMet& limit : page_.limits) {
        if (limit.quantity != quantity.id) continue;
        chart.limits.push_back(drawn(limit, shown));
        if (limit.day_p50) soonest = std::min(soonest, *limit.day_p50);
        add_moment(chart, limit);
      }
      const auto [least, most] = std::ranges::minmax(page_.run.days, {}, level);
      const bool still = level(most) - level(least) < moves * std::max(level(most), 1e-9);
      if (soonest == HUGE_VAL && (still || quantity.salt_view)) continue;
      chart.found.push_back({0, shown(level(page_.run.days.front()), 0), 0});
      add_line(chart, "", page_.bands ? &page_.bands->quantity[q] : nullptr, level, shown);
      candidates.push_back({soonest, std::move(chart)});
    }
    std::ranges::stable_sort(candidates, {}, &Candidate::soonest);
    for (Candidate& candidate : candidates) out.push_back(std::move(candidate.chart));
  }

  void solids(std::vector<Chart>& out) const {
    // Ten times saturated is nothing a tank holds: the line ends before.
    const auto per_cent = [](double log10_room, int) {
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
      const auto at = [&](units::Celsius t) { return "at " + page_.units.temperature(t.v); };
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
