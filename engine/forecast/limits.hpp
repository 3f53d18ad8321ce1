// The limits a forecast watches, and the day a run meets one.
#pragma once

#include "prepared.hpp"

namespace bathwright::forecast {

struct Limit {
  std::string name;
  Cause cause;
  std::size_t index;  ///< of the quantity, or of the watched solid
  double value;       ///< g/L, or 0 of a solid's headroom in log10
  bool above;         ///< met above it, else below it
  bool is_solid;
};

/// The tank's windows, those of the bath type for what the tank does not aim at, the policy's own limits, and
/// every watched solid at both temperatures but those that form too slowly to count on.
std::vector<Limit> limits_of(const Prepared& prepared);

double value_of(const Limit& limit, const Day& day);

/// With the day of a single run.
LimitMet as_met(const Prepared& prepared, const Limit& limit, std::optional<double> day);

/// By linear interpolation between days; nothing where it is not met.
std::optional<double> day_met(const Limit& limit, const std::vector<Day>& days);

}  // namespace bathwright::forecast
