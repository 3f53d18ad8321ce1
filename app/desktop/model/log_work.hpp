// What the log says now: people, the shift, what is due, open slips, where each tank stands. Read on a thread
// of its own whenever something was logged.
#pragma once

#include <bathwright/hand_over/hand_over.hpp>
#include <map>
#include <memory>

#include "work/open_slip.hpp"

namespace bathwright::desktop {

struct LogQuestion {
  work::Session session;
  std::shared_ptr<const std::vector<bath::Tank>> tanks;  ///< of the shop
  std::string tank;                                      ///< the open one
  std::string filter;                                    ///< of the log page: text in tank, body, by or shift
  std::int64_t shown = 0;                                ///< the entry that is shown in full; 0: none
};

/// A tank by its last analysis in the log.
struct LastSeen {
  std::optional<double> volume_L;
  std::vector<std::string> low, high, stop;  ///< quantities outside their window
  std::string at;
  bool slip_open = false;
  bool added_since = false;  ///< or dumped: what was out of its window may be inside now
};

struct LogNow {
  Problems problems;
  std::int64_t last = 0;  ///< number of the last entry
  std::vector<logbook::Person> people;
  std::optional<shifts::Calendar> calendar;
  std::optional<hand_over::HandOver> told;  ///< of the shift that runs, where shifts are set
  std::map<std::string, LastSeen> seen;     ///< by tank
  std::optional<work::OpenSlip> slip;       ///< of the open tank
  std::vector<logbook::Entry> entries;      ///< newest first, at most `most_entries`
  std::vector<std::string> entry_text;      ///< the one shown in full
};

inline constexpr std::size_t most_entries = 2000;

[[nodiscard]] LogNow read_log(const LogQuestion& question);

}  // namespace bathwright::desktop
