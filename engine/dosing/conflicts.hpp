// Why goals that must hold do not: the smallest sets of them that cannot hold together, in words.
#pragma once

#include "settle.hpp"

namespace bathwright::dosing {

/// One line for each set, at the amounts where the planner ended; empty where everything holds.
///   may_decant  whether bath may be taken out; where not, that is said to be the mend
[[nodiscard]] std::vector<std::string> conflicts(const Settling& settling, const Settled& end,
                                                 bool may_decant);

}  // namespace bathwright::dosing
