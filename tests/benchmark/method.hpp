// One way of solving with its storage, for one thread: the engine, or a general solver in its loop.
#pragma once

#include <functional>
#include <memory>
#include <span>
#include <string>
#include <vector>

#include "equations.hpp"

namespace bathwright::benchmark {

struct Sample {
  speciation::Task task;
  speciation::Constants ln_K;
};

class Method {
 public:
  virtual ~Method() = default;
  /// The constants of the solves that follow; until then those of the solver.
  virtual void use(const speciation::Constants& ln_K) = 0;
  /// From nothing. false: not converged.
  virtual bool solve(const speciation::Task& task) = 0;
  /// From the last answer, or from nothing where the last solve failed.
  virtual bool solve_near_last(const speciation::Task& task) = 0;
  [[nodiscard]] virtual Answer answer() const = 0;

  /// Every sample, in order; `solved` is told each that has an answer(), while it stands. Unless a method
  /// knows better, from each to the next.
  virtual void solve_all(std::span<const Sample> samples,
                         const std::function<void(std::size_t sample)>& solved);
};

struct NamedMethod {
  std::string name;
  /// For tasks with the solids of this one; the solver must outlive it.
  std::function<std::unique_ptr<Method>(const speciation::Solver&, const speciation::Task&)> make;
};

/// The engine first.
const std::vector<NamedMethod>& methods();

}  // namespace bathwright::benchmark
