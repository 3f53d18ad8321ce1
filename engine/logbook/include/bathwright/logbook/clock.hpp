// The wall clock as an argument, so that a test can hold it still or set it back.
// Not for measuring durations, and not for ordering entries: order is by sequence. Read next: logbook.hpp.
#pragma once

#include <chrono>
#include <string>

namespace bathwright::logbook {

/// A moment in UTC, to the millisecond.
using UtcTime = std::chrono::sys_time<std::chrono::milliseconds>;

/// Where the time of an entry comes from.
class Clock {
 public:
  virtual ~Clock() = default;
  [[nodiscard]] virtual UtcTime utc_now() const = 0;
};

/// The computer's own clock.
class SystemClock final : public Clock {
 public:
  [[nodiscard]] UtcTime utc_now() const override;
};

/// "2026-03-02T05:40:00.000Z": ISO 8601, UTC, always 24 characters for the years 0 to 9999, so that text
/// order is time order.
[[nodiscard]] std::string iso_utc(UtcTime time);

}  // namespace bathwright::logbook
