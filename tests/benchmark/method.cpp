#include "method.hpp"

#include <bathwright/speciation/session.hpp>

#include "fixed_point.hpp"

namespace bathwright::benchmark {
namespace {

class Engine : public Method {
 public:
  explicit Engine(const speciation::Solver& solver) : session_(solver) {}
  void use(const speciation::Constants& ln_K) override { session_.ln_K() = ln_K; }
  bool solve(const speciation::Task& task) override { return bool(session_.solve(task, found_)); }
  bool solve_near_last(const speciation::Task& task) override {
    return bool(session_.solve_near_last(task, found_));
  }
  Answer answer() const override { return {found_.molality, found_.water_kg, found_.solid_mol}; }

 private:
  speciation::Session session_;
  speciation::Equilibrium found_;
};

class General : public Method {
 public:
  General(std::unique_ptr<RootFinder> finder, const speciation::Solver& solver, const speciation::Task& task)
      : finder_(std::move(finder)), equations_(solver, task) {}
  void use(const speciation::Constants& ln_K) override { equations_.use(ln_K); }
  bool solve(const speciation::Task& task) override {
    equations_.set_totals(task);
    u_ = equations_.cold_start();
    return solved_ = iterate(*finder_, equations_, u_);
  }
  bool solve_near_last(const speciation::Task& task) override {
    if (!solved_) return solve(task);
    equations_.set_totals(task);
    return (solved_ = iterate(*finder_, equations_, u_)) || solve(task);
  }
  Answer answer() const override { return equations_.answer(u_); }

 private:
  std::unique_ptr<RootFinder> finder_;
  Equations equations_;
  std::vector<double> u_;
  bool solved_ = false;
};

NamedMethod general(std::unique_ptr<RootFinder> (*finder)()) {
  return {finder()->name(), [finder](const speciation::Solver& solver, const speciation::Task& task) {
            return std::make_unique<General>(finder(), solver, task);
          }};
}

}  // namespace

const std::vector<NamedMethod>& methods() {
  static const std::vector<NamedMethod> all{
      {"engine", [](const speciation::Solver& solver,
                    const speciation::Task&) { return std::make_unique<Engine>(solver); }},
      general(kinsol),
      general(cminpack),
      general(gsl),
      general(ceres_trust_region),
      general(ceres_tiny)};
  return all;
}

}  // namespace bathwright::benchmark
