#include "solubility.hpp"

#include <algorithm>
#include <bathwright/bath/at_aims.hpp>
#include <cmath>

namespace bathwright::dosing {
namespace {

/// log10 of the saturation at both temperatures; -HUGE_VAL where an ion of it is not there.
struct Saturation {
  double working = -HUGE_VAL, idle = -HUGE_VAL;
};

Saturation saturation_of(const bath::TankView& view, const std::string& solid) {
  const auto room = std::ranges::find(view.headroom, solid, &bath::Headroom::solid);
  if (room == view.headroom.end()) return {};
  return {-room->working_log10, -room->idle_log10};
}

std::optional<bath::TankView> view_at_aims(const bath::Tank& tank, const bath::Chemistry& chemistry) {
  const auto state = bath::state_at_aims(tank, chemistry);
  if (!state) return std::nullopt;
  auto view = chemistry.quick_view(*state);
  if (!view) return std::nullopt;
  return *std::move(view);
}

}  // namespace

std::vector<SolidLimit> solid_limits(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                     const bath::TankView& now) {
  constexpr double within_reach = 0.7;  // log10: five times as much
  const auto aims = view_at_aims(tank, chemistry);
  const auto& solids = chemistry.working().system().solids();
  std::vector<SolidLimit> limits;
  for (const bath::WatchedSolid& watched : chemistry.type().solids) {
    const auto at = chemistry.working().system().solid(watched.name);
    if (!at || solids[*at].slow) continue;
    const std::size_t k = *at;
    const Saturation today = saturation_of(now, watched.name);
    const Saturation there = aims ? saturation_of(*aims, watched.name) : today;
    SolidLimit limit{k, watched.name, HUGE_VAL, HUGE_VAL};
    if (chemistry.working().covers(k))
      limit.working = today.working > 0 ? std::max(today.working, there.working) : 0;
    if (chemistry.idle().covers(k)) limit.idle = today.idle > 0 ? HUGE_VAL : std::max(there.idle, 0.0);
    limit.near = std::max(today.working, there.working) > limit.working - within_reach ||
                 std::max(today.idle, there.idle) > limit.idle - within_reach;
    limits.push_back(std::move(limit));
  }
  return limits;
}

}  // namespace bathwright::dosing
