// Ceres as a least-squares solver of square systems: its large interface, and the small one it offers for
// problems of a few unknowns.
#include <ceres/ceres.h>
#include <ceres/tiny_solver.h>

#include <algorithm>
#include <cmath>

#include "root_finder.hpp"

namespace bathwright::benchmark {
namespace {

constexpr double nearly_newton = 1e8;  // first radius: fewer failures and steps than the default 1e4

bool small_enough(const Equations& equations, const std::vector<double>& u, double tolerance) {
  std::vector<double> f(u.size());
  return equations.residuals(u.data(), f.data()) &&
         std::all_of(f.begin(), f.end(), [&](double value) { return std::abs(value) < tolerance; });
}

class Cost : public ceres::CostFunction {
 public:
  explicit Cost(const Equations& equations) : equations_(equations) {
    set_num_residuals(static_cast<int>(equations.size()));
    mutable_parameter_block_sizes()->push_back(static_cast<int>(equations.size()));
  }
  bool Evaluate(const double* const* u, double* f, double** jacobians) const override {
    if (!equations_.residuals(u[0], f)) return false;
    return !jacobians || !jacobians[0] || equations_.jacobian(u[0], jacobians[0], equations_.size(), 1);
  }

 private:
  const Equations& equations_;
};

class EndWhenSmall : public ceres::IterationCallback {
 public:
  explicit EndWhenSmall(double tolerance) : cost_(0.5 * tolerance * tolerance) {}
  ceres::CallbackReturnType operator()(const ceres::IterationSummary& summary) override {
    return summary.cost < cost_ ? ceres::SOLVER_TERMINATE_SUCCESSFULLY : ceres::SOLVER_CONTINUE;
  }

 private:
  double cost_;
};

class TrustRegion : public RootFinder {
 public:
  std::string name() const override { return "Ceres"; }
  bool solve(const Equations& equations, std::vector<double>& u, double tolerance) override {
    ceres::Problem problem;
    problem.AddResidualBlock(new Cost(equations), nullptr, u.data());  // the problem owns it
    EndWhenSmall callback(tolerance);
    ceres::Solver::Options options;
    options.linear_solver_type = ceres::DENSE_QR;
    options.trust_region_strategy_type = ceres::LEVENBERG_MARQUARDT;
    options.initial_trust_region_radius = nearly_newton;
    options.max_num_iterations = most_iterations;
    options.function_tolerance = options.gradient_tolerance = options.parameter_tolerance = 0;
    options.logging_type = ceres::SILENT;
    options.num_threads = 1;
    options.callbacks.push_back(&callback);
    ceres::Solver::Summary summary;
    ceres::Solve(options, &problem, &summary);
    return small_enough(equations, u, tolerance);
  }
};

struct TinyFunction {
  using Scalar = double;
  static constexpr int NUM_RESIDUALS = Eigen::Dynamic, NUM_PARAMETERS = Eigen::Dynamic;
  const Equations& equations;
  [[nodiscard]] int NumResiduals() const { return static_cast<int>(equations.size()); }
  [[nodiscard]] int NumParameters() const { return static_cast<int>(equations.size()); }
  bool operator()(const double* u, double* f, double* J) const {
    return equations.residuals(u, f) && (!J || equations.jacobian(u, J, 1, equations.size()));
  }
};

class Tiny : public RootFinder {
 public:
  std::string name() const override { return "Ceres TinySolver"; }
  bool solve(const Equations& equations, std::vector<double>& u, double tolerance) override {
    ceres::TinySolver<TinyFunction> solver;
    solver.options.max_num_iterations = most_iterations;
    solver.options.gradient_tolerance = solver.options.parameter_tolerance = 0;
    solver.options.function_tolerance = 0;
    solver.options.initial_trust_region_radius = nearly_newton;
    solver.options.cost_threshold = 0.5 * tolerance * tolerance;
    Eigen::VectorXd x = Eigen::Map<const Eigen::VectorXd>(u.data(), static_cast<Eigen::Index>(u.size()));
    solver.Solve(TinyFunction{equations}, &x);
    std::copy_n(x.data(), u.size(), u.begin());
    return small_enough(equations, u, tolerance);
  }
};

}  // namespace

std::unique_ptr<RootFinder> ceres_trust_region() { return std::make_unique<TrustRegion>(); }
std::unique_ptr<RootFinder> ceres_tiny() { return std::make_unique<Tiny>(); }

}  // namespace bathwright::benchmark
