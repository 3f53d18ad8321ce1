// A general solver of nonlinear equations, as the packages offer it, behind one face.
#pragma once

#include <memory>
#include <string>
#include <vector>

#include "equations.hpp"

namespace bathwright::benchmark {

class RootFinder {
 public:
  virtual ~RootFinder() = default;
  [[nodiscard]] virtual std::string name() const = 0;
  /// Moves u from a start to a root of the equations. true: every residual is below the tolerance.
  virtual bool solve(const Equations& equations, std::vector<double>& u, double tolerance) = 0;
};

/// The most iterations any of them is given for one root.
inline constexpr int most_iterations = 200;

std::unique_ptr<RootFinder> kinsol();
std::unique_ptr<RootFinder> cminpack();
std::unique_ptr<RootFinder> gsl();
std::unique_ptr<RootFinder> ceres_trust_region();
std::unique_ptr<RootFinder> ceres_tiny();

}  // namespace bathwright::benchmark
