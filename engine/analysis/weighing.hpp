// Readings weighed against what is known beforehand: the linear algebra of it, without chemistry. Read next:
// reconcile.hpp, which says what is weighed.
#pragma once

#include <Eigen/Dense>
#include <vector>

namespace bathwright::analysis {

/// One reading of the amounts n (mol) in the volume V (L): of a level, in g/L,
///   times * (g_per_mol . n + g_fixed) / V
/// or of the volume itself.
struct Reading {
  enum class Of : unsigned char { level, volume } of = Of::level;
  double value = 0, u = 0;    ///< u: its own standard uncertainty
  double shared_rel = 0;      ///< standard uncertainty it shares with all others that have one, relative
  Eigen::VectorXd g_per_mol{};  ///< over the amounts
  double g_fixed = 0;
  double times = 1;  ///< not 1: the reading is taken as wrong by this factor
};

/// What is known beforehand: amounts and volume, `mean` + `spread` z, z independent standard normal numbers.
struct Beforehand {
  Eigen::VectorXd mean;    ///< the amounts, then the volume
  Eigen::MatrixXd spread;  ///< a column for each independent doubt
};

struct Weighing {
  std::vector<Reading> readings;
  Beforehand before;
};

/// A doubt of unknown size added to a weighing: on the amounts and volume, or on the readings; one standard
/// uncertainty. Empty: none.
struct FreeShift {
  Eigen::VectorXd of_state, of_readings;
};

/// With h(x) the readings predicted, H their derivatives at the answer, P = spread spread', R the covariance
/// of the readings, d = readings - h(x) + H (x - mean), S = H P H' + R:
///   x = mean + P H' S^-1 d,  covariance P - P H' S^-1 H P,  chi-square d' S^-1 d
/// repeated until H stands still (readings divide by the volume). R has u^2 and what is shared. Source: the
/// update of a linear estimate, Kalman, J. Basic Eng. 82 (1960) 35; iterated at the answer.
struct Weighed {
  Eigen::VectorXd state;
  Eigen::MatrixXd covariance;
  Eigen::VectorXd misfit;         ///< d
  Eigen::MatrixXd derivatives;    ///< H
  Eigen::MatrixXd misfit_weight;  ///< S^-1
  double chi_square = 0;
  double ln_determinant = 0;  ///< of S
  double shift = 0;           ///< estimated size of the free shift, in its standard uncertainties

  /// Minus twice the logarithm of the likelihood of the readings, a constant apart.
  [[nodiscard]] double surprise() const { return chi_square + ln_determinant; }
  /// w of misfit.hpp for what shifts the readings along `b`; 0 where it shifts none.
  [[nodiscard]] double studentised(const Eigen::VectorXd& b) const;
};

[[nodiscard]] Weighed weigh(const Weighing& weighing, const FreeShift& free = {});

}  // namespace bathwright::analysis
