// The plan of a dose as a slip: what stops it, its page, and what it leaves in the log. Read next: dose.cpp.
#pragma once

#include <bathwright/dosing/plan.hpp>
#include <bathwright/sheets/addition_sheet.hpp>

#include "history.hpp"
#include "tank_state.hpp"

namespace bathwright::work {

/// What keeps the best plan from being carried out beside the plan itself, a sentence each: lots past their
/// day, limits that were changed without a new revision.
[[nodiscard]] std::vector<std::string> slip_stops(const bath::Tank& tank, const Analysed& analysed,
                                                  const dosing::AdditionSheet& sheet, const History& history);

/// Why no slip is issued for the best plan; empty where one may be.
[[nodiscard]] std::string hindrance(const dosing::AdditionSheet& sheet, const Analysed& analysed,
                                    const std::vector<std::string>& stops);

/// What a dose leaves in the log.
struct LoggedDose {
  std::vector<std::int64_t> entries;  ///< the analysis, the plan, the slip
  bool analysis_was_there = false;
  std::optional<std::int64_t> slip;
  std::string at;  ///< when, by the shop's clock
  std::filesystem::path path;
};

/// Logs the analysis, unless it is the last in the log, the plan made from it (`doc`), and the slip where one
/// is wanted: together or not at all.
Result<LoggedDose> log_dose(const Session& session, const Shop& shop, const std::string& readings_path,
                            const Analysed& analysed, const Json& doc, bool issue_slip);

[[nodiscard]] sheets::Lines lines_of(const LoggedDose& logged);

struct DoseToPrint {
  const Analysed& analysed;
  const dosing::AdditionSheet& sheet;
  const std::vector<std::string>& stops;
  const History& history;
  const std::optional<LoggedDose>& logged;
  sheets::Units units;
};
[[nodiscard]] sheets::Page page_of(const Session& session, const Shop& shop, const DoseToPrint& dose);

}  // namespace bathwright::work
