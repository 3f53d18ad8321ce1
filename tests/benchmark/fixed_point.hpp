// The loop a user puts around a general solver: coefficients and solids outside, everything else inside.
#pragma once

#include <optional>

#include "root_finder.hpp"

namespace bathwright::benchmark {

/// Repeats: root at frozen coefficients and solids, one change of the set of solids, coefficients moved a
/// share of the way to the new ones. The share halves when the distance grows and recovers slowly; inner
/// roots are loose while the coefficients are far away. Ends when the set rests and no coefficient is
/// further than 1e-10 ln units from its own composition. Empty: not converged.
std::optional<Answer> solve(RootFinder& finder, Equations& equations);

}  // namespace bathwright::benchmark
