// Solves again and again with one solver: a path of additions, the samples of an uncertainty, a fit. Not for:
// one solve (Solver::solve), or more than one thread (make a session for each).
#pragma once

#include <bathwright/speciation/solver.hpp>
#include <functional>
#include <optional>
#include <span>

namespace bathwright::speciation {

/// Other amounts and constants for one task: a sample of an uncertainty. Amounts are for the task's water:
/// what holds another amount of water is scaled to it.
struct Variant {
  std::vector<double> component_mol;  ///< per component, mol; what the task has none of stays out
  Constants ln_K;
  std::optional<double> pH{};  ///< in place of the pH the task holds; nothing: that one
};

class Session {
 public:
  /// The solver must outlive the session. Takes all the storage it will ever need: solving allocates nothing
  /// unless it fails.
  explicit Session(const Solver& solver);
  ~Session();
  Session(Session&&) noexcept;
  Session& operator=(Session&&) noexcept;

  /// As Solver::solve, into an answer whose storage is used again.
  Outcome solve(const Task& task, Equilibrium& answer);

  /// Starts from the last answer, which should be near; where that does not lead to an answer, or another
  /// set of components or phases is present, as solve(). The result is the same to rounding, unless the model
  /// has left its range and has several equilibria (coverage.hpp calls no such answer valid).
  Outcome solve_near_last(const Task& task, Equilibrium& answer);

  /// What to do with the answer to a variant, in order; `answer` holds during the call, where `solved`.
  using VariantVisit =
      std::function<void(std::size_t variant, const Outcome& solved, const Equilibrium& answer)>;

  /// Solves the task, then every variant of it, each checked like any other answer. Eight variants at a time
  /// share the steps of one coupled Newton from the answer to the task; those that this does not settle
  /// (a long way off) are solved by themselves. Fails as solve() does on the task; takes
  /// storage for the eight.
  Outcome solve_variants(const Task& task, std::span<const Variant> variants, const VariantVisit& visit);

  /// The same for variants that move little from call to call: each starts from the answer that the variant
  /// in its place had last, the task from its own. As near as solve_near_last() to what solve_variants()
  /// finds, and for the same reason.
  Outcome solve_variants_near_last(const Task& task, std::span<const Variant> variants,
                                   const VariantVisit& visit);

  /// The constants this session solves with: those of the solver until changed.
  Constants& ln_K();

 private:
  enum class Start : std::uint8_t { task, last };
  Outcome variants_from(Start start, const Task& task, std::span<const Variant> variants,
                        const VariantVisit& visit);
  struct Storage;
  std::unique_ptr<Storage> storage_;
};

}  // namespace bathwright::speciation
