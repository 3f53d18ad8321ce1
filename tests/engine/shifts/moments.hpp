// Moments for the tests of shifts, written as people read them.
#pragma once

#include <bathwright/shifts/calendar.hpp>
#include <bathwright/shifts/time_zone.hpp>
#include <chrono>
#include <cstdio>
#include <string>

/// "2026-03-02 05:40" or "2026-03-02 05:40:59", on whatever clock.
inline std::chrono::milliseconds since_1970(const std::string& text) {
  int year = 0, hour = 0, minute = 0, second = 0;
  unsigned month = 0, day = 0;
  std::sscanf(text.c_str(), "%d-%u-%u %d:%d:%d", &year, &month, &day, &hour, &minute, &second);
  namespace chrono = std::chrono;
  const chrono::year_month_day date{chrono::year(year), chrono::month(month), chrono::day(day)};
  return chrono::sys_days(date).time_since_epoch() + chrono::hours(hour) + chrono::minutes(minute) +
         chrono::seconds(second);
}

inline bathwright::shifts::UtcTime utc(const std::string& text) {
  return bathwright::shifts::UtcTime(since_1970(text));
}

inline bathwright::shifts::LocalTime wall(const std::string& text) {
  return bathwright::shifts::LocalTime(since_1970(text));
}

inline bathwright::shifts::Calendar calendar_of(const bathwright::shifts::ShiftPattern& pattern) {
  auto calendar = bathwright::shifts::Calendar::of(pattern);
  if (!calendar) throw std::runtime_error(bathwright::text(calendar.problems()));
  return *std::move(calendar);
}
