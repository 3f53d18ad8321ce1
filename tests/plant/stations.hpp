// Stations as processes that log and send while things break around them, and what is left of their entries
// afterwards. The tests judge the figures, plant_report prints them.
#pragma once

#include <chrono>
#include <string>
#include <vector>

#include "scratch.hpp"

namespace plant_test {

enum class Breakage {
  none,
  stations_killed,  ///< SIGKILL to one station after the other, at random moments; started again
  server_killed,    ///< SIGKILL to the server, at random moments; started again
  server_frozen,    ///< SIGSTOP to the server for longer than anybody waits
  connections_cut,  ///< every connection ended by pg_terminate_backend
  all_together
};

struct Plan {
  Breakage breakage = Breakage::none;
  int stations = 4;
  double entries_a_second = 20;  ///< of each station
  std::chrono::milliseconds time{2000};
  Where where = Where::memory;  ///< logs and server
  unsigned seed = 1;
};

/// Milliseconds.
struct Spread {
  double median = 0, p99 = 0, worst = 0;
};

struct Aftermath {
  int faults = 0;                    ///< how often something was broken
  std::size_t acknowledged = 0;      ///< append said so
  std::size_t lost_here = 0;         ///< of them not in the station's log afterwards
  std::size_t said_to_be_there = 0;  ///< send said so
  std::size_t lost_there = 0;        ///< of them not on the server before anything was sent again
  std::size_t in_logs = 0;           ///< entries in all logs at the end
  std::size_t on_server = 0;         ///< after a last sending
  bool same = false;                 ///< every log came back from the server entry by entry
  bool verified = false;             ///< all chains and anchors
  std::size_t while_frozen = 0;      ///< acknowledged while the server was frozen
  Spread acknowledgement;            ///< from the call of append to its return
  Spread arrival;                    ///< from acknowledgement to the end of the sending that brought it
  std::string words;                 ///< a problem that a station was told
};

/// Runs the plan, mends everything, sends what is left and compares.
Aftermath run(const Plan& plan);

}  // namespace plant_test
