// What one shift tells the next: what it did, what it left open, what falls due. Put together from the log.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/bath/tank.hpp>
#include <bathwright/logbook/logbook.hpp>
#include <bathwright/shifts/calendar.hpp>
#include <bathwright/shifts/due.hpp>
#include <optional>
#include <string>
#include <vector>

namespace bathwright::hand_over {

/// A level that an analysis of the shift found outside its window, g/L or pH.
struct OutOfWindow {
  std::string tank, quantity;
  double found = 0, low = 0, high = 0;
  std::int64_t seq = 0;  ///< the analysis
};

struct HandOver {
  shifts::ShiftSpan shift;
  std::vector<logbook::Entry> entries;  ///< logged during the shift, oldest first
  /// A slip that is not closed, and where it stands with a second person.
  struct OpenSlip {
    logbook::Entry slip;
    std::string approved_by;        ///< "" where nobody did
    bool must_be_approved = false;  ///< the tank takes no addition against it before
  };
  std::vector<OpenSlip> open_slips;        ///< of whatever shift
  std::vector<OutOfWindow> out_of_window;  ///< by the last uncorrected analysis of each tank in the shift
  std::vector<shifts::Due> due;            ///< before the end of the next shift, the earliest first
  std::optional<logbook::Anchor> head;     ///< of the log as it was read
};

/// The latest shift that began at or before `now`. A problem where the pattern has none in the week before.
[[nodiscard]] Result<shifts::ShiftSpan> latest_shift(const shifts::Calendar& calendar, shifts::UtcTime now);

/// tanks: those whose windows and schedules are to be looked at; the log's other tanks are listed only.
[[nodiscard]] Result<HandOver> hand_over(const logbook::Logbook& log, const shifts::Calendar& calendar,
                                         const shifts::ShiftSpan& shift, const std::vector<bath::Tank>& tanks,
                                         shifts::UtcTime now);

}  // namespace bathwright::hand_over
