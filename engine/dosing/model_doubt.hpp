// What the doubts about constants and interactions do to the end of a plan, first order. Read next:
// speciation/sensitivity.hpp, drawn_end.hpp.
#pragma once

#include <Eigen/Dense>
#include <bathwright/bath/chemistry.hpp>

namespace bathwright::dosing {

/// Standard uncertainties of the pH and of saturation indices (log10) at the end, one column for each doubt
/// that counts, each independent of the others. Rows: the pH at work, then each of `solids` (positions in the
/// system) at work, then each of them in the idle tank. Where the acid is found by pH, the amount of it that
/// was in the tank before the additions moves with the same doubts.
///   kept_share  of the tank that was not decanted
/// Fails where an equilibrium has no derivatives.
Result<Eigen::MatrixXd> model_doubt(const bath::Chemistry& chemistry, const bath::TankState& before,
                                    double kept_share, const bath::TankState& end,
                                    const std::vector<std::size_t>& solids);

}  // namespace bathwright::dosing
