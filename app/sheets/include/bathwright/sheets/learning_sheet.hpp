// What a log has taught of a tank, on paper: figures stated and learned, suspects, predicted against found.
#pragma once

#include <bathwright/learning/learn.hpp>
#include <bathwright/logbook/clock.hpp>
#include <bathwright/sheets/text.hpp>
#include <bathwright/shifts/calendar.hpp>

namespace bathwright::sheets {

struct LearningPage {
  const bath::Tank& tank;
  const bath::BathType& type;
  const learning::Learned& learned;
  logbook::UtcTime start;  ///< hour 0 of the history
  const std::optional<shifts::Calendar>& calendar;
  std::string policy_file, log_file;
  std::vector<std::string> passed_over;  ///< entries that were not counted, a sentence each
};

/// "2026-03-02 05:40" by the shop's clock, or UTC, so many hours after the start.
[[nodiscard]] std::string time_of(const LearningPage& page, double at_h);

/// "2026-03-02 05:40, entry 12", "between 2026-03-01 05:40 and 2026-03-02 05:40"; "" of what goes on all the
/// time.
[[nodiscard]] std::string when_of(const LearningPage& page, const learning::Suspect& suspect);

[[nodiscard]] Lines learning_sheet(const LearningPage& page);

}  // namespace bathwright::sheets
