// What is to be done at regular intervals, and what of it falls due in this shift or the next.
#pragma once

#include <bathwright/shifts/calendar.hpp>
#include <chrono>
#include <optional>
#include <string>
#include <vector>

namespace bathwright::shifts {

struct Schedule {
  std::string tank;
  std::string what;            ///< "analysis of Ni^2+", "carbon treatment"
  std::chrono::minutes every;  ///< of elapsed time, more than 0; a change of the clock does not move it
};

struct Due {
  std::string tank, what;
  std::optional<UtcTime> last;  ///< when it was last done; nothing: never, as far as is known
  UtcTime at;                   ///< last + every; `now` where it was never done
  bool overdue = false;         ///< `at` has passed, or it was never done
};

[[nodiscard]] Due due(const Schedule& schedule, std::optional<UtcTime> last, UtcTime now);

/// Those of `all` due before the end of the shift that follows the one of `now`, the earliest first.
[[nodiscard]] std::vector<Due> due_by_end_of_next_shift(std::vector<Due> all, const Calendar& calendar,
                                                        UtcTime now);

}  // namespace bathwright::shifts
