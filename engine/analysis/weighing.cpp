#include "weighing.hpp"

#include <cmath>

namespace bathwright::analysis {
namespace {

using Eigen::Index;
using Eigen::MatrixXd;
using Eigen::VectorXd;

/// Predicted readings and their derivatives at a state.
void predict(const std::vector<Reading>& readings, const VectorXd& state, VectorXd& predicted,
             MatrixXd& derivatives) {
  const Index n = state.size() - 1;
  const double volume = state(n);
  for (Index r = 0; r < predicted.size(); ++r) {
    const Reading& reading = readings[static_cast<std::size_t>(r)];
    if (reading.of == Reading::Of::volume) {
      predicted(r) = reading.times * volume;
      derivatives(r, n) = reading.times;
      continue;
    }
    const double per_L = reading.times / volume;
    predicted(r) = per_L * (reading.g_per_mol.dot(state.head(n)) + reading.g_fixed);
    derivatives.row(r).head(n) = per_L * reading.g_per_mol.transpose();
    derivatives(r, n) = -predicted(r) / volume;
  }
}

}  // namespace

double Weighed::studentised(const VectorXd& b) const {
  const VectorXd weighed = misfit_weight * b;
  const double information = b.dot(weighed);
  return information > 0 ? weighed.dot(misfit) / std::sqrt(information) : 0;
}

Weighed weigh(const Weighing& weighing, const FreeShift& free) {
  const std::vector<Reading>& readings = weighing.readings;
  const auto m = static_cast<Index>(readings.size());
  const Index n = weighing.before.mean.size();
  MatrixXd spread = weighing.before.spread;
  const bool moves_state = free.of_state.size() > 0, moves_readings = free.of_readings.size() > 0;
  if (moves_state) {
    spread.conservativeResize(n, spread.cols() + 1);
    spread.col(spread.cols() - 1) = free.of_state;
  }
  VectorXd value(m), u2(m), shared(m);
  for (Index r = 0; r < m; ++r) {
    const Reading& reading = readings[static_cast<std::size_t>(r)];
    value(r) = reading.value;
    u2(r) = reading.u * reading.u;
    shared(r) = reading.shared_rel;
  }

  Weighed out;
  out.state = weighing.before.mean;
  out.derivatives = MatrixXd::Zero(m, n);
  VectorXd predicted(m), scale(m);
  MatrixXd seen;             // H spread
  constexpr int rounds = 4;  // the error of H falls with the square of what is left, 1 % -> 1e-4 -> 1e-8
  for (int round = 0; round < rounds; ++round) {
    predict(readings, out.state, predicted, out.derivatives);
    out.misfit = value - predicted + out.derivatives * (out.state - weighing.before.mean);
    seen = out.derivatives * spread;
    const VectorXd together = shared.cwiseProduct(predicted);
    MatrixXd S = seen * seen.transpose() + together * together.transpose();
    if (moves_readings) S += free.of_readings * free.of_readings.transpose();
    // A reading that is known exactly of what is known exactly still needs a variance to divide by.
    constexpr double least_rel = 1e-12;
    S.diagonal() += u2 + least_rel * VectorXd::Ones(m);
    // Brought to ones on the diagonal: litres and milligrams differ by a million.
    scale = S.diagonal().cwiseSqrt().cwiseInverse();
    const Eigen::LDLT<MatrixXd> factor(scale.asDiagonal() * S * scale.asDiagonal());
    out.misfit_weight = scale.asDiagonal() * factor.solve(MatrixXd::Identity(m, m)) * scale.asDiagonal();
    out.ln_determinant = factor.vectorD().array().max(1e-300).log().sum() - 2 * scale.array().log().sum();
    out.state = weighing.before.mean + spread * (seen.transpose() * (out.misfit_weight * out.misfit));
    if (!(out.state(n - 1) > 0)) break;
  }
  out.chi_square = out.misfit.dot(out.misfit_weight * out.misfit);
  const MatrixXd gained = spread * seen.transpose();
  out.covariance = spread * spread.transpose() - gained * out.misfit_weight * gained.transpose();
  if (moves_readings)
    out.shift = free.of_readings.dot(out.misfit_weight * out.misfit);
  else if (moves_state)
    out.shift = seen.col(seen.cols() - 1).dot(out.misfit_weight * out.misfit);
  return out;
}

}  // namespace bathwright::analysis
