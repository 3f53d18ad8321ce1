// A tank as its own aims describe it.
#pragma once

#include <bathwright/bath/chemistry.hpp>

namespace bathwright::bath {

/// The state of a tank whose levels and pH are at their aims, filled to the mark. Fails where a pH is needed
/// and the tank has no aim for it, and as Chemistry::state_from.
[[nodiscard]] Result<TankState> state_at_aims(const Tank& tank, const Chemistry& chemistry);

}  // namespace bathwright::bath
