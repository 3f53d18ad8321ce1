// The chart of individual values and moving ranges: centre, limits, spread.
#pragma once

#include <bathwright/base/result.hpp>
#include <span>

namespace bathwright::trends {

/// In the unit of the values.
struct Individuals {
  double mean = 0;
  double mean_moving_range = 0;
  double sigma = 0;              ///< mean moving range / 1.128
  double low = 0, high = 0;      ///< mean -+ 3 sigma: 2.660 mean moving ranges
  double moving_range_high = 0;  ///< 3.267 mean moving ranges
};

/// Of at least two values in the order of time; a moving range is the difference of one from the one before.
/// Fails (bad_input) on fewer, and on values that are no numbers. Source of the factors for ranges of
/// two: 1.128 = d2 = 2/sqrt(pi), 2.660 = 3/d2, 3.267 = D4 = 1 + 3 d3/d2 with d3 = 0.8525 (Shewhart's
/// constants, as every handbook of quality control prints them).
Result<Individuals> individuals(std::span<const double> values);

}  // namespace bathwright::trends
