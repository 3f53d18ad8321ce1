// Tail probabilities of the tests in misfit.hpp.
#pragma once

namespace bathwright::analysis {

/// Chance that a chi-square of so many degrees of freedom is at least `value`; 1 for 0 degrees. Finite sums
/// for whole degrees: Abramowitz & Stegun, Handbook of Mathematical Functions (1964), 26.4.4 and 26.4.5.
[[nodiscard]] double chi_square_tail(double value, int degrees_of_freedom);

/// Chance that a standard normal number is at least |value| away from 0.
[[nodiscard]] double normal_tails(double value);

}  // namespace bathwright::analysis
