#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/trends_sheet.hpp>

namespace bathwright::sheets {
namespace {

using trends::ControlChart;

std::string name_of(const QuantityTrend& trend) {
  return pretty(trend.quantity) + (trend.unit.empty() ? "" : " " + trend.unit);
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

Table limits_of(const QuantityTrend& trend) {
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
    const int decimals = limits.sigma >= 10 ? 0 : limits.sigma >= 1 ? 1 : limits.sigma >= 0.1 ? 2 : 3;
    table.add({head, std::to_string(chart->values.size()), fixed(limits.mean, decimals),
               fixed(limits.sigma, decimals), fixed(limits.low, decimals), fixed(limits.high, decimals),
               fixed(limits.moving_range_high, decimals)});
  };
  row("found", trend.trend.found);
  row("found less predicted", trend.trend.residual);
  return table;
}

Section section_of(const QuantityTrend& trend) {
  Section section{name_of(trend), {}};
  const auto say = [&](const std::string& words) { section.blocks.emplace_back(Paragraph{words}); };
  const std::size_t count = trend.points.size();
  if (!trend.trend.found) {
    say(std::to_string(count) + (count == 1 ? " analysis" : " analyses") +
        ", too few for limits: they take " + std::to_string(trends::least_values) + ", firm ones " +
        std::to_string(trends::firm_values) + ".");
    return section;
  }
  section.blocks.emplace_back(limits_of(trend));
  for (const std::string& words : findings_in_words(trend)) say(words);
  if (findings_in_words(trend).empty()) say("No pattern: no rule is tripped.");
  if (trend.trend.capability)
    say("Of the window " + figure(trend.aim->low) + " to " + figure(trend.aim->high) + ": Cpk " +
        fixed(*trend.trend.capability, 2) + ".");
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

Page trends_page(const Trends& trends) {
  Page page{trends.tank, "Trends", {}};
  for (const QuantityTrend& one : trends.quantities) page.add(section_of(one));
  Section twice{"How well the laboratory repeats", {}};
  for (const TwiceTitrated& one : trends.twice)
    twice.blocks.emplace_back(Paragraph{pretty(one.quantity) + ": one titration ± " +
                                        figure(one.s_g_per_L, 2) + " g/L (standard deviation, from " +
                                        std::to_string(one.pairs) +
                                        (one.pairs == 1 ? " sample" : " samples") + " titrated twice)."});
  page.add(std::move(twice));
  Section end;
  end.blocks.emplace_back(Paragraph{
      "A pattern asks for a cause: an addition nobody logged, a titrant, a leak. It says nothing of what to "
      "add."});
  page.add(std::move(end));
  return page;
}

namespace {

charts::Chart chart_of(const QuantityTrend& trend, const ControlChart& control, const std::string& title) {
  charts::Chart chart;
  chart.title = title;
  chart.unit = trend.unit;
  chart.level_of = trend.quantity;
  const double first = trend.points[control.points.front()].day,
               last = trend.points[control.points.back()].day;
  constexpr double few_days = 4;
  chart.x_scale = last - first < few_days ? charts::Scale::linear : charts::Scale::days;
  chart.x_title = "days since " + trend.at.front().substr(0, trend.at.front().find(' '));
  charts::Series values{"", charts::Meaning::found, {}, {}};
  for (std::size_t i = 0; i < control.values.size(); ++i) {
    const double day = trend.points[control.points[i]].day;
    chart.found.push_back({day, control.values[i], 0});
    values.x.push_back(day);
    values.y.push_back(control.values[i]);
  }
  chart.lines.push_back(std::move(values));
  const trends::Individuals& limits = control.limits;
  for (const auto& [name, level] :
       {std::pair{"high limit", limits.high}, {"mean", limits.mean}, {"low limit", limits.low}})
    chart.lines.push_back({name, charts::Meaning::plain, {first, last}, {level, level}});
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

charts::Page trends_charts(const Trends& trends) {
  charts::Page page;
  page.title = trends.tank;
  page.words = {"Trends, from " + trends.log + "."};
  for (const QuantityTrend& one : trends.quantities) {
    if (one.trend.found) {
      page.charts.push_back(chart_of(one, *one.trend.found, pretty(one.quantity)));
      if (one.aim) page.charts.back().window = {one.aim->low, one.aim->aim, one.aim->high};
    }
    if (one.trend.residual)
      page.charts.push_back(
          chart_of(one, *one.trend.residual, pretty(one.quantity) + ", found less predicted"));
  }
  page.foot =
      "Dots: found. Lines: mean and limits (3 sigma from the mean moving range). Bracket: the window, its diamond the "
      "aim. Upright: a rule is tripped at that entry.";
  return page;
}

}  // namespace bathwright::sheets
