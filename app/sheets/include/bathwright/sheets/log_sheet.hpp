// Entries of the shift log on a page.
#pragma once

#include <bathwright/logbook/logbook.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/shifts/calendar.hpp>
#include <map>

namespace bathwright::sheets {

/// corrected_by: the numbers of the corrections of an entry, by its own.
using Corrections = std::map<std::int64_t, std::vector<std::int64_t>>;

/// A row for each entry; the clock as in `log_list`.
[[nodiscard]] Table log_table(const std::vector<logbook::Entry>& entries, const Corrections& corrected_by,
                              const std::optional<shifts::Calendar>& calendar);

/// Under the head of each shift; times by the clock of the shop where there is a calendar, else in UTC.
[[nodiscard]] Lines log_list(const std::vector<logbook::Entry>& entries, const Corrections& corrected_by,
                             const std::optional<shifts::Calendar>& calendar);

/// body: the entry's, laid out; its lines stand as they are, however long.
[[nodiscard]] Lines log_entry(const logbook::Entry& entry, const std::vector<std::int64_t>& corrections,
                              std::string_view body);

/// anchors: how many hashes noted elsewhere were compared.
[[nodiscard]] Lines log_verification(const logbook::Verification& verification, std::size_t anchors);

/// "2026-03-02 05:40", of the time as an entry has it.
[[nodiscard]] std::string local_time(const std::string& iso, const std::optional<shifts::Calendar>& calendar);

}  // namespace bathwright::sheets
