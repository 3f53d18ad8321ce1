// Which levels the work itself brings to their aims, and with how much of it.
#pragma once

#include <bathwright/dosing/plan.hpp>

namespace bathwright::dosing {

/// Of each level of `end` above its aim that a use of the bath type takes out, and of each below that it
/// brings in and nothing on the shelf does: the work that it needs, at the rates of the bath type's table
/// (plugins; a shop's own are the forecast's business). Dissolving anodes count against the deposit.
[[nodiscard]] std::vector<Wait> waits(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                      const bath::TankView& end);

}  // namespace bathwright::dosing
