#include "figures.hpp"

#include <cmath>
#include <cstdio>
#include <initializer_list>

namespace bathwright::desktop {
namespace {

/// What would end a cell or a row becomes a space.
std::string row(std::initializer_list<std::string> cells) {
  std::string text;
  for (const std::string& cell : cells) {
    if (&cell != cells.begin()) text += '\t';
    for (const char c : cell) text += c == '\t' || c == '\n' ? ' ' : c;
  }
  return text + '\n';
}

}  // namespace

std::string figures_of(const StateView& view) {
  std::string text = row({"component", "unit", "found", "then", "aim", "state"});
  for (const ComponentRow& one : view.rows)
    text += row({one.name, one.unit, one.found, one.predicted, one.aim, one.word});
  return text;
}

std::string figures_of(const AdditionsView& view) {
  std::string text = row({"chemical", "amount", "unit", "cost"});
  for (const AdditionRow& one : view.additions)
    text += row({one.chemical, short_figure(one.amount), one.unit, one.cost});
  text += '\n' + row({"step", "what", "then", "wait"});
  for (const StepRow& one : view.steps) text += row({one.number, one.what, one.then, one.wait});
  return text;
}

std::string figures_of(const ChemistryView& view) {
  std::string text = row({"", "now", "then"});
  for (const FigureRow& one : view.figures) text += row({one.name, one.now, one.then});
  text += '\n' + row({"free ion", "mol/kg", "activity", "activity then", "activity coefficient"});
  for (const IonRow& one : view.ions)
    text += row({one.name, one.molality, one.activity, one.then, one.gamma});
  text += '\n' + row({"solid", "room at " + view.working_at, "at " + view.idle_at,
                      "% of saturation at " + view.working_at, "then", "at " + view.idle_at, "then"});
  const auto share = [](std::optional<double> of_saturation) {
    return of_saturation && *of_saturation > 0 ? short_figure(100 * *of_saturation) : std::string();
  };
  for (const SolidRow& one : view.solids)
    text += row({one.name, one.working, one.idle, share(one.working_share), share(one.working_then),
                 share(one.idle_share), share(one.idle_then)});
  return text;
}

std::string figures_of(const ForecastView& view) {
  std::string text = row({"limit", "met", "90 %", "why"});
  for (const LimitRow& one : view.limits) text += row({one.name, one.when, one.span, one.why});
  text += '\n';
  for (const auto& [name, value] : view.figures) text += row({name, value});
  return text;
}

std::string figures_of(const TrendsView& view) {
  std::string text = row({"finding"});
  for (const std::string& one : view.findings) text += row({one});
  return text;
}

std::string figures_of(const LogView& view) {
  std::string text = row({"entry", "time", "kind", "tank", "by", "what"});
  for (const LogRow& one : view.rows) text += row({one.seq, one.at, one.kind, one.tank, one.by, one.words});
  return text;
}

std::string figures_of(const charts::Chart& chart) {
  std::string text = chart.x_title;
  for (const auto& line : chart.lines)
    text +=
        '\t' + (line.name.empty() ? chart.title : line.name) + (chart.unit.empty() ? "" : " " + chart.unit);
  text += '\n';
  if (chart.lines.empty()) return text;
  for (const double x : chart.lines.front().x) {
    text += short_figure(x);
    for (const auto& line : chart.lines) text += '\t' + short_figure(value_at(line, x));
    text += '\n';
  }
  for (const auto& found : chart.found) text += row({short_figure(found.x), short_figure(found.y), "found"});
  return text;
}

std::string figures_of(const std::vector<charts::Chart>& charts) {
  std::string text;
  for (const charts::Chart& chart : charts) text += row({chart.title}) + figures_of(chart) + '\n';
  return text;
}

double value_at(const charts::Series& line, double x) {
  for (std::size_t i = 1; i < line.x.size(); ++i)
    if (line.x[i - 1] <= x && x <= line.x[i]) {
      const double width = line.x[i] - line.x[i - 1];
      const double share = width > 0 ? (x - line.x[i - 1]) / width : 0;
      return line.y[i - 1] + share * (line.y[i] - line.y[i - 1]);
    }
  return std::nan("");
}

std::string short_figure(double value) {
  char text[32];
  std::snprintf(text, sizeof text, "%.4g", value);
  return text;
}

}  // namespace bathwright::desktop
