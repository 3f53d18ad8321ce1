#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/trends_sheet.hpp>
#include <numeric>

namespace bathwright::sheets {
namespace {

using trends::ControlChart;

/// Units for the figures of a quantity.
class InUnits {
 public:
  InUnits(const QuantityTrend& trend, const bath::BathType* type, const Units& units) : symbol_(trend.unit) {
    const bath::Quantity* quantity = type ? type->quantity(trend.quantity) : nullptr;
    if (trend.unit.empty()) return;
    for (std::size_t i = 0; i < trend.points.size(); ++i) {
      const double density = i < trend.density_kg_per_L.size() ? trend.density_kg_per_L[i] : 0;
      const LevelUnit unit = quantity ? units.level(*quantity, {density}) : units.any_level();
      if (i > 0 && unit.symbol != symbol_) {  // one of them has no density: none is told by it
        per_.clear(), symbol_ = trend.unit;
        return;
      }
      per_.push_back(unit.per_g_per_L), symbol_ = unit.symbol;
    }
  }
  [[nodiscard]] const std::string& symbol() const { return symbol_; }
  /// At a point, and on the mean of some.
  [[nodiscard]] double at(std::size_t point) const { return per_.empty() ? 1 : per_[point]; }
  [[nodiscard]] double mean(const std::vector<std::size_t>& points) const {
    if (steady()) return at(0);
    double sum = 0;
    for (const std::size_t point : points) sum += at(point);
    return sum / static_cast<double>(points.size());
  }
  [[nodiscard]] double mean() const {
    return steady() ? at(0)
                    : std::accumulate(per_.begin(), per_.end(), 0.0) / static_cast<double>(per_.size());
  }
  /// The same at every point.
  [[nodiscard]] bool steady() const {
    return std::ranges::all_of(per_, [&](double per) { return per == per_.front(); });
  }

 private:
  std::string symbol_;
  std::vector<double> per_;  ///< per point: what one g/L is; empty: 1
};

std::string name_of(const QuantityTrend& trend, const InUnits& in) {
  return pretty(trend.quantity) + (in.symbol().empty() ? "" : " " + in.symbol());
}

/// "entry 12 (2026-03-02 05:40)", "entries 12 (...) to 19 (...)", "entries 12, 14, 15 (...)".
std::string where(const QuantityTrend& trend, const ControlChart& chart, const trends::Finding& finding) {
  const auto place = [&](std::size_t i) { return chart.points[finding.points[i]]; };
  const auto entry = [&](std::size_t i) { return std::to_string(trend.points[place(i)].entry); };
  const auto dated = [&](std::size_t i) { return entry(i) + " (" + trend.at[place(i)] + ")"; };
  const std::size_t count = finding.points.size();
  if (count == 1) return "entry " + dated(0);
  if (finding.points.back() - finding.points.front() + 1 == count)
    return "entries " + dated(0) + " to " + dated(count - 1);
  std::string text = "entries ";
  for (std::size_t i = 0; i + 1 < count; ++i) text += entry(i) + ", ";
  return text + dated(count - 1);
}

void tell(const QuantityTrend& trend, const std::optional<ControlChart>& chart, const std::string& of,
          std::vector<std::string>& sentences) {
  if (!chart) return;
  for (const trends::Finding& finding : chart->findings)
    sentences.push_back(of + ": " + finding.what + ", " + where(trend, *chart, finding) + "; " +
                        finding.rule + ".");
}

Table limits_of(const QuantityTrend& trend, const InUnits& in) {
  Table table({{""},
               {"values", Align::number},
               {"mean", Align::number},
               {"sigma", Align::number},
               {"low", Align::number},
               {"high", Align::number},
               {"step at most", Align::number}});
  const auto row = [&](const char* head, const std::optional<ControlChart>& chart) {
    if (!chart) return;
    const trends::Individuals& limits = chart->limits;
    // As many decimals as show a tenth of the spread.
    const int of_g_per_L = limits.sigma >= 10 ? 0 : limits.sigma >= 1 ? 1 : limits.sigma >= 0.1 ? 2 : 3;
    const LevelUnit unit{in.symbol(), in.mean(chart->points)};
    const auto shown = [&](double level) { return fixed(unit.of(level), unit.decimals(of_g_per_L)); };
    table.add({head, std::to_string(chart->values.size()), shown(limits.mean), shown(limits.sigma),
               shown(limits.low), shown(limits.high), shown(limits.moving_range_high)});
  };
  row("found", trend.trend.found);
  row("found less predicted", trend.trend.residual);
  return table;
}

Section section_of(const QuantityTrend& trend, const InUnits& in) {
  Section section{name_of(trend, in), {}};
  const auto say = [&](const std::string& words) { section.blocks.emplace_back(Paragraph{words}); };
  const std::size_t count = trend.points.size();
  if (!trend.trend.found) {
    say(std::to_string(count) + (count == 1 ? " analysis" : " analyses") +
        ", too few for limits: they take " + std::to_string(trends::least_values) + ", firm ones " +
        std::to_string(trends::firm_values) + ".");
    return section;
  }
  section.blocks.emplace_back(limits_of(trend, in));
  for (const std::string& words : findings_in_words(trend)) say(words);
  if (findings_in_words(trend).empty()) say("No pattern: no rule is tripped.");
  if (trend.trend.capability)
    say("Of the window " + figure(in.mean() * trend.aim->low) + " to " + figure(in.mean() * trend.aim->high) +
        ": Cpk " + fixed(*trend.trend.capability, 2) + ".");
  if (count < trends::firm_values)
    say("Fewer than " + std::to_string(trends::firm_values) + " values: the limits are provisional.");
  if (trends::resembles(trend.trend))
    say("Each value resembles the one before (correlation " + fixed(*trend.trend.resemblance, 2) +
        "): the limits of the values found are too narrow" +
        (trend.trend.residual ? "; judge by found less predicted." : "."));
  return section;
}

}  // namespace

bool tells_something(const Trends& trends) {
  return std::ranges::any_of(trends.quantities, [](const QuantityTrend& one) {
    const auto tells = [](const std::optional<ControlChart>& chart) {
      return chart && !chart->findings.empty();
    };
    return tells(one.trend.found) || tells(one.trend.residual);
  });
}

std::vector<std::string> findings_in_words(const QuantityTrend& trend) {
  std::vector<std::string> sentences;
  tell(trend, trend.trend.found, pretty(trend.quantity), sentences);
  tell(trend, trend.trend.residual, pretty(trend.quantity) + ", found less predicted", sentences);
  return sentences;
}

std::string trends_note(const Trends& trends, const bath::BathType* type, const Units& units) {
  if (!units.needs_medium()) return "";
  if (units.needs_water())
    return "Levels are in g/L: mol/kg water needs the water of each solution, which the log does not keep.";
  const bool lacking = std::ranges::any_of(trends.quantities, [&](const QuantityTrend& one) {
    return !one.unit.empty() && InUnits(one, type, units).symbol() == one.unit;
  });
  return std::string(
             "Each value stands by the density logged with it, mean, limits and window by the mean of these.") +
         (lacking ? " Levels in g/L are of analyses that have none." : "");
}

Page trends_page(const Trends& trends, const bath::BathType* type, const Units& units) {
  Page page{trends.tank, "Trends", {}};
  for (const QuantityTrend& one : trends.quantities) page.add(section_of(one, {one, type, units}));
  const auto unit_of = [&](const std::string& quantity) {
    for (const QuantityTrend& one : trends.quantities)
      if (one.quantity == quantity) {
        const InUnits in(one, type, units);
        return LevelUnit{in.symbol(), in.mean()};
      }
    const bath::Quantity* known = type ? type->quantity(quantity) : nullptr;
    return known ? units.level(*known) : units.any_level();
  };
  Section twice{"How well the laboratory repeats", {}};
  for (const TwiceTitrated& one : trends.twice)
    twice.blocks.emplace_back(Paragraph{
        pretty(one.quantity) + ": one titration ± " + figure(unit_of(one.quantity).of(one.s_g_per_L), 2) +
        " " + unit_of(one.quantity).symbol + " (standard deviation, from " + std::to_string(one.pairs) +
        (one.pairs == 1 ? " sample" : " samples") + " titrated twice)."});
  page.add(std::move(twice));
  Section end;
  end.blocks.emplace_back(Paragraph{
      "A pattern asks for a cause: an addition nobody logged, a titrant, a leak. It says nothing of what to "
      "add."});
  for (const std::string& note : {units.note(), trends_note(trends, type, units)})
    if (!note.empty()) end.blocks.emplace_back(Paragraph{note});
  page.add(std::move(end));
  return page;
}

namespace {

charts::Chart chart_of(const QuantityTrend& trend, const ControlChart& control, const InUnits& in,
                       const std::string& title) {
  charts::Chart chart;
  chart.title = title;
  chart.unit = in.symbol();
  const double first = trend.points[control.points.front()].day,
               last = trend.points[control.points.back()].day;
  constexpr double few_days = 4;
  chart.x_scale = last - first < few_days ? charts::Scale::linear : charts::Scale::days;
  chart.x_title = "days since " + trend.at.front().substr(0, trend.at.front().find(' '));
  charts::Series values{"", charts::Meaning::found, {}, {}};
  for (std::size_t i = 0; i < control.values.size(); ++i) {
    const double day = trend.points[control.points[i]].day;
    const double value = in.at(control.points[i]) * control.values[i];
    chart.found.push_back({day, value, 0});
    values.x.push_back(day);
    values.y.push_back(value);
  }
  chart.lines.push_back(std::move(values));
  const trends::Individuals& limits = control.limits;
  for (const auto& [name, level] :
       {std::pair{"high limit", limits.high}, {"mean", limits.mean}, {"low limit", limits.low}}) {
    charts::Series line{name, charts::Meaning::plain, {first, last}, {level * in.at(0), level * in.at(0)}};
    if (!in.steady()) {
      line.x.clear(), line.y.clear();
      for (const std::size_t point : control.points)
        line.x.push_back(trend.points[point].day), line.y.push_back(level * in.at(point));
    }
    chart.lines.push_back(std::move(line));
  }
  for (const trends::Finding& finding : control.findings) {
    const double day = trend.points[control.points[finding.points.back()]].day;
    const bool marked = std::ranges::any_of(chart.moments, [&](const auto& one) { return one.x == day; });
    if (!marked)
      chart.moments.push_back(
          {day, std::to_string(trend.points[control.points[finding.points.back()]].entry)});
  }
  return chart;
}

}  // namespace

charts::Page trends_charts(const Trends& trends, const bath::BathType* type, const Units& units) {
  charts::Page page;
  page.title = trends.tank;
  page.words = {"Trends, from " + trends.log + "."};
  for (const QuantityTrend& one : trends.quantities) {
    const InUnits in(one, type, units);
    if (one.trend.found) {
      page.charts.push_back(chart_of(one, *one.trend.found, in, pretty(one.quantity)));
      const double mean = in.mean();
      if (one.aim)
        page.charts.back().window = {mean * one.aim->low, mean * one.aim->aim, mean * one.aim->high};
    }
    if (one.trend.residual)
      page.charts.push_back(
          chart_of(one, *one.trend.residual, in, pretty(one.quantity) + ", found less predicted"));
  }
  page.foot =
      "Dots: found. Lines: mean and limits (3 sigma from the mean moving range). Bracket: the window, its diamond the "
      "aim. Upright: a rule is tripped at that entry.";
  return page;
}

}  // namespace bathwright::sheets
