// GSL multiroots with derivatives: the scaled hybrid method.
#include <gsl/gsl_errno.h>
#include <gsl/gsl_multiroots.h>

#include <algorithm>
#include <map>

#include "root_finder.hpp"

namespace bathwright::benchmark {
namespace {

int residuals(const gsl_vector* u, void* user, gsl_vector* f) {
  return static_cast<const Equations*>(user)->residuals(u->data, f->data) ? GSL_SUCCESS : GSL_EBADFUNC;
}
int jacobian(const gsl_vector* u, void* user, gsl_matrix* J) {
  return static_cast<const Equations*>(user)->jacobian(u->data, J->data, J->tda, 1) ? GSL_SUCCESS
                                                                                    : GSL_EBADFUNC;
}
int both(const gsl_vector* u, void* user, gsl_vector* f, gsl_matrix* J) {
  const int status = residuals(u, user, f);
  return status == GSL_SUCCESS ? jacobian(u, user, J) : status;
}

struct Release {
  void operator()(gsl_multiroot_fdfsolver* solver) const { gsl_multiroot_fdfsolver_free(solver); }
};

class Gsl : public RootFinder {
 public:
  Gsl() { gsl_set_error_handler_off(); }
  std::string name() const override { return "GSL"; }
  bool solve(const Equations& equations, std::vector<double>& u, double tolerance) override {
    auto& solver = solvers_[u.size()];
    if (!solver) solver.reset(gsl_multiroot_fdfsolver_alloc(gsl_multiroot_fdfsolver_hybridsj, u.size()));
    gsl_multiroot_function_fdf function{residuals, jacobian, both, u.size(),
                                        const_cast<Equations*>(&equations)};  // read only, as above
    const gsl_vector_const_view start = gsl_vector_const_view_array(u.data(), u.size());
    int status = gsl_multiroot_fdfsolver_set(solver.get(), &function, &start.vector);
    for (int i = 0; status == GSL_SUCCESS; ++i) {
      if (gsl_multiroot_test_residual(solver->f, tolerance) == GSL_SUCCESS) {
        std::copy_n(solver->x->data, u.size(), u.begin());
        return true;
      }
      if (i == 10 * most_iterations) break;
      status = gsl_multiroot_fdfsolver_iterate(solver.get());
    }
    return false;
  }

 private:
  std::map<std::size_t, std::unique_ptr<gsl_multiroot_fdfsolver, Release>> solvers_;
};

}  // namespace

std::unique_ptr<RootFinder> gsl() { return std::make_unique<Gsl>(); }

}  // namespace bathwright::benchmark
