// The figures that are learned, as a vector z around the prior: z = 0 is what the policy and the bath type
// state.
#pragma once

#include "course.hpp"

namespace bathwright::learning {

/// What z stands for: factors on what the policy and the bath type state.
struct Factors {
  double drag_out = 1, drag_in = 1, evaporation = 1, idle_evaporation = 1, water = 1;
  std::vector<double> work, effects, efficiency;  ///< per use
  /// A figure that was another before some hour.
  struct Change {
    What what;
    std::size_t use;
    double until_h, factor;
  };
  std::vector<Change> changes;
  Vec drift_g_per_h;  ///< that nothing explains, per state; empty: none
};

/// One entry of z, normal around 0 with standard deviation `u`: of a rate the logarithm of its factor, of an
/// efficiency its logit less that stated.
struct Prior {
  What what = What::drag_out;
  std::size_t use = 0;
  double u = 0;
  double stated = 0;         ///< in the unit people see
  bool is_fraction = false;  ///< efficiencies
  std::string label, unit;
  std::optional<double> until_h{};  ///< of a factor on the figure that held before this hour only

  [[nodiscard]] double figure(double z) const;     ///< in the unit
  [[nodiscard]] double ln_factor(double z) const;  ///< of the figure over that stated
};

/// What can be learned from such a course.
std::vector<Prior> priors_of(const Course& course, const Assumed& assumed);

Factors factors_of(const Course& course, const std::vector<Prior>& priors, const Vec& z);

}  // namespace bathwright::learning
