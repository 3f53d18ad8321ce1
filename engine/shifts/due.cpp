#include "bathwright/shifts/due.hpp"

#include <algorithm>

namespace bathwright::shifts {

Due due(const Schedule& schedule, std::optional<UtcTime> last, UtcTime now) {
  const UtcTime at = last ? *last + schedule.every : now;
  return {schedule.tank, schedule.what, last, at, !last || at < now};
}

std::vector<Due> due_by_end_of_next_shift(std::vector<Due> all, const Calendar& calendar, UtcTime now) {
  const UtcTime end = calendar.next_shift(now).to;
  std::erase_if(all, [&](const Due& one) { return one.at >= end; });
  std::ranges::stable_sort(all, {}, &Due::at);
  return all;
}

}  // namespace bathwright::shifts
