// A tank's view with the standard uncertainty of what rests on constants and interactions. Not for: loops
// (about 30 ms more than Chemistry::view); the errors of the analysis (analysis/).
#pragma once

#include <bathwright/bath/chemistry.hpp>

namespace bathwright::bath {

/// Chemistry::view(state) with its u_ fields filled, one sigma, first order (speciation/sensitivity.hpp): of
/// the constants, and of interactions that are missing or estimated. Amounts and pH count as exact: the pH is
/// measured, and what its acid comes to moves with the same constants. A field stays empty where its value is
/// not given or the answer has no derivatives. Fails as Chemistry::view.
Result<TankView> view_with_uncertainty(const Chemistry& chemistry, const TankState& state);

}  // namespace bathwright::bath
