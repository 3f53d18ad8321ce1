// Entries of the shift log on a page.
#pragma once

#include <bathwright/logbook/logbook.hpp>
#include <bathwright/sheets/text.hpp>
#include <map>

namespace bathwright::sheets {

/// corrected_by: the numbers of the corrections of an entry, by its own.
using Corrections = std::map<std::int64_t, std::vector<std::int64_t>>;
[[nodiscard]] Lines log_list(const std::vector<logbook::Entry>& entries, const Corrections& corrected_by);
/// body: the entry's, laid out; its lines stand as they are, however long.
[[nodiscard]] Lines log_entry(const logbook::Entry& entry, std::string_view body);
[[nodiscard]] Lines log_verification(const logbook::Verification& verification);

}  // namespace bathwright::sheets
