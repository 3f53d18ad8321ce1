// What a forecast's limits take to be held.
#pragma once

#include <bathwright/sheets/forecast_sheet.hpp>
#include <functional>

namespace bathwright::work {

/// The bleed that holds each level that rises to its limit and that nobody puts back, and the work that the
/// policy's own bleed can carry. What cannot be found says why. `stopped` is asked before each: true ends it
/// with those found so far.
[[nodiscard]] std::vector<sheets::BleedToHold> bleeds_to_hold(
    const forecast::Forecast& forecast, const bath::TankState& start,
    const std::vector<forecast::LimitMet>& limits,
    const std::function<bool()>& stopped = [] { return false; });

}  // namespace bathwright::work
