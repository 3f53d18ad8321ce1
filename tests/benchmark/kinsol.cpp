// SUNDIALS KINSOL: Newton with line search, dense linear algebra, a fresh Jacobian at every step.
#include <kinsol/kinsol.h>
#include <nvector/nvector_serial.h>
#include <sunlinsol/sunlinsol_dense.h>
#include <sunmatrix/sunmatrix_dense.h>

#include <algorithm>
#include <cmath>
#include <map>

#include "root_finder.hpp"

namespace bathwright::benchmark {
namespace {

int residuals(N_Vector u, N_Vector f, void* user) {
  const auto* equations = static_cast<const Equations*>(user);
  return equations->residuals(N_VGetArrayPointer(u), N_VGetArrayPointer(f)) ? 0 : 1;
}

int jacobian(N_Vector u, N_Vector, SUNMatrix J, void* user, N_Vector, N_Vector) {
  const auto* equations = static_cast<const Equations*>(user);
  return equations->jacobian(N_VGetArrayPointer(u), SUNDenseMatrix_Data(J), 1, equations->size()) ? 0 : 1;
}

void silent(int, const char*, const char*, char*, void*) {}

/// Everything KINSOL allocates for one number of unknowns; made once.
class Session {
 public:
  explicit Session(std::size_t size) : size_(static_cast<sunindextype>(size)) {
    SUNContext_Create(nullptr, &context_);
    u_ = N_VNew_Serial(size_, context_);
    scale_ = N_VNew_Serial(size_, context_);
    N_VConst(1.0, scale_);
    J_ = SUNDenseMatrix(size_, size_, context_);
    linear_ = SUNLinSol_Dense(u_, J_, context_);
    memory_ = KINCreate(context_);
    KINInit(memory_, residuals, u_);
    KINSetLinearSolver(memory_, linear_, J_);
    KINSetJacFn(memory_, jacobian);
    KINSetErrHandlerFn(memory_, silent, nullptr);
    KINSetMaxSetupCalls(memory_, 1);
    KINSetNumMaxIters(memory_, most_iterations);
    KINSetScaledStepTol(memory_, 1e-14);
    // Far above any step needed from a start within e^100 of the answer: no cut that matters.
    KINSetMaxNewtonStep(memory_, 100 * std::sqrt(static_cast<double>(size)));
  }
  Session(const Session&) = delete;
  Session& operator=(const Session&) = delete;
  ~Session() {
    KINFree(&memory_);
    SUNLinSolFree(linear_);
    SUNMatDestroy(J_);
    N_VDestroy(scale_);
    N_VDestroy(u_);
    SUNContext_Free(&context_);
  }

  bool solve(const Equations& equations, std::vector<double>& u, double tolerance) {
    std::copy(u.begin(), u.end(), N_VGetArrayPointer(u_));
    KINSetUserData(memory_, const_cast<Equations*>(&equations));  // read only: `residuals`, `jacobian`
    KINSetFuncNormTol(memory_, tolerance);
    const int status = KINSol(memory_, u_, KIN_LINESEARCH, scale_, scale_);
    std::copy_n(N_VGetArrayPointer(u_), u.size(), u.begin());
    return status == KIN_SUCCESS || status == KIN_INITIAL_GUESS_OK;
  }

 private:
  sunindextype size_;
  SUNContext context_ = nullptr;
  N_Vector u_ = nullptr, scale_ = nullptr;
  SUNMatrix J_ = nullptr;
  SUNLinearSolver linear_ = nullptr;
  void* memory_ = nullptr;
};

class Kinsol : public RootFinder {
 public:
  std::string name() const override { return "KINSOL"; }
  bool solve(const Equations& equations, std::vector<double>& u, double tolerance) override {
    return sessions_.try_emplace(u.size(), u.size()).first->second.solve(equations, u, tolerance);
  }

 private:
  std::map<std::size_t, Session> sessions_;
};

}  // namespace

std::unique_ptr<RootFinder> kinsol() { return std::make_unique<Kinsol>(); }

}  // namespace bathwright::benchmark
