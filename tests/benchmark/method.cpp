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
  Answer answer() const override {
    const speciation::Equilibrium& e = *seen_;
    return {e.molality, e.water_kg, e.solid_mol};
  }
  void solve_all(std::span<const Sample> samples, const std::function<void(std::size_t)>& solved) override {
    std::vector<speciation::Variant> variants;
    for (const Sample& sample : samples) variants.push_back({sample.task.component_mol, sample.ln_K});
    const auto done = session_.solve_variants(
        samples.front().task, variants,
        [&](std::size_t n, const Outcome& outcome, const speciation::Equilibrium& answer) {
          seen_ = &answer;
          if (outcome) solved(n);
        });
    (void)done;  // a failure leaves every sample without an answer
    seen_ = &found_;
  }

 private:
  speciation::Session session_;
  speciation::Equilibrium found_;
  const speciation::Equilibrium* seen_ = &found_;
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

void Method::solve_all(std::span<const Sample> samples, const std::function<void(std::size_t)>& solved) {
  for (std::size_t n = 0; n < samples.size(); ++n) {
    use(samples[n].ln_K);
    if (n == 0 ? solve(samples[n].task) : solve_near_last(samples[n].task)) solved(n);
  }
}

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
