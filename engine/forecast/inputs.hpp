// What is uncertain in a forecast: each input by name, with its uncertainty and its place in a draw.
#pragma once

#include <Eigen/Core>
#include <functional>

#include "prepared.hpp"

namespace bathwright::forecast {

struct Input {
  std::string name;
  double u_rel;
  std::function<double&(Draw&)> in;
};

/// Only those with an uncertainty above 0.
[[nodiscard]] std::vector<Input> uncertain_inputs(const Prepared& prepared, double u_level_rel);

/// Lower root of the correlations among these inputs: times independent deviates it gives theirs. Fails on a
/// name that is none of them, and on correlations that contradict each other.
[[nodiscard]] Result<Eigen::MatrixXd> correlation_root(const Policy& policy,
                                                       const std::vector<Input>& inputs);

/// A draw of ones, with a place for every input.
[[nodiscard]] Draw as_it_stands(const Prepared& prepared);

}  // namespace bathwright::forecast
