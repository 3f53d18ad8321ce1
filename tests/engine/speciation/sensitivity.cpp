// Derivatives against differences of whole solves, uncertainties against samples.
#include <bathwright/speciation/sensitivity.hpp>
#include <bathwright/speciation/session.hpp>
#include <numbers>
#include <random>

#include "../../support/bath_systems.hpp"
#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;
using activity::ModelKind;

namespace {

struct Case {
  Solver solver;
  Task task;
};

Case usual(const BathSystem& bath, ModelKind kind, units::Celsius t = room) {
  Solver solver = solver_of(bath.components(), t, kind);
  std::mt19937 random(1);
  Task task = near_usual(bath, solver.system(), 1, random);
  return {std::move(solver), std::move(task)};
}

/// Central differences of whole solves: `move` changes task and constants by h.
template <class Move>
Shift difference(const Solver& solver, const Task& task, double h, Move move) {
  const auto moved = [&](double by) {
    Session session(solver);
    Task changed = task;
    move(changed, session.ln_K(), by);
    Equilibrium answer;
    REQUIRE(session.solve(changed, answer));
    return answer;
  };
  const Equilibrium up = moved(h), down = moved(-h);
  Shift slope;
  for (std::size_t j = 0; j < up.molality.size(); ++j) {
    slope.ln_molality.push_back((std::log(up.molality[j]) - std::log(down.molality[j])) / (2 * h));
    slope.ln_activity.push_back((up.ln_activity[j] - down.ln_activity[j]) / (2 * h));
  }
  slope.ln_water_activity = (up.ln_water_activity - down.ln_water_activity) / (2 * h);
  slope.ln_water_kg = std::log(up.water_kg / down.water_kg) / (2 * h);
  for (std::size_t k = 0; k < up.solid_mol.size(); ++k) {
    slope.solid_mol.push_back((up.solid_mol[k] - down.solid_mol[k]) / (2 * h));
    slope.saturation_index.push_back((up.saturation_index[k] - down.saturation_index[k]) / (2 * h));
  }
  for (std::size_t g = 0; g < up.gas_bar.size(); ++g)
    slope.ln_gas_bar.push_back(std::log(up.gas_bar[g] / down.gas_bar[g]) / (2 * h));
  slope.held_ph_mol = (up.held_ph_mol - down.held_ph_mol) / (2 * h);
  return slope;
}

/// The largest difference between two shifts, relative to the larger of 1 and the largest entry.
double distance(const Shift& a, const Shift& b) {
  double worst = std::max(std::abs(a.ln_water_activity - b.ln_water_activity),
                          std::abs(a.ln_water_kg - b.ln_water_kg)),
         largest = 1;
  const auto compare = [&](const std::vector<double>& p, const std::vector<double>& q) {
    for (std::size_t i = 0; i < p.size(); ++i) {
      if (!std::isfinite(q[i])) continue;  // absent: ln 0
      worst = std::max(worst, std::abs(p[i] - q[i]));
      largest = std::max(largest, std::abs(q[i]));
    }
  };
  compare(a.ln_molality, b.ln_molality);
  compare(a.ln_activity, b.ln_activity);
  compare(a.solid_mol, b.solid_mol);
  compare(a.saturation_index, b.saturation_index);
  compare(a.ln_gas_bar, b.ln_gas_bar);
  return std::max(worst, std::abs(a.held_ph_mol - b.held_ph_mol)) / largest;
}

void check_all(const Solver& solver, const Task& task) {
  const Equilibrium answer = solved(solver, task);
  const auto sensitivity = Sensitivity::at(solver, task, answer);
  REQUIRE(sensitivity);
  const std::size_t components = task.component_mol.size(), species = answer.molality.size();
  for (std::size_t i = 0; i < components; ++i) {
    if (i > 0 && task.component_mol[i] == 0) continue;
    INFO(solver.system().components()[i]);
    Change change;
    change.component_mol.assign(components, 0);
    change.component_mol[i] = 1;
    const double h = 1e-5 * std::max(std::abs(task.component_mol[i]), 1e-3);
    CHECK(distance(sensitivity->respond(change),
                   difference(solver, task, h,
                              [i](Task& t, Constants&, double by) { t.component_mol[i] += by; })) < 2e-5);
  }
  for (std::size_t j = components; j < species; j += 3) {
    INFO(solver.system().species()[j].name);
    Change change;
    change.ln_K_species.assign(species, 0);
    change.ln_K_species[j] = 1;
    CHECK(distance(sensitivity->respond(change),
                   difference(solver, task, 1e-4,
                              [j](Task&, Constants& ln_K, double by) { ln_K.species[j] += by; })) < 2e-6);
  }
  for (std::size_t k = 0; k < answer.solid_mol.size(); ++k) {
    if (answer.solid_mol[k] == 0) continue;
    INFO(solver.system().solids()[k].name);
    Change change;
    change.ln_K_solids.assign(answer.solid_mol.size(), 0);
    change.ln_K_solids[k] = 1;
    CHECK(distance(sensitivity->respond(change),
                   difference(solver, task, 1e-4,
                              [k](Task&, Constants& ln_K, double by) { ln_K.solids[k] += by; })) < 2e-6);
  }
  Change water;
  water.water_kg = 1;
  CHECK(distance(sensitivity->respond(water),
                 difference(solver, task, 1e-5, [](Task& t, Constants&, double by) { t.water_kg += by; })) <
        2e-6);
}

}  // namespace

TEST_CASE("derivatives of three baths are those of differences, in every model", "[property]") {
  for (const BathSystem& bath : bath_systems())
    for (const ModelKind kind : {ModelKind::davies, ModelKind::debye_huckel, ModelKind::pitzer}) {
      INFO(bath.name << ", " << activity::name(kind));
      const auto [solver, task] = usual(bath, kind);
      check_all(solver, task);
    }
}

TEST_CASE("derivatives with a solid in excess, a held gas and a held pH", "[property]") {
  const Solver solver = solver_of({"Ca^2+", "SO4^2-", "Na^+", "Cl^-", "CO3^2-"});
  Task task = task_of(solver.system(), {{"Na^+", 0.5}, {"Cl^-", 0.5}});
  set_rule(task, solver.system(), "CaSO4.2H2O (gypsum)", SolidRule::in_excess);
  task.gases.push_back({*solver.system().gas("CO2"), 4e-4});
  task.pH = HeldPh{7.5, *solver.system().component("Na^+")};
  check_all(solver, task);
  const Equilibrium answer = solved(solver, task);
  const auto sensitivity = Sensitivity::at(solver, task, answer);
  REQUIRE(sensitivity);
  Change higher;
  higher.pH = 1;
  CHECK(distance(sensitivity->respond(higher),
                 difference(solver, task, 1e-5, [](Task& t, Constants&, double by) { t.pH->pH += by; })) <
        2e-6);
}

TEST_CASE("the derivative to temperature is that of whole solves a kelvin apart", "[property]") {
  for (const BathSystem& bath : bath_systems()) {
    INFO(bath.name);
    const auto [solver, task] = usual(bath, ModelKind::pitzer, {42.5});
    const Equilibrium answer = solved(solver, task);
    const auto sensitivity = Sensitivity::at(solver, task, answer);
    const auto kelvin = Sensitivity::per_kelvin(solver, answer);
    REQUIRE(sensitivity);
    REQUIRE(kelvin);
    const Shift shift = sensitivity->respond(*kelvin);
    const auto warm = solver.at_temperature({42.6}), cool = solver.at_temperature({42.4});
    REQUIRE(warm);
    REQUIRE(cool);
    const Equilibrium up = solved(*warm, task), down = solved(*cool, task);
    CHECK(shift.pH() == Approx((up.pH() - down.pH()) / 0.2).margin(1e-6).epsilon(1e-4));
    for (std::size_t j = 0; j < answer.molality.size(); ++j) {
      INFO(solver.system().species()[j].name);
      CHECK(shift.ln_activity[j] ==
            Approx((up.ln_activity[j] - down.ln_activity[j]) / 0.2).margin(1e-5).epsilon(1e-3));
    }
  }
}

TEST_CASE("uncertainties are the spread of samples", "[property]") {
  // Constants and totals drawn from narrow normal distributions: first order must hold. 3000 samples give a
  // standard deviation within 1.3 % (one sigma); 6 % is more than four of those.
  constexpr int samples = 3000;
  constexpr double total_u = 0.004;
  for (const BathSystem& bath : bath_systems()) {
    INFO(bath.name);
    auto [solver, task] = usual(bath, ModelKind::davies);
    task.solids.clear();
    const Equilibrium answer = solved(solver, task);
    InputUncertainty input;
    for (const double mol : task.component_mol) input.component_mol.push_back(total_u * std::abs(mol));
    input.component_mol[0] = 0;
    const auto u = uncertainty(solver, task, answer, input);
    REQUIRE(u);
    const auto exact_constants = [&] {
      double pH = 0;
      const auto sensitivity = Sensitivity::at(solver, task, answer);
      for (std::size_t i = 1; i < input.component_mol.size(); ++i) {
        Change change;
        change.component_mol.assign(input.component_mol.size(), 0);
        change.component_mol[i] = input.component_mol[i];
        pH = std::hypot(pH, sensitivity->respond(change).pH());
      }
      return pH;
    }();
    std::mt19937 random(20261201);
    std::normal_distribution<double> normal;
    Session session(solver);
    double sum = 0, square = 0;
    Equilibrium sample;
    for (int n = 0; n < samples; ++n) {
      Task drawn = task;
      for (std::size_t i = 1; i < drawn.component_mol.size(); ++i)
        drawn.component_mol[i] += input.component_mol[i] * normal(random);
      REQUIRE(session.solve_near_last(drawn, sample));
      const double off = sample.pH() - answer.pH();
      sum += off;
      square += off * off;
    }
    const double spread = std::sqrt(square / samples - (sum / samples) * (sum / samples));
    CHECK(exact_constants == Approx(spread).margin(0).epsilon(0.06));
    CHECK(u->pH > exact_constants);
  }
}
