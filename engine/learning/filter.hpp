// Follows the amounts through a course with a Kalman filter: from analysis to analysis, each prediction
// weighed against what was found.
#pragma once

#include "parameters.hpp"

namespace bathwright::learning {

/// What is not to be believed: it is followed but not learned from.
struct SetAside {
  /// Levels: analysis, and position of the quantity among the followed (or of the volume).
  std::vector<std::pair<std::size_t, Eigen::Index>> levels;
  /// Something of unknown size came in along a direction, just before this analysis.
  std::vector<std::pair<std::size_t, Vec>> shocks;
};

/// One analysis: what was predicted for it and what it changed.
struct Update {
  std::size_t analysis = 0;
  std::vector<Eigen::Index> rows;  ///< states that were found
  Vec found, predicted, u_found;   ///< per row: g/L, or L of the volume
  Mat H;                           ///< (rows, states): states to what is found
  Mat S, S_inverse, whitener;      ///< covariance of found less predicted; whitener * it has unit covariance
  Mat gain;                        ///< (states, rows)
  Vec state;                       ///< predicted
  Vec kept;                        ///< share of each state that was left since the analysis before
  std::vector<bool> first;         ///< per row: the quantity was never found before, so nothing was predicted
};

using Followed = std::vector<Update>;

/// The whole course, once.
///   noise  factor on every variance
Followed follow(const Course& course, const Factors& factors, const Assumed& assumed, const SetAside& aside,
                double noise);

/// One thing more that may have happened, at an update: something that came in along a direction just before
/// it, or an error of one of the levels it found.
struct Happening {
  std::size_t update = 0;
  Vec came_in;            ///< empty: an error of a level
  std::size_t level = 0;  ///< row of the update; 1 in its unit
};

/// Whitened innovations of other factors, with the gains and whiteners of `followed`: a function of the
/// factors that can be differentiated; where something more happened, with that explained.
Vec innovations(const Course& course, const Factors& factors, const Followed& followed,
                const Happening* more = nullptr);

/// What an analysis predicts of itself without being looked at: per update and row, from the first found on.
std::vector<Vec> ahead(const Course& course, const Factors& factors, const Followed& followed);

}  // namespace bathwright::learning
