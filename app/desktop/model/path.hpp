// Along additions: what the free ions and the headroom become on the way.
#pragma once

#include <bathwright/dosing/plan.hpp>
#include <functional>

#include "own_list.hpp"
#include "work/shop.hpp"

namespace bathwright::desktop {

/// What happens to a tank at once.
struct Move {
  double take_out_L = 0;
  std::string chemical;
  double kg = 0;
};

/// By the plan's additions: its steps carry some of the water with what is dissolved in it.
[[nodiscard]] std::vector<Move> moves_of(const dosing::Plan& plan);
[[nodiscard]] std::vector<Move> moves_of(const OwnList& list);

struct PathPoint {
  double kg = 0;  ///< of everything added so far
  bath::TankView view;
};

struct Path {
  std::vector<PathPoint> points;  ///< where it begins and ends, and about 20 within
  bool whole = false;             ///< false: it ends before the moves do
};

/// Ends early at a state that cannot be solved, or once `enough`, which is asked at each point, says so. The
/// demonstration's tanks take 0.4 to 3 ms.
[[nodiscard]] Path path_of(const work::Shop& shop, const bath::TankState& from,
                           const std::vector<Move>& moves, const std::function<bool()>& enough);

}  // namespace bathwright::desktop
