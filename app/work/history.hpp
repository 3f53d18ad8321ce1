// What the log has of a tank from before: earlier results, and the limits they were judged by.
#pragma once

#include <bathwright/sheets/addition_sheet.hpp>

#include "shift_log.hpp"

namespace bathwright::work {

struct History {
  std::vector<sheets::Before> results;  ///< of entries before `before`, newest first
  std::optional<Json> latest;           ///< the newest analysis' document
  std::optional<std::int64_t> latest_seq;
};

/// The tank's last `count` analyses in --log that nobody corrected; empty without a log.
///   before  the entry that the readings at hand are logged as, where they are
Result<History> history_of(const Session& session, const std::string& tank, std::size_t count,
                           std::optional<std::int64_t> before = std::nullopt);

}  // namespace bathwright::work
