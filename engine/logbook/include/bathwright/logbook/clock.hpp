// The two clocks of an entry as an argument, so that a test can hold them still or set them back.
// Not for ordering entries: order is by sequence. Read next: logbook.hpp.
#pragma once

#include <chrono>
#include <optional>
#include <string>
#include <string_view>

namespace bathwright::logbook {

/// A moment in UTC, to the millisecond.
using UtcTime = std::chrono::sys_time<std::chrono::milliseconds>;

/// How long the computer has been on: nobody sets this clock, but it starts anew with each boot.
struct Uptime {
  std::string boot{};                 ///< names the boot it counts from; empty where the system names none
  std::chrono::milliseconds since{};  ///< time since then, suspension included

  bool operator==(const Uptime&) const = default;
};

/// Where the times of an entry come from.
class Clock {
 public:
  virtual ~Clock() = default;
  [[nodiscard]] virtual UtcTime utc_now() const = 0;
  [[nodiscard]] virtual Uptime uptime() const { return {}; }
};

/// The computer's own clock.
class SystemClock final : public Clock {
 public:
  [[nodiscard]] UtcTime utc_now() const override;
  [[nodiscard]] Uptime uptime() const override;
};

/// "2026-03-02T05:40:00.000Z": ISO 8601, UTC, always 24 characters for the years 0 to 9999, so that text
/// order is time order.
[[nodiscard]] std::string iso_utc(UtcTime time);

/// The moment written so; nothing where the text is no such moment.
[[nodiscard]] std::optional<UtcTime> utc_from_iso(std::string_view text);

}  // namespace bathwright::logbook
