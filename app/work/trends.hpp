// The trends of a tank out of its log.
#pragma once

#include <bathwright/sheets/trends_sheet.hpp>

#include "shift_log.hpp"

namespace bathwright::work {

/// Every quantity the tank aims at, or `quantity` alone, through all analyses of --log that found it
/// themselves and that nobody corrected; predicted: what the book carried to them. Fails where the log cannot
/// be read, and where it never found `quantity`.
Result<sheets::Trends> trends_of(const Session& session, const bath::Tank& tank,
                                 const std::string& quantity = {});

[[nodiscard]] Json trends_document(const sheets::Trends& trends);

}  // namespace bathwright::work
