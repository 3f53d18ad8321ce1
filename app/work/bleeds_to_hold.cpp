#include "bleeds_to_hold.hpp"

#include <bathwright/units/show.hpp>

namespace bathwright::work {

std::vector<sheets::BleedToHold> bleeds_to_hold(const forecast::Forecast& forecast,
                                                const bath::TankState& start,
                                                const std::vector<forecast::LimitMet>& limits,
                                                const std::function<bool()>& stopped) {
  std::vector<sheets::BleedToHold> all;
  for (const auto& limit : limits) {
    if (limit.quantity.empty() || !limit.from_below || limit.share == 0 ||
        limit.cause != forecast::Cause::by_product)
      continue;
    if (stopped()) break;
    const auto bleed = forecast.bleed_to_hold(start, limit.quantity, limit.g_per_L);
    if (bleed && !*bleed) continue;
    sheets::BleedToHold held;
    held.quantity = limit.quantity;
    held.g_per_L = limit.g_per_L;
    held.limit = forecast.chemistry().type().quantity(limit.quantity)->label + " at " +
                 units::significant(limit.g_per_L) + " g/L";
    if (bleed)
      held.litres_per_day = *bleed;
    else
      held.why_no_bleed = text(bleed.problems());
    const auto load = forecast.largest_load(start, limit.quantity, limit.g_per_L);
    if (load)
      held.load = *load;
    else
      held.why_no_load = text(load.problems());
    all.push_back(std::move(held));
  }
  return all;
}

}  // namespace bathwright::work
