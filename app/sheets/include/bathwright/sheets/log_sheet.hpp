// Entries of the shift log on a page.
#pragma once

#include <bathwright/logbook/logbook.hpp>
#include <bathwright/sheets/text.hpp>

namespace bathwright::sheets {

[[nodiscard]] Lines log_list(const std::vector<logbook::Entry>& entries);
[[nodiscard]] Lines log_entry(const logbook::Entry& entry);
[[nodiscard]] Lines log_verification(const logbook::Verification& verification);

}  // namespace bathwright::sheets
