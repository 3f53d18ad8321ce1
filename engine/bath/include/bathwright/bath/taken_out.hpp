// What taking bath out of a tank leaves.
#pragma once

#include <bathwright/bath/chemistry.hpp>

namespace bathwright::bath {

/// The state after a share (0 to 1) of the bath is taken out, well mixed: as much less of everything.
[[nodiscard]] TankState without(TankState state, double share);

}  // namespace bathwright::bath
