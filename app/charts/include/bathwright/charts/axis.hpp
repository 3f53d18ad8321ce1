// Where the ticks of an axis stand and what they say.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

namespace bathwright::charts {

enum class Scale : std::uint8_t {
  linear,
  log10,  ///< values above zero
  days    ///< ticks at days, weeks, quarters
};

struct Tick {
  double at = 0;
  std::string label;
};

/// A range of values and how it is laid out from 0 to 1.
class Axis {
 public:
  /// The range must not be empty; a log10 axis starts above zero.
  Axis(Scale scale, double low, double high);

  /// A range that holds `low` to `high` and ends on ticks; one value alone gets room around it.
  static Axis around(Scale scale, double low, double high, int most_ticks = 6);

  [[nodiscard]] double low() const { return low_; }
  [[nodiscard]] double high() const { return high_; }
  [[nodiscard]] Scale scale() const { return scale_; }
  /// 0 at low, 1 at high; outside the range beyond these.
  [[nodiscard]] double share(double value) const;
  [[nodiscard]] double value(double share) const;
  /// At most `most` ticks inside the range (at least 2), at steps of 1, 2 or 5 times a power of ten; on log10
  /// at powers of ten, with 2 and 5 between where there is room; on days at whole days, weeks and quarters.
  /// All labels of an axis have the same number of decimals.
  [[nodiscard]] std::vector<Tick> ticks(int most = 6) const;

 private:
  Scale scale_;
  double low_, high_;
};

}  // namespace bathwright::charts
