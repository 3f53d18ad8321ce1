// The verbs of `bathwright log`, and what they share.
#pragma once

#include <algorithm>

#include "context.hpp"
#include "work/shift_log.hpp"

namespace bathwright::command::log_verb {

/// Each adds its verbs below `log`.
void add_reading(CLI::App& log, Context& context,
                 Action& action);  ///< list, show, verify, anchor, salvage, export
void add_writing(CLI::App& log, Context& context, Action& action);  ///< add, correct, close
void add_import(CLI::App& log, Context& context, Action& action);   ///< import
void add_people(CLI::App& log, Context& context, Action& action);   ///< people
void add_shifts(CLI::App& log, Context& context, Action& action);   ///< shifts, hand-over

/// An entry as a document; `corrected_by`: the numbers of its corrections.
[[nodiscard]] Json json_of(const logbook::Entry& entry, const std::vector<std::int64_t>& corrected_by = {});

/// The numbers of an entry's corrections.
Result<std::vector<std::int64_t>> corrections_of(const logbook::Logbook& log, std::int64_t seq);

/// Prints what was logged, with notes below it.
int tell(const Context& context, const Result<Logged>& logged, const std::vector<std::string>& notes = {});

/// "2026-03-02 05:40" or "2026-03-02" by the shop's clock, or "2026-03-02T04:40:00.000Z".
Result<logbook::UtcTime> read_time(const std::string& text, const std::string& option,
                                   const std::optional<shifts::Calendar>& calendar);

}  // namespace bathwright::command::log_verb
