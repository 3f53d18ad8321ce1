// A time zone by its IANA name: UTC to the clock on the wall of the shop, and back.
// The changes are those of the system's tzdata, whose tables end in 2037: later summers are taken as standard
// time. Not for: which shift it is; calendar.hpp.
#pragma once

#include <bathwright/base/result.hpp>
#include <chrono>
#include <string>
#include <string_view>

namespace date {
class time_zone;
}

namespace bathwright::shifts {

/// A moment in UTC, to the millisecond.
using UtcTime = std::chrono::sys_time<std::chrono::milliseconds>;
/// What the clock on the wall shows, to the millisecond; which zone it hangs in is not part of it.
using LocalTime = std::chrono::local_time<std::chrono::milliseconds>;

/// When a clock on the wall shows a given time.
struct Occurrence {
  enum Kind {
    once,
    skipped,  ///< never: the clock was put forward over it; both times below are that change
    repeated  ///< twice: the clock was put back over it
  };
  Kind kind = once;
  UtcTime first;
  UtcTime last;  ///< the same as `first` where it is not repeated
};

class TimeZone {
 public:
  /// The zone of an IANA name ("Europe/Berlin"). Fails on an unknown name, with the nearest known one, and
  /// where the system has no time zone data.
  [[nodiscard]] static Result<TimeZone> find(std::string_view name, std::string_view where = {});

  [[nodiscard]] const std::string& name() const;
  /// What is added to UTC to get local time.
  [[nodiscard]] std::chrono::seconds offset(UtcTime time) const;
  [[nodiscard]] LocalTime local(UtcTime time) const;
  [[nodiscard]] Occurrence occurrence(LocalTime time) const;

  /// "2026-03-02 05:40". In the hour that comes twice, only the offset tells which.
  [[nodiscard]] std::string local_text(UtcTime time) const;
  /// "+01:00"
  [[nodiscard]] std::string offset_text(UtcTime time) const;
  /// "2026-10-25 02:30 +01:00"
  [[nodiscard]] std::string local_text_with_offset(UtcTime time) const;

 private:
  explicit TimeZone(const date::time_zone* zone) : zone_(zone) {}
  const date::time_zone* zone_;  // in the library's table, which lives as long as the program
};

}  // namespace bathwright::shifts
