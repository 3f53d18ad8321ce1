#include "bathwright/trends/trend.hpp"

#include <algorithm>
#include <cmath>

namespace bathwright::trends {
namespace {

/// Steps from one value to the next that are larger than their limit; the point is where they arrive.
void add_steps(ControlChart& chart) {
  for (std::size_t i = 1; i < chart.values.size(); ++i)
    if (std::abs(chart.values[i] - chart.values[i - 1]) > chart.limits.moving_range_high)
      chart.findings.push_back({"moving range", "a step of more than 3.267 mean moving ranges", {i}});
}

Result<std::optional<ControlChart>> chart_of(ControlChart chart) {
  if (chart.values.size() < least_values) return std::optional<ControlChart>{};
  const auto limits = individuals(chart.values);
  if (!limits) return limits.problems();
  chart.limits = *limits;
  chart.findings = run_rules(chart.values, limits->mean, limits->sigma);
  add_steps(chart);
  return std::optional<ControlChart>(std::move(chart));
}

}  // namespace

Result<Trend> trend_of(std::span<const Point> points, const Window& window) {
  ControlChart found, residual;
  for (std::size_t i = 0; i < points.size(); ++i) {
    found.points.push_back(i);
    found.values.push_back(points[i].value);
    if (!points[i].predicted) continue;
    residual.points.push_back(i);
    residual.values.push_back(points[i].value - *points[i].predicted);
  }
  Trend trend;
  trend.resemblance = resemblance(found.values);
  auto raw = chart_of(std::move(found)), rest = chart_of(std::move(residual));
  if (!raw) return raw.problems();
  if (!rest) return rest.problems();
  trend.found = *std::move(raw);
  trend.residual = *std::move(rest);
  if (trend.found)
    trend.capability =
        capability(trend.found->limits.mean, trend.found->limits.sigma, window.low, window.high);
  return trend;
}

bool resembles(const Trend& trend) {
  return trend.found && trend.resemblance &&
         *trend.resemblance > 2 / std::sqrt(static_cast<double>(trend.found->values.size()));
}

}  // namespace bathwright::trends
