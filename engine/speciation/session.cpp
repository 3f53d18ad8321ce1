#include <algorithm>
#include <bathwright/speciation/session.hpp>
#include <cmath>
#include <limits>

#include "active_set.hpp"
#include "answer.hpp"
#include "convex_dual.hpp"
#include "coupled_newton.hpp"
#include "lane_newton.hpp"
#include "refusal.hpp"
#include "task_check.hpp"

namespace bathwright::speciation {
namespace {

/// Moves the coefficients a share of the way to those of the present composition; the largest change, ln
/// units, of a kind that is not a trace.
double move_coefficients(Workspace& w, double share) {
  SpeciesVector m, in_kind, fresh(static_cast<Index>(w.kinds()));
  w.molality(m);
  w.sum_kinds(m, in_kind);
  const double ln_aw = w.model().evaluate_kinds({in_kind.data(), w.kinds()}, {fresh.data(), w.kinds()});
  w.ln_aw += share * (ln_aw - w.ln_aw);
  const double threshold = 1e-8 * in_kind.sum();
  double largest = 0;
  for (Index k = 0; k < fresh.size(); ++k)
    if (in_kind(k) > threshold) largest = std::max(largest, std::abs(fresh(k) - w.ln_gamma(k)));
  w.ln_gamma += share * (fresh - w.ln_gamma);
  return largest;
}

/// Coefficients of the components as if nothing formed from them.
void guess_coefficients(Workspace& w) {
  SpeciesVector m = SpeciesVector::Zero(w.count()), in_kind;
  for (Index i = 0; i < w.components(); ++i) m(i) = std::max(w.total(i), 0.0) / w.water_kg;
  w.sum_kinds(m, in_kind);
  w.ln_aw = w.model().evaluate_kinds({in_kind.data(), w.kinds()}, {w.ln_gamma.data(), w.kinds()});
}

/// Liquid water from the water balance at the present composition.
void balance_water(Workspace& w) {
  SpeciesVector m;
  w.molality(m);
  double bound = w.bound_water(m) * w.water_kg;
  for (const Phase& phase : w.phases)
    if (phase.active) bound += phase.supply_water * phase.mol;
  const double liquid = (w.total_water - bound) / water_mol_per_kg;
  w.water_kg = std::clamp(liquid, 0.2 * w.water_kg, 5 * w.water_kg);
}

/// Coupled Newton, one change of the active set at a time until it settles.
bool finish(Workspace& w, int& iterations) {
  const std::size_t most = 10 + 4 * w.phases.size();
  for (std::size_t change = 0; change < most; ++change) {
    if (!solve_coupled(w, iterations)) return false;
    // Largest violation first; from half-way on the first one found, so that no cycle can last.
    const bool first = change > most / 2;
    Phase* leaving = nullptr;
    std::size_t entering = w.phases.size();
    double least = 0, largest = saturated;
    for (std::size_t k = 0; k < w.phases.size(); ++k) {
      Phase& phase = w.phases[k];
      if (phase.kind != Phase::Kind::precipitate) continue;
      if (phase.active) {
        if (phase.mol < least && !(first && leaving)) leaving = &phase, least = phase.mol;
      } else if (const double above = ln_saturation(w, phase);
                 above > largest && !(first && entering < w.phases.size())) {
        entering = k, largest = above;
      }
    }
    if (leaving) {
      leaving->active = false;
      leaving->mol = 0;
    } else if (entering == w.phases.size()) {
      return true;
    } else if (!let_in(w, entering, WaterActivity::free)) {
      return false;
    }
  }
  return false;
}

/// Fixed point on the activity coefficients with a step that adapts; slow and sturdy, for where Newton does
/// not arrive.
bool approach(Workspace& w, int& iterations) {
  constexpr int most = 200;
  double share = 0.5, last = std::numeric_limits<double>::infinity();
  for (int step = 0; step < most; ++step) {
    if (!solve_convex(w, 1e-8, iterations)) return false;
    balance_water(w);
    const double change = move_coefficients(w, share);
    if (change < 1e-4) return true;
    share = change < last ? std::min(1.0, 1.15 * share) : std::max(0.02, 0.5 * share);
    last = change;
  }
  return false;
}

/// A state with its active phases, to come back to.
class Mark {
 public:
  explicit Mark(const Workspace& w) : state_(w) {
    active_.reserve(w.phases.capacity());
    mol_.reserve(w.phases.capacity());
  }
  void set(const Workspace& w) {
    state_ = w;
    active_.clear();
    mol_.clear();
    for (const Phase& phase : w.phases) {
      active_.push_back(phase.active);
      mol_.push_back(phase.mol);
    }
  }
  void restore(Workspace& w) const {
    static_cast<State&>(w) = state_;
    for (std::size_t k = 0; k < w.phases.size(); ++k) {
      w.phases[k].active = active_[k];
      w.phases[k].mol = mol_[k];
    }
  }

 private:
  State state_;
  std::vector<bool> active_;
  std::vector<double> mol_;
};

/// Starts from a dilute solution, where everything is easy, and takes the water away again in steps that
/// adapt.
bool concentrate(Workspace& w, Mark& start, int& iterations) {
  constexpr double least_step = 0.01;  // in ln of the water
  const double water = w.total_water;
  double ln_dilution = std::log(100.0), step = 0.7;
  w.total_water = water * std::exp(ln_dilution);
  w.water_kg *= std::exp(ln_dilution);
  w.ln_gamma.setZero();
  w.ln_aw = 0;
  cold_start(w);
  if (!solve_convex(w, 1e-3, iterations) || !finish(w, iterations)) return false;
  while (ln_dilution > 0) {
    start.set(w);
    const double next = std::max(0.0, ln_dilution - step);
    w.total_water = water * std::exp(next);
    w.water_kg *= std::exp(next - ln_dilution);
    for (Index i = 0; i < w.components(); ++i)
      if (i != w.proton) w.x(i) += ln_dilution - next;
    if (finish(w, iterations)) {
      ln_dilution = next;
      step *= 1.5;
    } else {
      start.restore(w);
      w.total_water = water * std::exp(ln_dilution);
      step /= 3;
      if (step < least_step) return false;  // w stands at the last solution found
    }
  }
  return true;
}

/// Coupled Newton over a basis in which no component is scarce.
bool settle(Workspace& w, int& iterations) {
  SpeciesVector m;
  w.molality(m);
  w.rebase(m);
  if (!finish(w, iterations)) return false;
  // What was abundant on the way here may not be in the end.
  w.molality(m);
  return !w.rebase(m) || solve_coupled(w, iterations);
}

/// Routes to an answer from nothing, each sturdier and slower than the one before.
class ColdSolve {
 public:
  ColdSolve(Workspace& w, Mark& mark, const Task& task, const Constants& ln_K, int& iterations)
      : w_(w), mark_(mark), task_(task), ln_K_(ln_K), iterations_(iterations) {}

  bool any() { return direct() || by_releasing_ph() || by_approach() || by_concentration(); }

  bool direct() {
    begin();
    return from_start();
  }
  bool by_approach() {
    begin();
    return approach(w_, iterations_) && settle(w_, iterations_);
  }
  bool by_concentration() {
    begin();
    return concentrate(w_, mark_, iterations_) && settle(w_, iterations_);
  }

  /// First with the pH free, then walked to where it is held.
  bool by_releasing_ph() {
    if (!task_.pH) return false;
    constexpr double most = 1.0, least = 0.01;  // steps, ln units of the activity of H^+
    w_.load(task_, ln_K_);
    Phase& held = w_.phases.back();
    held.active = false;
    guess_coefficients(w_);
    cold_start(w_);
    if (!from_start()) return false;
    const double target = held.ln_K;
    double at = held.condition.dot(w_.x) + held.water * w_.ln_aw, step = most;
    held.active = true;
    while (at != target) {
      const double next = std::abs(target - at) <= step ? target : at + std::copysign(step, target - at);
      mark_.set(w_);
      held.ln_K = next;
      if (finish(w_, iterations_)) {
        at = next;
      } else {
        mark_.restore(w_);
        step /= 3;
        if (step < least) return false;
      }
    }
    return settle(w_, iterations_);
  }

 private:
  void begin() {
    w_.load(task_, ln_K_);
    guess_coefficients(w_);
    cold_start(w_);
  }
  bool from_start() {
    if (!solve_convex(w_, 1e-2, iterations_)) return false;
    move_coefficients(w_, 1);
    balance_water(w_);
    pull_back(w_);
    return solve_convex(w_, 1e-3, iterations_) && settle(w_, iterations_);
  }

  Workspace& w_;
  Mark& mark_;
  const Task& task_;
  const Constants& ln_K_;
  int& iterations_;
};

Equilibrium with_room_for(const ChemicalSystem& system) {
  Equilibrium answer;
  for (auto* values : {&answer.molality, &answer.ln_gamma, &answer.ln_activity})
    values->reserve(system.species().size());
  for (auto* values : {&answer.solid_mol, &answer.saturation_index}) values->reserve(system.solids().size());
  for (auto* values : {&answer.gas_bar, &answer.gas_mol}) values->reserve(system.gases().size());
  return answer;
}

}  // namespace

struct Session::Storage {
  const Solver* solver;
  Constants ln_K;
  Workspace workspace;
  Mark mark;
  bool solved = false;  ///< the workspace stands at an answer
  Equilibrium other;    ///< a second answer to choose from
  /// Where the last variants ended, eight at a time, over the basis of that number.
  struct Eight {
    LaneProblem problem;
    std::array<bool, lanes> settled;  ///< stands at an answer
  };
  std::vector<Eight> eights;
  std::uint64_t eights_basis = 0;

  explicit Storage(const Solver& s)
      : solver(&s), ln_K(s.ln_K()), workspace(s), mark(workspace), other(with_room_for(s.system())) {}

  Outcome finish_with(const Task& task, int iterations, Equilibrium& answer) {
    read_answer(workspace, *solver, ln_K, task, answer);
    answer.iterations = iterations;
    const Residuals& r = answer.residuals;
    solved =
        !(r.mass_balance > 1e-12 || r.mass_action > 1e-10 || r.saturation > 1e-8 || r.negative_solid > 0);
    if (!solved) return failed_check(r);
    return Done{};
  }

  Outcome solve(const Task& task, Equilibrium& answer) {
    int iterations = 0;
    solved = false;
    ColdSolve cold(workspace, mark, task, ln_K, iterations);
    if (!cold.any()) return refusal(workspace, solver->system(), task);
    Outcome found = finish_with(task, iterations, answer);
    // Where the Gibbs energy curves downward there is another equilibrium: a sturdier route may find it.
    if (found && !answer.stable) {
      solved = false;  // until the workspace stands at an answer again
      if (cold.by_approach() && finish_with(task, iterations, other) && other.stable)
        std::swap(answer, other);
    }
    return found;
  }
};

Session::Session(const Solver& solver) : storage_(std::make_unique<Storage>(solver)) {}
Session::~Session() = default;
Session::Session(Session&&) noexcept = default;
Session& Session::operator=(Session&&) noexcept = default;

Constants& Session::ln_K() { return storage_->ln_K; }

Outcome Session::solve(const Task& task, Equilibrium& answer) {
  if (Outcome ok = check(storage_->solver->system(), task); !ok) return ok;
  return storage_->solve(task, answer);
}

Outcome Session::solve_near_last(const Task& task, Equilibrium& answer) {
  Storage& s = *storage_;
  if (Outcome ok = check(s.solver->system(), task); !ok) return ok;
  if (s.solved && s.workspace.reload(task, s.ln_K)) {
    int iterations = 0;
    if (settle(s.workspace, iterations) && s.finish_with(task, iterations, answer)) return Done{};
  }
  return s.solve(task, answer);
}

Outcome Session::solve_variants(const Task& task, std::span<const Variant> variants,
                                const VariantVisit& visit) {
  return variants_from(Start::task, task, variants, visit);
}

Outcome Session::solve_variants_near_last(const Task& task, std::span<const Variant> variants,
                                          const VariantVisit& visit) {
  return variants_from(Start::last, task, variants, visit);
}

Outcome Session::variants_from(Start start, const Task& task, std::span<const Variant> variants,
                               const VariantVisit& visit) {
  Storage& s = *storage_;
  Equilibrium answer;
  const Constants own = s.ln_K;
  if (Outcome nominal = start == Start::last ? solve_near_last(task, answer) : solve(task, answer); !nominal)
    return nominal;
  Workspace& w = s.workspace;
  Mark nominal(w);
  nominal.set(w);
  if (start == Start::task || s.eights_basis != w.basis()) s.eights.clear();
  s.eights_basis = w.basis();
  LaneTables tables(w);
  Task varied = task;
  const auto vary = [&](const Variant& variant) {
    varied.component_mol = variant.component_mol;
    varied.pH = task.pH;
    if (varied.pH && variant.pH) varied.pH->pH = *variant.pH;
  };
  std::optional<Session> alone;  // for those that leave the lanes
  constexpr int most_changes = 8;
  for (std::size_t first = 0; first < variants.size(); first += lanes) {
    const std::size_t count = std::min(lanes, variants.size() - first);
    const std::size_t at = start == Start::last ? first / lanes : 0;
    if (at == s.eights.size()) s.eights.push_back({LaneProblem(w), {}});
    auto& [problem, settled] = s.eights[at];
    std::array<bool, lanes> in_lane{};
    nominal.restore(w);
    for (std::size_t lane = 0; lane < lanes; ++lane) {
      const Variant& variant = variants[first + std::min(lane, count - 1)];
      vary(variant);
      in_lane[lane] = lane < count && check(s.solver->system(), varied) && w.reload(varied, variant.ln_K);
      if (!in_lane[lane]) w.reload(task, own);
      problem.set_amounts(lane, w);
      if (start == Start::task || !in_lane[lane] || !settled[lane]) problem.set_start(lane, w);
    }
    std::array<bool, lanes> arrived{};
    bool changed = true;
    for (int change = 0; change < most_changes && changed; ++change) {
      lane_newton(w, problem, tables, arrived);
      changed = false;
      for (std::size_t lane = 0; lane < count; ++lane)
        if (arrived[lane] && change_phases(w, problem, lane)) {
          arrived[lane] = false;
          changed = true;
        }
    }
    settled = {};
    for (std::size_t lane = 0; lane < count; ++lane) {
      const Variant& variant = variants[first + lane];
      vary(variant);
      s.ln_K = variant.ln_K;
      Outcome found = Done{};
      if (in_lane[lane] && arrived[lane]) {
        problem.copy_state(lane, w);
        settled[lane] = static_cast<bool>(s.finish_with(varied, 0, answer));
      }
      if (!settled[lane]) {
        if (!alone) alone.emplace(*s.solver);
        alone->ln_K() = variant.ln_K;
        found = alone->solve_near_last(varied, answer);
      }
      visit(first + lane, found, answer);
    }
  }
  s.ln_K = own;
  nominal.restore(w);
  s.solved = w.reload(task, own);  // where the next task starts from
  return Done{};
}

}  // namespace bathwright::speciation
