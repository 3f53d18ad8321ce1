#include "fixed_point.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

namespace bathwright::benchmark {

bool iterate(RootFinder& finder, Equations& equations, std::vector<double>& u) {
  constexpr int most_rounds = 400;
  constexpr double converged = 1e-10, tightest = 1e-11, loosest = 1e-2;
  double share = 1, last = std::numeric_limits<double>::infinity(), tolerance = loosest;
  for (int round = 0; round < most_rounds; ++round) {
    if (!finder.solve(equations, u, tolerance)) return false;
    const bool tight = tolerance <= tightest;
    const bool changed = equations.change_solids(u);
    const double distance = equations.move_coefficients(u, share);
    if (!std::isfinite(distance)) return false;
    if (!changed && tight && distance < converged) return true;
    share = distance < last ? std::min(1.0, 1.15 * share) : std::max(0.02, 0.5 * share);
    last = distance;
    tolerance = std::clamp(1e-2 * distance, tightest, loosest);
  }
  return false;
}

}  // namespace bathwright::benchmark
