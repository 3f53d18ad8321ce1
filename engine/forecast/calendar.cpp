#include <algorithm>
#include <bathwright/forecast/policy.hpp>

namespace bathwright::forecast {

Calendar Calendar::starting(std::chrono::sys_days day) const {
  Calendar moved = *this;
  if (starts)
    for (Closed& one : moved.closed) one.first_day -= static_cast<int>((day - *starts).count());
  moved.first_weekday = static_cast<int>(std::chrono::weekday(day).iso_encoding()) - 1;
  moved.starts = day;
  return moved;
}

bool Calendar::works_on(int day) const {
  constexpr int days_a_week = 7;
  for (const Closed& one : closed)
    if (day >= one.first_day && day < one.first_day + one.days) return false;
  return (first_weekday + day) % days_a_week < days_per_week;
}

std::optional<std::chrono::year_month_day> Calendar::date(int day) const {
  if (!starts) return std::nullopt;
  return std::chrono::year_month_day(*starts + std::chrono::days(day));
}

double Calendar::worked_h_per_day() const { return std::min(24.0, shifts_per_day * hours_per_shift); }

double Policy::bleed_L_per_h(bool works) const {
  if (!bleed_at_work) return bleed_L_per_day / 24;
  const double worked_h = calendar.worked_h_per_day();
  return works && worked_h > 0 ? bleed_L_per_day / worked_h : 0;
}

}  // namespace bathwright::forecast
