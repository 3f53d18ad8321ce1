#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <bathwright/charts/axis.hpp>
#include <cassert>
#include <cmath>

namespace bathwright::charts {
namespace {

constexpr double rounding = 1e-9;  // of a step: a tick may stand that far outside the range

/// 1, 2 or 5 times a power of ten, so that `span` holds at most `most` steps.
double round_step(double span, int most) {
  const double least = span / std::max(most, 1);
  const double decade = std::pow(10, std::floor(std::log10(least)));
  for (const double times : {1.0, 2.0, 5.0})
    if (times * decade >= least * (1 - rounding)) return times * decade;
  return 10 * decade;
}

double day_step(double span, int most) {
  constexpr std::array<double, 12> steps = {1, 2, 7, 14, 28, 56, 91, 182, 364, 728, 1820, 3640};
  const double least = span / std::max(most, 1);
  const auto* const found = std::ranges::lower_bound(steps, least * (1 - rounding));
  return found == steps.end() ? round_step(span, most) : *found;
}

double step_of(Scale scale, double span, int most) {
  return scale == Scale::days ? day_step(span, most) : round_step(span, most);
}

std::vector<Tick> even_ticks(double low, double high, double step) {
  // So many decimals that neighbours differ, and no more.
  const int decimals = std::max(0, -static_cast<int>(std::floor(std::log10(step) + rounding)));
  std::vector<Tick> ticks;
  const double first = std::ceil(low / step - rounding), last = std::floor(high / step + rounding);
  for (double n = first; n <= last; ++n) {
    const double at = n == 0 ? 0 : n * step;
    ticks.push_back({at, fmt::format("{:.{}f}", at, decimals)});
  }
  return ticks;
}

std::vector<Tick> decade_ticks(double low, double high, int most) {
  const int first = static_cast<int>(std::ceil(std::log10(low) - rounding)),
            last = static_cast<int>(std::floor(std::log10(high) + rounding));
  std::vector<double> leads = {1};
  if (3 * (last - first + 1) <= most) leads = {1, 2, 5};
  const int every = std::max(1, static_cast<int>(std::ceil((last - first + 1) / static_cast<double>(most))));
  std::vector<Tick> ticks;
  for (int decade = first - 1; decade <= last; ++decade) {
    if (leads.size() == 1 && (decade - first) % every != 0) continue;
    for (const double lead : leads) {
      const double at = lead * std::pow(10, decade);
      if (at >= low * (1 - rounding) && at <= high * (1 + rounding))
        ticks.push_back({at, fmt::format("{:g}", at)});
    }
  }
  // Less than a decade: even steps say more.
  return ticks.size() >= 2 ? ticks : even_ticks(low, high, round_step(high - low, most));
}

}  // namespace

Axis::Axis(Scale scale, double low, double high) : scale_(scale), low_(low), high_(high) {
  assert(low < high && (scale != Scale::log10 || low > 0));
}

Axis Axis::around(Scale scale, double low, double high, int most_ticks) {
  if (scale == Scale::log10) {
    const double least = std::pow(10, std::floor(std::log10(low) + rounding)),
                 most = std::pow(10, std::ceil(std::log10(high) - rounding));
    return {scale, least, most > least ? most : 10 * least};
  }
  if (!(high > low)) {
    const double room = low == 0 ? 1 : 0.1 * std::abs(low);
    low -= room;
    high += room;
  }
  const double step = step_of(scale, high - low, most_ticks);
  return {scale, step * std::floor(low / step + rounding), step * std::ceil(high / step - rounding)};
}

double Axis::share(double value) const {
  if (scale_ == Scale::log10) return std::log(value / low_) / std::log(high_ / low_);
  return (value - low_) / (high_ - low_);
}

double Axis::value(double share) const {
  if (scale_ == Scale::log10) return low_ * std::pow(high_ / low_, share);
  return low_ + share * (high_ - low_);
}

std::vector<Tick> Axis::ticks(int most) const {
  return scale_ == Scale::log10 ? decade_ticks(low_, high_, most)
                                : even_ticks(low_, high_, step_of(scale_, high_ - low_, most));
}

}  // namespace bathwright::charts
