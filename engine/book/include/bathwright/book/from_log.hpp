// The book of a tank, out of its log.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <bathwright/book/book.hpp>
#include <bathwright/logbook/logbook.hpp>
#include <bathwright/shifts/calendar.hpp>

namespace bathwright::book {

/// The readings the book is wanted for.
struct Sample {
  std::string readings_file;  ///< its text: an analysis made from it is not what came before it
  std::string sampled;        ///< as in the readings, "2026-03-02T05:40:00"; empty: not known
  logbook::UtcTime now{};     ///< counts where `sampled` is not known
};

struct FromLog {
  analysis::Book book;
  std::int64_t entry = 0;  ///< the entry it starts from
  double hours = 0;        ///< from its sample on
  std::vector<std::string>
      after_sample;  ///< additions and dumps that the sample knows nothing of, a sentence each
};

/// Carries the tank from its last whole analysis before the sample through every entry between the two; one
/// that was corrected counts as its correction says. Times are those at which things were done. A time of day
/// is the shop's, by `calendar`; without one, UTC. Nothing where the log has no analysis to start from.
Result<std::optional<FromLog>> from_log(const logbook::Logbook& log,
                                        const std::optional<shifts::Calendar>& calendar,
                                        const bath::Tank& tank, const bath::Chemistry& chemistry,
                                        const Sample& sample);

/// A whole analysis of the log as a start; nothing where the entry does not say all that a tank's state
/// needs.
std::optional<Start> start_of(const logbook::Entry& analysis, const bath::Chemistry& chemistry);

}  // namespace bathwright::book
