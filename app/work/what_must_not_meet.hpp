// What is told to the log as an addition, held against what its tank holds: the interlocks of bath/interlock.
#pragma once

#include <bathwright/bath/interlock.hpp>
#include <bathwright/sheets/text.hpp>

#include "shift_log.hpp"

namespace bathwright::work {

struct MustNotMeet {
  std::string chemical, rule, why;
};

struct Met {
  std::vector<MustNotMeet> stops;
  std::vector<std::string> not_checked;  ///< why nothing could be said, a sentence each
};

/// Every chemical that an entry of this tank names, by id, alias or name of the shelf or the catalogue,
/// against the tank as its last analysis and the additions logged since left it, and against those additions
/// themselves. The tank's file is the one that analysis was made with.
///   body  of the entry: {"chemical": ...}, {"note": ...}
Result<Met> met_in_tank(const Session& session, const std::string& tank, const Json& body);

/// What is printed before all else where something must not meet: the stops, and what comes next.
///   happened  it was told as a thing that happened, not as work to be done
[[nodiscard]] sheets::Lines alarm(const std::string& tank, const std::vector<MustNotMeet>& stops,
                                  bool happened);

}  // namespace bathwright::work
