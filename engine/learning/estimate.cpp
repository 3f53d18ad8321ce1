#include "estimate.hpp"

#include <cmath>

namespace bathwright::learning {
namespace {

using Index = Eigen::Index;

Mat slopes_of(const Course& course, const std::vector<Prior>& priors, const Vec& z,
              const Followed& followed) {
  Index rows = 0;
  for (const Update& up : followed) rows += up.found.size();
  Mat slopes(rows, z.size());
  for (Index j = 0; j < z.size(); ++j) {
    const double step = 1e-4;  // of a logarithm
    Vec up = z, down = z;
    up(j) += step, down(j) -= step;
    slopes.col(j) = (innovations(course, factors_of(course, priors, up), followed) -
                     innovations(course, factors_of(course, priors, down), followed)) /
                    (2 * step);
  }
  return slopes;
}

}  // namespace

std::vector<Index> predicted_rows(const Followed& followed) {
  std::vector<Index> rows;
  Index at = 0;
  for (const Update& up : followed)
    for (const bool first : up.first) {
      if (!first) rows.push_back(at);
      ++at;
    }
  return rows;
}

Estimate estimate(const Course& course, const std::vector<Prior>& priors, const Assumed& assumed,
                  const SetAside& aside, double noise, const Vec& start) {
  Vec weight(start.size());  // of the prior
  for (Index j = 0; j < start.size(); ++j) weight(j) = std::pow(priors[static_cast<std::size_t>(j)].u, -2);
  Estimate e;
  e.z = start;
  e.noise = noise;
  constexpr int most_steps = 40;
  constexpr double small = 0.01;  // of a standard uncertainty
  for (int step = 0; step < most_steps && !e.converged; ++step) {
    const Factors now = factors_of(course, priors, e.z);
    e.followed = follow(course, now, assumed, aside, noise);
    e.whitened = innovations(course, now, e.followed);
    e.slopes = slopes_of(course, priors, e.z, e.followed);
    Mat curvature = e.slopes.transpose() * e.slopes;
    curvature.diagonal() += weight;
    const Eigen::LLT<Mat> factor(curvature);
    e.covariance = factor.solve(Mat::Identity(e.z.size(), e.z.size()));
    const auto cost = [&](const Vec& z) {
      return innovations(course, factors_of(course, priors, z), e.followed).squaredNorm() +
             weight.dot(z.cwiseAbs2());
    };
    const double before = e.whitened.squaredNorm() + weight.dot(e.z.cwiseAbs2());
    Vec move = -factor.solve(e.slopes.transpose() * e.whitened + weight.cwiseProduct(e.z));
    constexpr int most_halvings = 12;
    for (int halving = 0; halving < most_halvings && !(cost(e.z + move) <= before); ++halving) move /= 2;
    e.converged = (move.array().abs() <= small * e.covariance.diagonal().array().sqrt()).all();
    if (!e.converged) e.z += move;
  }
  return e;
}

}  // namespace bathwright::learning
