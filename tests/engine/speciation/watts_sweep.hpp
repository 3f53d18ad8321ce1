// Many cold starts of a nickel bath with wild totals: what went wrong, and how long one took.
#pragma once

#include <string>
#include <vector>

namespace bathwright::speciation {

struct SweepReport {
  std::vector<std::string> failures;  ///< "seed 1, case 17, 25 degC, precipitation on: ..." with the totals
  std::vector<std::string>
      refusals;                    ///< the same, where the solver said why there is no answer (out_of_range)
  double worst_mass_balance = 0;   ///< relative
  double worst_charge = 0;         ///< mol/kg
  double median_microseconds = 0;  ///< of one solve
  double slowest_microseconds = 0;
};

/// Ni^2+, SO4^2-, Cl^-, Na^+, Ca^2+ (each absent once in eight) and H3BO3 at 1e-12 to 8 mol/kg, evenly spread
/// in their logarithm, made neutral with H^+ or OH^-; every second one with precipitation on; 5, 25 and
/// 55 degC in turn; Pitzer. The same seed gives the same solutions.
SweepReport sweep_watts_bath(unsigned seed, int count);

}  // namespace bathwright::speciation
