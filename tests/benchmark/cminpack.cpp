// cminpack hybrj: Powell's hybrid method with the Jacobian given.
#include <cminpack-1/cminpack.h>

#include <algorithm>
#include <cmath>

#include "root_finder.hpp"

namespace bathwright::benchmark {
namespace {

struct Watch {
  const Equations* equations;
  double tolerance;
  std::vector<double> root;  ///< the first u below the tolerance; empty: none yet
};

/// hybrj itself looks at the steps alone; this ends it as soon as the residuals are small enough.
int evaluate(void* user, int n, const double* u, double* f, double* J, int rows, int what) {
  auto* watch = static_cast<Watch*>(user);
  if (what == 2) return watch->equations->jacobian(u, J, 1, static_cast<std::size_t>(rows)) ? 0 : -2;
  if (!watch->equations->residuals(u, f)) return -2;
  if (std::all_of(f, f + n, [&](double value) { return std::abs(value) < watch->tolerance; })) {
    watch->root.assign(u, u + n);
    return -1;
  }
  return 0;
}

class Cminpack : public RootFinder {
 public:
  std::string name() const override { return "cminpack"; }
  bool solve(const Equations& equations, std::vector<double>& u, double tolerance) override {
    const std::size_t n = u.size();
    f_.resize(n);
    J_.resize(n * n);
    diagonal_.assign(n, 1.0);  // the unknowns are logarithms already: all of one scale
    r_.resize(n * (n + 1) / 2);
    qtf_.resize(n);
    work_.resize(4 * n);
    Watch watch{&equations, tolerance, {}};
    int evaluations = 0, jacobians = 0;
    constexpr double step_tolerance = 1e-15, trust_factor = 0.3;
    constexpr int given_scale = 2, silent = 0;
    hybrj(evaluate, &watch, static_cast<int>(n), u.data(), f_.data(), J_.data(), static_cast<int>(n),
          step_tolerance, 10 * most_iterations, diagonal_.data(), given_scale, trust_factor, silent,
          &evaluations, &jacobians, r_.data(), static_cast<int>(r_.size()), qtf_.data(), work_.data(),
          work_.data() + n, work_.data() + 2 * n, work_.data() + 3 * n);
    if (watch.root.empty()) return false;
    u = watch.root;
    return true;
  }

 private:
  std::vector<double> f_, J_, diagonal_, r_, qtf_, work_;
};

}  // namespace

std::unique_ptr<RootFinder> cminpack() { return std::make_unique<Cminpack>(); }

}  // namespace bathwright::benchmark
