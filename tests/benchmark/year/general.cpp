#include "general.hpp"

#include <cvode/cvode.h>
#include <nvector/nvector_serial.h>
#include <sunnonlinsol/sunnonlinsol_fixedpoint.h>

#include <algorithm>
#include <cmath>
#include <cstdio>
#include <cstdlib>
#include <numbers>
#include <numeric>

#include "../fixed_point.hpp"

namespace bathwright::benchmark {
namespace {

using bath::TankState;
using forecast::Compiled;
using forecast::Replenishment;

/// Tolerances ten times tighter than what the two answers are compared to.
constexpr double relative_tolerance = 1e-9, absolute_mol = 1e-9;

void must(bool well, const char* what) {
  if (well) return;
  std::fprintf(stderr, "general solvers: %s\n", what);
  std::exit(1);
}

/// Equilibria of one temperature, each from the one before.
class Speciation {
 public:
  Speciation(const speciation::Solver& solver, const speciation::Task& task)
      : solver_(solver), finder_(kinsol()), equations_(solver, task) {}

  void solve(const TankState& state) {
    const speciation::Task task = bath::task_of(state);
    equations_.set_totals(task);
    if (u_.empty()) u_ = equations_.cold_start();
    if (iterate(*finder_, equations_, u_)) return;
    u_ = equations_.cold_start();
    must(iterate(*finder_, equations_, u_), "KINSOL found no equilibrium");
  }
  /// ln a of a component.
  [[nodiscard]] double ln_a(std::size_t component) const { return u_[component]; }
  [[nodiscard]] double pH() const { return -u_[0] / std::numbers::ln10; }
  [[nodiscard]] double headroom_log10(std::size_t solid) const {
    const speciation::SystemSolid& of = solver_.system().solids()[solid];
    double ln = solver_.ln_K().solids[solid] - of.water * equations_.ln_water_activity();
    for (std::size_t i = 0; i < of.made_of.size(); ++i) ln -= of.made_of[i] * ln_a(i);
    return ln / std::numbers::ln10;
  }

 private:
  const speciation::Solver& solver_;
  std::unique_ptr<RootFinder> finder_;
  Equations equations_;
  std::vector<double> u_;
};

/// dn/dt of the tank at its mark, per hour; the last is kg of water.
struct Flow {
  const bath::Chemistry* chemistry;
  units::Celsius temperature;
  forecast::Amounts in;
  double lost_L_per_h = 0, volume_L = 0;
  std::vector<double> mol;  ///< room

  double volume_of(std::span<const double> y) {
    mol.assign(y.begin(), y.end() - 1);
    return chemistry->volume_L({mol, y.back(), temperature});
  }

  /// Water runs in so that the volume stays: dV/dt = 0.
  void operator()(std::span<double> y, std::span<double> dy) {
    const std::size_t n = y.size() - 1;
    const double k = lost_L_per_h / volume_L;
    for (std::size_t i = 0; i < n; ++i) dy[i] = in.component_mol[i] - k * y[i];
    dy[n] = in.water_kg - k * y[n];
    // The derivative of V along dy, and along water alone.
    constexpr double little_h = 1e-4, little_kg = 1e-3;
    const double here = volume_of(y);
    ahead.assign(y.begin(), y.end());
    for (std::size_t i = 0; i <= n; ++i) ahead[i] += little_h * dy[i];
    const double rises = (volume_of(ahead) - here) / little_h;
    ahead.assign(y.begin(), y.end());
    ahead[n] += little_kg;
    dy[n] -= rises / ((volume_of(ahead) - here) / little_kg);
  }
  std::vector<double> ahead;
};

int slopes(double, N_Vector y, N_Vector dy, void* user) {
  const auto size = static_cast<std::size_t>(N_VGetLength(y));
  (*static_cast<Flow*>(user))({N_VGetArrayPointer(y), size}, {N_VGetArrayPointer(dy), size});
  return 0;
}

/// CVODE with Adams' formulas and a fixed point: nothing here is stiff.
class Integrator {
 public:
  explicit Integrator(std::size_t size) {
    SUNContext_Create(nullptr, &context_);
    y_ = N_VNew_Serial(static_cast<sunindextype>(size), context_);
    memory_ = CVodeCreate(CV_ADAMS, context_);
    N_VConst(1, y_);
    must(CVodeInit(memory_, slopes, 0, y_) == CV_SUCCESS, "CVodeInit");
    CVodeSStolerances(memory_, relative_tolerance, absolute_mol);
    nonlinear_ = SUNNonlinSol_FixedPoint(y_, 0, context_);
    CVodeSetNonlinearSolver(memory_, nonlinear_);
    CVodeSetMaxNumSteps(memory_, 10000);
  }
  Integrator(const Integrator&) = delete;
  Integrator& operator=(const Integrator&) = delete;
  ~Integrator() {
    CVodeFree(&memory_);
    SUNNonlinSolFree(nonlinear_);
    N_VDestroy(y_);
    SUNContext_Free(&context_);
  }

  void pass(Flow& flow, TankState& state, double hours) {
    double* y = N_VGetArrayPointer(y_);
    std::ranges::copy(state.component_mol, y);
    y[state.component_mol.size()] = state.water_kg;
    CVodeReInit(memory_, 0, y_);
    CVodeSetUserData(memory_, &flow);
    CVodeSetStopTime(memory_, hours);
    double reached = 0;
    must(CVode(memory_, hours, y_, &reached, CV_NORMAL) >= 0, "CVODE stopped");
    std::copy_n(y, state.component_mol.size(), state.component_mol.begin());
    state.water_kg = y[state.component_mol.size()];
  }

 private:
  SUNContext context_ = nullptr;
  N_Vector y_ = nullptr;
  SUNNonlinearSolver nonlinear_ = nullptr;
  void* memory_ = nullptr;
};

}  // namespace

struct GeneralYear::Parts {
  const bath::Tank& tank;
  const bath::Chemistry& chemistry;
  const forecast::Policy& policy;
  Compiled compiled;
  std::vector<std::size_t> watched;
  Integrator integrator;

  Parts(const bath::Tank& t, const bath::Chemistry& c, const forecast::Policy& p)
      : tank(t), chemistry(c), policy(p), integrator(c.components().size() + 1) {
    auto made = forecast::compile(tank, chemistry, policy);
    must(static_cast<bool>(made), "the policy cannot be compiled");
    compiled = *std::move(made);
    for (const auto& solid : chemistry.type().solids)
      watched.push_back(*chemistry.working().system().solid(solid.name));
  }

  Flow flow_of(const TankState& start, const forecast::Draw& draw) const {
    Flow flow{&chemistry, start.temperature, {}, 0, tank.working_volume.v, {}, {}};
    const double hours = policy.calendar.hours_per_shift;
    flow.in.component_mol.assign(start.component_mol.size(), 0);
    for (std::size_t w = 0; w < compiled.work.size(); ++w) {
      const std::size_t u = compiled.work[w];
      const double units_per_h =
          policy.work[w].per_shift.value * (draw.work.empty() ? 1 : draw.work[w]) / hours;
      forecast::add(flow.in,
                    forecast::per_unit(compiled.uses[u], draw.effects.empty() ? 1 : draw.effects[u], 1),
                    units_per_h);
    }
    flow.in.water_kg -= policy.evaporation_L_per_h.value * draw.evaporation;
    flow.lost_L_per_h = policy.bleed_L_per_h(true) + policy.area_m2_per_shift.value / hours * draw.area *
                                                          policy.drag_out_L_per_m2.value * draw.drag_out;
    return flow;
  }

  /// Water to the mark, or back.
  void level(TankState& state) const {
    for (int round = 0; round < 60; ++round) {
      const double missing = tank.working_volume.v - chemistry.volume_L(state);
      state.water_kg += missing;
      if (std::abs(missing) < 1e-11 * tank.working_volume.v) return;
    }
  }

  static void put(TankState& state, const Compiled::Feed& feed, double kg) {
    for (std::size_t i = 0; i < state.component_mol.size(); ++i)
      state.component_mol[i] += kg * feed.per_kg.component_mol[i];
    state.water_kg += kg * feed.per_kg.water_kg;
  }

  /// Every level up to its aim. The aims are of different ions: one pass and its repetition.
  void meet_levels(TankState& state, bool at_shift_end) const {
    const double V = std::max(tank.working_volume.v, chemistry.volume_L(state));
    for (int pass = 0; pass < 3; ++pass)
      for (const Compiled::Feed& feed : compiled.feeds) {
        if (!feed.quantity || (feed.rule->every_shifts > 0) != at_shift_end) continue;
        const double missing_mol = feed.aim * V / feed.quantity->formula.molar_mass().v -
                                   chemistry.quantity_mol(*feed.quantity, state.component_mol);
        if (missing_mol > 0)
          put(state, feed, missing_mol / chemistry.quantity_mol(*feed.quantity, feed.per_kg.component_mol));
      }
  }

  /// The kg of acid or alkali that bring the pH to its aim with the tank at its mark: secants, each point an
  /// equilibrium from the last.
  void meet_pH(TankState& state, Speciation& working) const {
    for (const Compiled::Feed& feed : compiled.feeds) {
      if (feed.quantity || feed.rule->every_shifts == 0) continue;
      const TankState before = state;
      const auto off = [&](double kg) {
        state = before;
        put(state, feed, kg);
        level(state);
        working.solve(state);
        return working.pH() - feed.aim;
      };
      double low = 0, f_low = off(0);
      const bool raises = feed.per_kg.component_mol[0] < 0;
      if ((f_low < 0) != raises) continue;  // it cannot help
      // Of the whole shift's acid: a first guess from the last time.
      double kg = guess_kg > 0 ? guess_kg : 1e-3 * tank.working_volume.v;
      for (int round = 0; round < 30; ++round) {
        const double f = off(kg);
        if (std::abs(f) < 1e-9) break;
        const double next = kg - f * (kg - low) / (f - f_low);
        low = kg, f_low = f;
        kg = next;
        if (std::abs(kg - low) < 1e-8 * tank.working_volume.v) break;
      }
      guess_kg = kg;
    }
  }
  mutable double guess_kg = 0;
};

GeneralYear::GeneralYear(const bath::Tank& tank, const bath::Chemistry& chemistry,
                         const forecast::Policy& policy)
    : parts_(std::make_unique<Parts>(tank, chemistry, policy)) {}
GeneralYear::~GeneralYear() = default;

std::vector<forecast::Day> GeneralYear::run(const TankState& start, const forecast::Draw& draw) {
  Parts& p = *parts_;
  const bath::Chemistry& c = p.chemistry;
  TankState state = start;
  Speciation working(c.working(), bath::task_of(start)), idle(c.idle(), bath::task_of(start));
  p.guess_kg = 0;
  Flow flow = p.flow_of(start, draw);
  std::vector<forecast::Day> days;
  const auto look = [&](int day) {
    forecast::Day seen;
    seen.day = day;
    for (const bath::Quantity& q : c.type().quantities)
      seen.quantity_g_per_L.push_back(c.quantity_g_per_L(q, state));
    working.solve(state);
    idle.solve(state);
    seen.pH = working.pH();
    for (const std::size_t k : p.watched) {
      seen.working_log10.push_back(working.headroom_log10(k));
      seen.idle_log10.push_back(idle.headroom_log10(k));
    }
    days.push_back(std::move(seen));
  };
  look(0);
  for (int day = 0; day < p.policy.horizon_days; ++day) {
    for (int shift = 0; shift < p.policy.calendar.shifts_per_day; ++shift) {
      p.integrator.pass(flow, state, p.policy.calendar.hours_per_shift);
      p.meet_levels(state, true);
      p.level(state);
      p.meet_pH(state, working);
    }
    p.meet_levels(state, false);
    p.level(state);
    look(day + 1);
  }
  return days;
}

}  // namespace bathwright::benchmark
