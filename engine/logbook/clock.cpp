#include "bathwright/logbook/clock.hpp"

#include <fmt/format.h>
#include <time.h>

#include <cstdio>
#include <fstream>

namespace bathwright::logbook {

UtcTime SystemClock::utc_now() const {
  return std::chrono::floor<std::chrono::milliseconds>(std::chrono::system_clock::now());
}

Uptime SystemClock::uptime() const {
  // The kernel's name for the time from one boot to the next.
  static const std::string boot = [] {
    std::string id;
    std::ifstream("/proc/sys/kernel/random/boot_id") >> id;
    return id;
  }();
  timespec now{};
  clock_gettime(CLOCK_BOOTTIME, &now);
  return {boot, std::chrono::duration_cast<std::chrono::milliseconds>(std::chrono::seconds(now.tv_sec) +
                                                                      std::chrono::nanoseconds(now.tv_nsec))};
}

std::string iso_utc(UtcTime time) {
  const auto day = std::chrono::floor<std::chrono::days>(time);
  const std::chrono::year_month_day date(day);
  const std::chrono::hh_mm_ss clock(time - day);
  return fmt::format("{:04}-{:02}-{:02}T{:02}:{:02}:{:02}.{:03}Z", static_cast<int>(date.year()),
                     static_cast<unsigned>(date.month()), static_cast<unsigned>(date.day()),
                     clock.hours().count(), clock.minutes().count(), clock.seconds().count(),
                     clock.subseconds().count());
}

std::optional<UtcTime> utc_from_iso(std::string_view text) {
  const std::string copy(text);
  int year = 0, month = 0, day = 0, hour = 0, minute = 0, second = 0, milli = 0;
  if (std::sscanf(copy.c_str(), "%4d-%2d-%2dT%2d:%2d:%2d.%3dZ", &year, &month, &day, &hour, &minute, &second,
                  &milli) != 7)
    return std::nullopt;
  const UtcTime time = std::chrono::sys_days(std::chrono::year(year) / month / day) +
                       std::chrono::hours(hour) + std::chrono::minutes(minute) +
                       std::chrono::seconds(second) + std::chrono::milliseconds(milli);
  // Written back, it must be the same: that leaves out the 31st of June and the minute 61.
  if (iso_utc(time) != text) return std::nullopt;
  return time;
}

}  // namespace bathwright::logbook
