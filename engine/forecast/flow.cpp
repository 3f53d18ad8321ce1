#include "flow.hpp"

#include <algorithm>
#include <cmath>
#include <unsupported/Eigen/MatrixFunctions>

namespace bathwright::forecast {
namespace {

/// Water through a rinse: its own flow, and at least what the tank takes from it.
double through(const Vessels& v, const Policy& policy, std::size_t vessel, const Litres& flows) {
  const Rinse& rinse = policy.rinses[v.stages[vessel - 1].rinse];
  const double own = flows.works ? rinse.flow_L_per_h : 0;
  return rinse.returns ? std::max(own, flows.fill) : own;
}

}  // namespace

Vessels Vessels::of(const Policy& policy) {
  Vessels v;
  for (std::size_t r = 0; r < policy.rinses.size(); ++r)
    for (int stage = 0; stage < policy.rinses[r].stages; ++stage) {
      v.stages.push_back({r, stage == 0, stage + 1 == policy.rinses[r].stages, policy.rinses[r].volume_L});
      if (stage == 0 && policy.rinses[r].returns) v.returning = v.stages.size();
    }
  return v;
}

double water_into(const Vessels& v, const Policy& policy, std::size_t vessel, const Litres& flows) {
  if (vessel == 0) return v.returning == 0 ? flows.fill : 0;
  return v.stages[vessel - 1].last ? through(v, policy, vessel, flows) : 0;
}

double to_treatment(const Vessels& v, const Policy& policy, std::size_t vessel, const Litres& flows) {
  if (vessel == 0 || !v.stages[vessel - 1].first) return 0;
  return through(v, policy, vessel, flows) - (vessel == v.returning ? flows.fill : 0);
}

VesselMatrix exchange(const Vessels& v, const Policy& policy, double tank_L, const Litres& flows) {
  const auto n = static_cast<Eigen::Index>(v.count());
  VesselMatrix a = VesselMatrix::Zero(n, n);
  a(0, 0) = -(flows.drag_out + flows.bleed + flows.overflow) / tank_L;
  double before_L = tank_L;
  for (Eigen::Index i = 1; i < n; ++i) {
    const auto vessel = static_cast<std::size_t>(i);
    const Vessels::Stage& stage = v.stages[vessel - 1];
    const double water = through(v, policy, vessel, flows);
    a(i, i - 1) += flows.drag_out / before_L;
    a(i, i) -= (flows.drag_out + water) / stage.volume_L;
    if (!stage.last) a(i, i + 1) += water / stage.volume_L;
    if (vessel == v.returning) a(0, i) += flows.fill / stage.volume_L;
    before_L = stage.volume_L;
  }
  return a;
}

Passage passage(const VesselMatrix& per_h, double hours) {
  const Eigen::Index n = per_h.rows();
  Passage p{VesselMatrix(n, n), VesselMatrix(n, n), VesselMatrix(n, n)};
  if (n == 1) {
    const double k = -per_h(0, 0), kt = k * hours;
    p.stays(0, 0) = std::exp(-kt);
    // Below the first bound the closed forms divide rounding by nearly nothing.
    p.enters(0, 0) = kt > 1e-9 ? -std::expm1(-kt) / k : hours * (1 - kt / 2);
    p.lingers(0, 0) = kt > 1e-3
                          ? (hours - p.enters(0, 0)) / k
                          : hours * hours / 2 * (1 - kt / 3 * (1 - kt / 4 * (1 - kt / 5 * (1 - kt / 6))));
    return p;
  }
  // exp of [A I 0; 0 0 I; 0 0 0] holds the exponential and its first two integrals (Van Loan, IEEE Trans.
  // Autom. Control 23, 1978, 395).
  Eigen::MatrixXd block = Eigen::MatrixXd::Zero(3 * n, 3 * n);
  block.topLeftCorner(n, n) = per_h * hours;
  block.block(0, n, n, n).setIdentity();
  block.block(n, 2 * n, n, n).setIdentity();
  const Eigen::MatrixXd e = block.exp();
  p.stays = e.topLeftCorner(n, n);
  p.enters = e.block(0, n, n, n) * hours;
  p.lingers = e.block(0, 2 * n, n, n) * hours * hours;
  return p;
}

}  // namespace bathwright::forecast
