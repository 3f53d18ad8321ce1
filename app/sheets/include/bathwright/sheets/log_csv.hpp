// Entries of the shift log as CSV (RFC 4180), as spreadsheets load it.
#pragma once

#include <bathwright/logbook/logbook.hpp>
#include <bathwright/shifts/calendar.hpp>
#include <string>
#include <vector>

namespace bathwright::sheets {

struct CsvForm {
  bool decimal_comma = false;  ///< numbers as 12,5 and a semicolon between columns
};

/// A row for each entry with its columns, the body as JSON; for an analysis further rows, one for each
/// result, so that a spreadsheet can draw them: quantity, value, unit, standard uncertainty, where from.
/// UTF-8 with a byte order mark. A text that a spreadsheet would take for a formula gets an apostrophe in
/// front.
[[nodiscard]] std::string log_csv(const std::vector<logbook::Entry>& entries,
                                  const std::optional<shifts::Calendar>& calendar, const CsvForm& form);

}  // namespace bathwright::sheets
