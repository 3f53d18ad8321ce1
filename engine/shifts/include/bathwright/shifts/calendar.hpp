// Which shift it is: a checked pattern, laid over real days. Midnight and daylight saving are settled here.
// Read next: pattern.hpp (how shifts are written), due.hpp (what falls due in one).
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/shifts/pattern.hpp>
#include <bathwright/shifts/time_zone.hpp>
#include <chrono>
#include <optional>
#include <string>
#include <vector>

namespace bathwright::shifts {

/// One shift of one day.
struct ShiftSpan {
  std::string name;
  UtcTime from;
  UtcTime to;         ///< the first moment that no longer belongs to it
  std::string label;  ///< "2026-03-02 night": the local date on which it started
  bool operator==(const ShiftSpan&) const = default;
};

/// A shift begins and ends when the clock on the wall shows its times. Where the clock is changed during it,
/// it is as much longer or shorter. A time that is skipped counts as the moment of the change; of one that
/// comes twice the first counts; a shift that would begin and end in what is skipped does not take place.
class Calendar {
 public:
  /// Fails with every problem of the pattern: an unknown zone, no shift, a bad or double name, a bad time or
  /// day, shifts that overlap, a shift without an end and with none to follow within 24 h.
  [[nodiscard]] static Result<Calendar> of(const ShiftPattern& pattern);

  [[nodiscard]] const TimeZone& zone() const { return zone_; }

  /// The shift that `time` belongs to; nothing between two shifts.
  [[nodiscard]] std::optional<ShiftSpan> shift_at(UtcTime time) const;
  /// The first shift that begins after `time`.
  [[nodiscard]] ShiftSpan next_shift(UtcTime time) const;
  /// Every shift with a part in [from, to), in order.
  [[nodiscard]] std::vector<ShiftSpan> shifts_between(UtcTime from, UtcTime to) const;

 private:
  struct Slot {
    std::string name;
    int day;                        // 0 is Monday
    std::chrono::minutes starts;    // after midnight of that day
    std::chrono::minutes duration;  // on the clock on the wall, up to 24 h
  };
  explicit Calendar(TimeZone zone) : zone_(zone) {}
  static std::vector<Slot> week_of(const ShiftPattern& pattern, Problems& problems);
  static void set_open_ends(std::vector<Slot>& week, const ShiftPattern& pattern, Problems& problems);
  static void find_overlaps(const std::vector<Slot>& week, Problems& problems);
  /// Those that start on `day`, with a part in [from, to).
  void append_day(std::chrono::local_days day, UtcTime from, UtcTime to, std::vector<ShiftSpan>& spans) const;
  [[nodiscard]] std::chrono::local_days local_day(UtcTime time) const;

  TimeZone zone_;
  std::vector<Slot> week_;  // sorted by day and start
};

}  // namespace bathwright::shifts
