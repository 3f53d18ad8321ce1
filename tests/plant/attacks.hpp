// What somebody tries who has a login, and what somebody does who has the whole server; whether it is
// refused, and whether verify finds it. The tests judge these tables, plant_report prints them.
#pragma once

#include <string>
#include <vector>

#include "server.hpp"

namespace plant_test {

struct Attempt {
  std::string who, what;
  std::string answer;  ///< the server's words, or "done"
  bool refused = false;
};

/// Every attempt, with the logins of one site (plating) and a second site (anodising).
std::vector<Attempt> attempts(Server& server);

struct Tampering {
  std::string what;
  bool found = false;        ///< by verify, without anchors noted elsewhere
  bool found_noted = false;  ///< with the last anchor noted before
  std::string words;         ///< the first thing said
};

/// Each in a table with three chains, by the superuser with the guards out of the way.
std::vector<Tampering> tamperings(Server& server);

}  // namespace plant_test
