// The state a verb starts from: today's readings, else the book of the log, else the tank's aims.
#pragma once

#include <bathwright/forecast/policy.hpp>
#include <bathwright/sheets/tank_sheet.hpp>
#include <chrono>
#include <optional>

#include "shift_log.hpp"
#include "shop.hpp"

namespace bathwright::work {

struct StartingState {
  bath::TankState state;
  sheets::StateRead read;
  std::optional<std::chrono::sys_days> day;  ///< on which it was so, by the shop's clock; aims have none
};

Result<StartingState> starting_state(const Session& session, const Shop& shop,
                                     const std::string& readings_path);

/// A policy file, its calendar counted from the day of the state where that is known. Fails as read_policy().
Result<forecast::Policy> policy_from(const StartingState& start, const std::string& file,
                                     const bath::BathType& type);

/// Readings worked out, with the last logged analysis as the book.
struct Analysed {
  analysis::Readings readings;
  analysis::Analysis analysis;
  std::optional<std::int64_t> logged_as;   ///< where the last logged analysis is of the same readings
  std::vector<std::string> changed_since;  ///< what the log has of the tank after it, a sentence each
};
Result<Analysed> analyse(const Session& session, const Shop& shop, const std::string& readings_path);

/// What was computed from a tank's file and readings as an entry, with both files' texts and the bath type.
Result<logbook::NewEntry> entry_computed(const Shop& shop, const std::string& readings_path,
                                         logbook::EntryKind kind, Json body);

}  // namespace bathwright::work
