// One figure of a tank over time: its control charts, as found and less what was to be expected. Each result
// of a bath follows an addition that was made for the one before; what is found less what is predicted from
// both does not. Read next: individuals.hpp, run_rules.hpp, statistics.hpp.
#pragma once

#include <bathwright/trends/individuals.hpp>
#include <bathwright/trends/run_rules.hpp>
#include <bathwright/trends/statistics.hpp>
#include <cstdint>

namespace bathwright::trends {

struct Point {
  double day = 0;  ///< since any start
  double value = 0;
  std::optional<double> predicted = {};  ///< what was to be expected there
  std::int64_t entry = 0;                ///< where it is written
};

/// Limits that are set, not computed.
struct Window {
  std::optional<double> low, high;
};

struct ControlChart {
  std::vector<std::size_t> points;  ///< places in the series
  std::vector<double> values;       ///< as many
  Individuals limits;
  std::vector<Finding> findings;  ///< points: places in `values`; steps beyond the limit of moving ranges too
};

struct Trend {
  /// Of fewer values than `least_values` there is none.
  std::optional<ControlChart> found, residual;  ///< residual: found less predicted
  std::optional<double> capability;             ///< of `found` in the window
  std::optional<double> resemblance;            ///< of each value found to the one before
};

/// Limits of fewer values say nothing yet; of fewer than `firm_values` they are provisional (common
/// practice).
inline constexpr std::size_t least_values = 8, firm_values = 20;

/// points in the order of time. Fails (bad_input) on values that are no numbers.
Result<Trend> trend_of(std::span<const Point> points, const Window& window);

/// Whether neighbours resemble each other by more than chance gives 1 time in 20: beyond 2/sqrt(n).
[[nodiscard]] bool resembles(const Trend& trend);

}  // namespace bathwright::trends
