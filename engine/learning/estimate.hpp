// The most probable z for a course, and how sure it is.
#pragma once

#include "filter.hpp"

namespace bathwright::learning {

struct Estimate {
  Vec z;
  Mat covariance;  ///< of z
  Followed followed;
  Vec whitened;  ///< innovations, unit variance but for `noise`
  Mat slopes;    ///< of the whitened innovations with z
  double noise = 1;
  bool converged = false;
};

/// Gauss-Newton with halved steps from `start`; gains and whiteners are computed anew at every step.
Estimate estimate(const Course& course, const std::vector<Prior>& priors, const Assumed& assumed,
                  const SetAside& aside, double noise, const Vec& start);

/// Positions in `whitened` of levels that were predicted, not found for the first time.
std::vector<Eigen::Index> predicted_rows(const Followed& followed);

}  // namespace bathwright::learning
