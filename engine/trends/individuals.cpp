#include "bathwright/trends/individuals.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>

namespace bathwright::trends {

Result<Individuals> individuals(std::span<const double> values) {
  if (values.size() < 2)
    return Problem{Fault::bad_input, "values", "are " + std::to_string(values.size()), "two or more", ""};
  if (!std::ranges::all_of(values, [](double v) { return std::isfinite(v); }))
    return Problem{Fault::bad_input, "values", "hold one that is no number", "numbers", ""};
  constexpr double d2 = 1.128, to_range_limit = 3.267;
  Individuals chart;
  chart.mean = std::accumulate(values.begin(), values.end(), 0.0) / static_cast<double>(values.size());
  for (std::size_t i = 1; i < values.size(); ++i)
    chart.mean_moving_range += std::abs(values[i] - values[i - 1]);
  chart.mean_moving_range /= static_cast<double>(values.size() - 1);
  chart.sigma = chart.mean_moving_range / d2;
  chart.low = chart.mean - 3 * chart.sigma;
  chart.high = chart.mean + 3 * chart.sigma;
  chart.moving_range_high = to_range_limit * chart.mean_moving_range;
  return chart;
}

}  // namespace bathwright::trends
