// The loop a user puts around a general solver: coefficients and solids outside, everything else inside.
#pragma once

#include "root_finder.hpp"

namespace bathwright::benchmark {

/// Repeats: root at frozen coefficients and solids, one change of the set of solids, coefficients moved a
/// share of the way to the new ones. The share halves when the distance grows and recovers slowly; inner
/// roots are loose while the coefficients are far away. Ends when the set rests and no coefficient is
/// further than 1e-10 ln units from its own composition.
///   u  a start (Equations::cold_start) or the last answer; moved to the new one
/// false: not converged.
bool iterate(RootFinder& finder, Equations& equations, std::vector<double>& u);

}  // namespace bathwright::benchmark
