#include "bathwright/trends/statistics.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>

namespace bathwright::trends {

std::optional<double> capability(double mean, double sigma, std::optional<double> low,
                                 std::optional<double> high) {
  if (!(sigma > 0) || (!low && !high)) return std::nullopt;
  const double room = std::min(low ? mean - *low : HUGE_VAL, high ? *high - mean : HUGE_VAL);
  return room / (3 * sigma);
}

std::optional<double> precision_of(std::span<const std::pair<double, double>> pairs) {
  if (pairs.empty()) return std::nullopt;
  double squares = 0;
  for (const auto& [one, other] : pairs) squares += (one - other) * (one - other);
  return std::sqrt(squares / (2 * static_cast<double>(pairs.size())));
}

std::optional<double> resemblance(std::span<const double> values) {
  if (values.size() < 3) return std::nullopt;
  const double mean = std::accumulate(values.begin(), values.end(), 0.0) / static_cast<double>(values.size());
  double products = 0, squares = 0;
  for (std::size_t i = 0; i < values.size(); ++i) {
    squares += (values[i] - mean) * (values[i] - mean);
    if (i > 0) products += (values[i] - mean) * (values[i - 1] - mean);
  }
  if (!(squares > 0)) return std::nullopt;
  return products / squares;
}

}  // namespace bathwright::trends
