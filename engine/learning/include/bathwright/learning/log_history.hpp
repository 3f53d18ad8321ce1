// The history of a tank out of its log. Read next: book/entries.hpp, how the body of an entry is read.
#pragma once

#include <bathwright/bath/tank.hpp>
#include <bathwright/learning/history.hpp>
#include <bathwright/logbook/logbook.hpp>
#include <bathwright/shifts/calendar.hpp>

namespace bathwright::learning {

struct FromLog {
  History history;
  logbook::UtcTime start{};              ///< hour 0: the first analysis that found a level
  std::vector<std::string> passed_over;  ///< entries that could not be counted, a sentence each
};

/// Everything the log has of the tank from its first analysis on, at the times it was done. Water is an
/// addition of the chemical "water"; the body of an ampere-hours entry may have "area_dm2", the surface that
/// went through the tank since the entry before. A corrected analysis is left out; any other entry that was
/// corrected counts as its correction says. Days of the week are those of the shop's clock, by `calendar`;
/// without one of UTC. Fails where the log cannot be read or has no analysis of the tank.
Result<FromLog> history_of(const logbook::Logbook& log, const std::optional<shifts::Calendar>& calendar,
                           const bath::Tank& tank, const bath::BathType& type);

}  // namespace bathwright::learning
