#include <algorithm>
#include <bathwright/matter/formula.hpp>
#include <bathwright/speciation/session.hpp>
#include <cmath>
#include <numeric>

#include "prepared.hpp"

namespace bathwright::forecast {
namespace {

using bath::Chemistry;
using bath::TankState;
using speciation::Equilibrium;

constexpr int days_a_week = 7;

/// What is put in by analysis, and what it costs.
struct Adding {
  TankState& state;
  Moved& moved;
  double cost = 0;

  void put(const Compiled::Feed& feed, double kg) {
    if (!(kg > 0)) return;
    for (std::size_t i = 0; i < state.component_mol.size(); ++i) {
      state.component_mol[i] += kg * feed.per_kg.component_mol[i];
      moved.in_mol[i] += kg * feed.per_kg.component_mol[i];
    }
    state.water_kg += kg * feed.per_kg.water_kg;
    cost += kg * feed.price_per_kg;
  }
};

}  // namespace

bool Calendar::works_on(int day) const {
  for (const Closed& one : closed)
    if (day >= one.first_day && day < one.first_day + one.days) return false;
  return (first_weekday + day) % days_a_week < days_per_week;
}

std::string_view name(Cause cause) {
  switch (cause) {
    case Cause::window:
      return "window";
    case Cause::by_product:
      return "by-product";
    case Cause::solid_at_work:
      return "solubility at work";
    case Cause::solid_at_rest:
      return "solubility at rest";
  }
  return "";
}

/// One run: the state, what it is made of, and what has been moved.
class Runner {
 public:
  Runner(const Prepared& p, const TankState& start, const Draw& draw)
      : p_(p),
        state_(start),
        draw_(draw),
        working_(p.chemistry.working()),
        idle_(p.chemistry.idle()),
        moved_{std::vector<double>(start.component_mol.size(), 0),
               std::vector<double>(start.component_mol.size(), 0)} {
    at_work_ = rates(p.tank, p.compiled, p.policy, draw, true);
    at_rest_ = rates(p.tank, p.compiled, p.policy, draw, false);
  }

  Result<Run> run(int last_day) {
    Run out;
    start_levels();
    const std::vector<double> first = state_.component_mol;
    if (auto seen = record(0, out); !seen) return seen.problems();
    for (int day = 0; day < last_day; ++day) {
      if (auto lived = live(day); !lived) return at_day(day, lived.problems());
      if (auto seen = record(day + 1, out); !seen) return at_day(day, seen.problems());
    }
    out.end = state_;
    balance(first, out);
    return out;
  }

  /// The amounts alone, day after day, without equilibria but where an addition needs one.
  Outcome pass(int first_day, int days) {
    for (int day = first_day; day < first_day + days; ++day)
      if (auto lived = live(day); !lived) return lived;
    return Done{};
  }
  [[nodiscard]] const TankState& state() const { return state_; }

 private:
  static Problems at_day(int day, Problems problems) {
    for (Problem& problem : problems) problem.where = "day " + std::to_string(day + 1) + " " + problem.where;
    return problems;
  }

  /// A drawn level keeps the solution neutral by way of what is found by charge.
  void start_levels() {
    if (draw_.level.empty()) return;
    const std::size_t by_charge = p_.chemistry.found_by_charge();
    double charge = 0;
    for (std::size_t i = 0; i < state_.component_mol.size(); ++i) {
      if (i != by_charge && i != 0) state_.component_mol[i] *= draw_.level[i];
      charge += p_.compiled.charge[i] * state_.component_mol[i];
    }
    state_.component_mol[by_charge] -= charge / p_.compiled.charge[by_charge];
    if (by_charge != 0) state_.component_mol[by_charge] = std::max(0.0, state_.component_mol[by_charge]);
  }

  Outcome live(int day) {
    const Policy& policy = p_.policy;
    const double V = p_.tank.working_volume.v;
    double worked_h = 0;
    if (policy.calendar.works_on(day)) {
      worked_h = std::min(24.0, policy.calendar.shifts_per_day * policy.calendar.hours_per_shift);
      if (auto done = stretch(at_work_, worked_h, V); !done) return done;
    }
    if (worked_h < 24)
      if (auto done = stretch(at_rest_, 24 - worked_h, V); !done) return done;
    for (const Decant& decant : policy.decants)
      if ((day + 1) % decant.every_days == 0) remove(std::min(1.0, decant.litres / V), decant.litres);
    for (const Compiled::Freeze& freeze : p_.compiled.freezes)
      if ((day + 1) % freeze.rule->every_days == 0) freeze_out(freeze);
    if (auto added = additions(day); !added) return added;
    const double before = state_.water_kg;
    if (auto filled = fill(state_, V, p_.chemistry); !filled) return filled;
    top_up_L_ += std::max(0.0, state_.water_kg - before);
    return Done{};
  }

  Outcome stretch(const Rates& r, double hours, double V) {
    cost_ += r.cost * hours;
    drag_out_L_ += r.drag_out_L * hours;
    waste_L_ += r.bleed_L * hours;
    top_up_L_ += r.top_up_L * hours;
    metal_mol_ += r.deposited_mol * hours;
    return advance(state_, r, hours, V, p_.chemistry, moved_);
  }

  void remove(double share, double litres) {
    for (std::size_t i = 0; i < state_.component_mol.size(); ++i) {
      moved_.out_mol[i] += share * state_.component_mol[i];
      state_.component_mol[i] *= 1 - share;
    }
    state_.water_kg *= 1 - share;
    waste_L_ += litres;
  }

  void freeze_out(const Compiled::Freeze& freeze) {
    const double V = p_.tank.working_volume.v;
    const double M = freeze.quantity->formula.molar_mass().v;
    const double held_mol =
        p_.chemistry.quantity_mol(*freeze.quantity, state_.component_mol) * (freeze.rule->litres / V);
    const double out_mol = held_mol - freeze.rule->left_g_per_L * freeze.rule->litres / M;
    if (!(out_mol > 0)) return;
    for (std::size_t i = 0; i < state_.component_mol.size(); ++i) {
      state_.component_mol[i] -= out_mol * freeze.per_mol.component_mol[i];
      moved_.out_mol[i] += out_mol * freeze.per_mol.component_mol[i];
    }
    state_.water_kg -= out_mol * freeze.per_mol.water_kg;
  }

  /// kg of each feed that bring the levels up to their aims at the mark, none negative: one feed after the
  /// other until none moves. The pH is met last, by the acid its equilibrium asks for.
  Outcome additions(int day) {
    Adding adding{state_, moved_};
    const double V = p_.tank.working_volume.v;
    constexpr int most_rounds = 40;
    for (int round = 0; round < most_rounds; ++round) {
      double moved = 0;
      for (const Compiled::Feed& feed : p_.compiled.feeds) {
        if (!feed.quantity || (day + 1) % feed.rule->every_days != 0) continue;
        const double M = feed.quantity->formula.molar_mass().v;
        const double missing_mol =
            feed.aim * V / M - p_.chemistry.quantity_mol(*feed.quantity, state_.component_mol);
        const double per_kg = p_.chemistry.quantity_mol(*feed.quantity, feed.per_kg.component_mol);
        if (!(per_kg > 0) || !(missing_mol > 0)) continue;
        adding.put(feed, missing_mol / per_kg);
        moved = std::max(moved, missing_mol * M / (feed.aim * V));
      }
      if (moved < 1e-12) break;
    }
    for (const Compiled::Feed& feed : p_.compiled.feeds) {
      if (feed.quantity || feed.rule->by != Replenishment::By::analysis) continue;
      if ((day + 1) % feed.rule->every_days != 0) continue;
      if (auto met = meet_pH(feed, adding); !met) return met;
    }
    cost_ += adding.cost;
    return Done{};
  }

  Outcome meet_pH(const Compiled::Feed& feed, Adding& adding) {
    const double acid_per_kg = feed.per_kg.component_mol[0];
    if (acid_per_kg == 0) return Done{};
    if (auto filled = fill(state_, p_.tank.working_volume.v, p_.chemistry); !filled) return filled;
    constexpr int most_rounds = 6;
    for (int round = 0; round < most_rounds; ++round) {
      speciation::Task task = bath::task_of(state_);
      task.pH = speciation::HeldPh{feed.aim, p_.chemistry.counter_ion()};
      if (auto solved = holding_.solve(task, held_); !solved) return solved;
      const double kg = held_.held_ph_mol / acid_per_kg;
      if (!(kg > 1e-9 * p_.tank.working_volume.v)) break;  // nothing, or the other way: this feed cannot help
      adding.put(feed, kg);
    }
    return Done{};
  }

  Outcome record(int day, Run& out) {
    const Chemistry& c = p_.chemistry;
    Day seen;
    seen.day = day;
    const double V = c.volume_L(state_);
    for (const bath::Quantity& q : c.type().quantities)
      seen.quantity_g_per_L.push_back(c.quantity_mol(q, state_.component_mol) * q.formula.molar_mass().v / V);
    const speciation::Task task = bath::task_of(state_);
    if (auto solved = working_.solve_near_last(task, now_); !solved) return solved;
    if (auto solved = idle_.solve_near_last(task, cold_); !solved) return solved;
    seen.pH = now_.pH();
    for (const std::size_t k : p_.watched) {
      const auto room = [&](const speciation::Solver& solver, const Equilibrium& answer) {
        return solver.covers(k) && std::isfinite(answer.saturation_index[k]) ? -answer.saturation_index[k]
                                                                             : bath::not_given;
      };
      seen.working_log10.push_back(room(c.working(), now_));
      seen.idle_log10.push_back(room(c.idle(), cold_));
    }
    seen.cost = cost_;
    seen.waste_L = waste_L_;
    seen.drag_out_L = drag_out_L_;
    seen.top_up_L = top_up_L_;
    seen.turnovers = p_.metal_at_aim_mol > 0 ? metal_mol_ / p_.metal_at_aim_mol : 0;
    out.days.push_back(std::move(seen));
    return Done{};
  }

  void balance(const std::vector<double>& first, Run& out) const {
    double charge = 0, ions = 0;
    for (std::size_t i = 0; i < first.size(); ++i) {
      const double now = state_.component_mol[i], in = moved_.in_mol[i], gone = moved_.out_mol[i];
      const double size = std::max({std::abs(first[i]), std::abs(now), std::abs(in), std::abs(gone), 1e-300});
      out.balance[p_.chemistry.components()[i]] = (now - first[i] - in + gone) / size;
      charge += p_.compiled.charge[i] * now;
      ions += std::abs(p_.compiled.charge[i] * now);
    }
    out.balance["charge"] = charge / std::max(ions, 1e-300);
  }

  const Prepared& p_;
  TankState state_;
  const Draw& draw_;
  speciation::Session working_, idle_;
  speciation::Session holding_{p_.chemistry.working()};
  Equilibrium now_, cold_, held_;
  Rates at_work_, at_rest_;
  Moved moved_;
  double cost_ = 0, waste_L_ = 0, drag_out_L_ = 0, top_up_L_ = 0, metal_mol_ = 0;
};

Result<Forecast> Forecast::prepare(const bath::Tank& tank, const Chemistry& chemistry, const Policy& policy) {
  auto prepared = std::make_shared<Prepared>(Prepared{tank, chemistry, policy, {}, {}, 0});
  auto compiled = compile(prepared->tank, prepared->chemistry, prepared->policy);
  if (!compiled) return compiled.problems();
  prepared->compiled = *std::move(compiled);
  for (const bath::WatchedSolid& solid : chemistry.type().solids)
    prepared->watched.push_back(*chemistry.working().system().solid(solid.name));
  for (const CompiledUse& use : prepared->compiled.uses) {
    if (use.use->deposits.empty()) continue;
    const bath::Quantity& metal = *chemistry.type().quantity(use.use->deposits);
    if (const bath::Aim* aim = tank.aim(metal.id))
      prepared->metal_at_aim_mol = aim->aim * tank.working_volume.v / metal.formula.molar_mass().v;
  }
  Forecast forecast;
  forecast.prepared_ = std::move(prepared);
  return forecast;
}

const Policy& Forecast::policy() const { return prepared_->policy; }
const Chemistry& Forecast::chemistry() const { return prepared_->chemistry; }

Result<Run> Forecast::run(const TankState& start, const Draw* draw) const {
  const Draw as_it_stands;
  return Runner(*prepared_, start, draw ? *draw : as_it_stands).run(prepared_->policy.horizon_days);
}

Result<std::optional<std::vector<double>>> Forecast::steady_state(const TankState& start) const {
  const Prepared& p = *prepared_;
  const Draw as_it_stands;
  const Rates work = rates(p.tank, p.compiled, p.policy, as_it_stands, true),
              rest = rates(p.tank, p.compiled, p.policy, as_it_stands, false);
  const double worked_h =
      std::min(24.0, p.policy.calendar.shifts_per_day * p.policy.calendar.hours_per_shift);
  double per_day = work.loss_per_h * worked_h + rest.loss_per_h * (24 - worked_h);
  per_day *= p.policy.calendar.days_per_week / static_cast<double>(days_a_week);
  for (const Decant& decant : p.policy.decants)
    per_day += decant.litres / p.tank.working_volume.v / decant.every_days;
  constexpr double most_days = 200'000, time_constants = 25;
  if (!(per_day * most_days > time_constants)) return std::optional<std::vector<double>>{};
  // Over whole rounds of the calendar and of what comes every so many days, so that the mean is one.
  int round = days_a_week;
  const auto fit = [&](int every) {
    constexpr int longest = 364;
    if (const int both = std::lcm(round, every); both <= longest) round = both;
  };
  for (const Decant& decant : p.policy.decants) fit(decant.every_days);
  for (const FreezeOut& freeze : p.policy.freeze_outs) fit(freeze.every_days);
  for (const Replenishment& rule : p.policy.replenishment) fit(rule.every_days);
  Runner runner(p, start, as_it_stands);
  const auto rounds = static_cast<int>(time_constants / per_day / round) + 1;
  if (auto passed = runner.pass(0, rounds * round); !passed) return passed.problems();
  const auto& quantities = p.chemistry.type().quantities;
  std::vector<double> levels(quantities.size(), 0);
  for (int day = 0; day < round; ++day) {
    if (auto passed = runner.pass(rounds * round + day, 1); !passed) return passed.problems();
    const double V = p.chemistry.volume_L(runner.state());
    for (std::size_t q = 0; q < quantities.size(); ++q)
      levels[q] += p.chemistry.quantity_mol(quantities[q], runner.state().component_mol) *
                   quantities[q].formula.molar_mass().v / V / round;
  }
  return std::optional(std::move(levels));
}

Result<std::optional<double>> Forecast::bleed_to_hold(const TankState& start, const std::string& quantity,
                                                      double g_per_L) const {
  const Prepared& p = *prepared_;
  const auto& all = p.chemistry.type().quantities;
  const auto at = std::ranges::find(all, quantity, &bath::Quantity::id);
  if (at == all.end())
    return Problem{Fault::bad_input, quantity, "is no quantity of " + p.chemistry.type().name, "", ""};
  const auto which = static_cast<std::size_t>(at - all.begin());
  const auto settles_at = [&](double extra) -> Result<double> {
    Policy policy = p.policy;
    policy.bleed_L_per_day += extra;
    auto other = prepare(p.tank, p.chemistry, policy);
    if (!other) return other.problems();
    const auto levels = other->steady_state(start);
    if (!levels) return HUGE_VAL;  // so little leaves that the salts crowd out the water
    return *levels ? (**levels)[which] : HUGE_VAL;
  };
  const auto without = settles_at(0);
  if (!without) return without.problems();
  if (*without <= g_per_L) return std::optional<double>{};
  // What settles is near p/(D + B): its inverse is nearly a straight line in the bleed B, and secants on it
  // are there in a few runs.
  double low = 0, low_inverse = 1 / *without;
  double high = 0.01 * p.tank.working_volume.v, wanted = 1 / g_per_L;
  constexpr int most_runs = 30;
  for (int run = 0; run < most_runs; ++run) {
    const auto level = settles_at(high);
    if (!level) return level.problems();
    const double high_inverse = 1 / *level;
    if (std::abs(high_inverse - wanted) < 1e-6 * wanted) return std::optional(high);
    const double slope = (high_inverse - low_inverse) / (high - low);
    const double next = slope > 0 ? std::max(high + (wanted - high_inverse) / slope, high / 4) : 2 * high;
    low = high, low_inverse = high_inverse;
    high = std::min(next, 16 * high);
  }
  return Problem{Fault::not_converged, quantity, "no bleed was found that holds it", "",
                 "Check the policy: something else may hold or drive this level."};
}

}  // namespace bathwright::forecast
