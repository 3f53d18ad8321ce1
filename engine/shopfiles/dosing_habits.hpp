// The [dosing] of a tank file. Private to shopfiles.
#pragma once

#include <bathwright/bath/tank.hpp>

#include "schema.hpp"

namespace bathwright::shopfiles {

/// How the shop doses the tank; what is not said stays as it is usual.
bath::DosingHabits read_dosing_habits(Table& dosing);

}  // namespace bathwright::shopfiles
