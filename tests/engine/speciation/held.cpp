// Held pH and held gas pressures.
#include <random>

#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;
using activity::ModelKind;

TEST_CASE("a pH is held with any counter-ion, and charge stays balanced", "[property]") {
  const Solver solver = solver_of({"Na^+", "Cl^-", "SO4^2-", "Ca^2+", "CO3^2-"});
  for (const char* counter_ion : {"Na^+", "Cl^-", "SO4^2-", "Ca^2+"})
    for (const double pH : {2.5, 7.0, 11.5}) {
      INFO(counter_ion << " at pH " << pH);
      Task task = task_of(solver.system(),
                          {{"Na^+", 0.5}, {"Cl^-", 0.2}, {"SO4^2-", 0.3}, {"Ca^2+", 0.3}, {"CO3^2-", 0.15}});
      task.pH = HeldPh{pH, *solver.system().component(counter_ion)};
      const Equilibrium answer = solved(solver, task);
      CHECK(answer.pH() == Approx(pH).margin(1e-9).epsilon(0));
      CHECK(answer.residuals.charge_mol_per_kg < 1e-10);
      CHECK(answer.residuals.mass_balance < 1e-12);
    }
}

TEST_CASE("the acid that holds a pH is the acid that reaches it", "[property]") {
  const Solver solver = solver_of({"Na^+", "Cl^-", "CO3^2-"});
  Task held = task_of(solver.system(), {{"Na^+", 0.2}, {"CO3^2-", 0.1}, {"Cl^-", 0}});
  held.pH = HeldPh{6, *solver.system().component("Cl^-")};
  const double acid = solved(solver, held).held_ph_mol;
  CHECK(acid > 0.1);
  const Task given = task_of(solver.system(), {{"Na^+", 0.2}, {"CO3^2-", 0.1}, {"Cl^-", acid}});
  CHECK(solved(solver, given).pH() == Approx(6).margin(1e-7).epsilon(0));
}

TEST_CASE("water under carbon dioxide of the air has pH 5.6", "[reference]") {
  // 4.0e-4 bar, 25 degC: [H^+]^2 = K_H K_1 p with pK_H 1.47 and pK_1 6.35 gives pH 5.61; common textbook
  // value.
  const Solver solver = solver_of({"CO3^2-"});
  Task task = task_of(solver.system(), {});
  task.gases.push_back({*solver.system().gas("CO2"), 4.0e-4});
  const Equilibrium answer = solved(solver, task);
  CHECK(answer.pH() == Approx(5.61).margin(0.02).epsilon(0));
  CHECK(answer.gas_bar[*solver.system().gas("CO2")] == Approx(4.0e-4).margin(0).epsilon(1e-9));
  CHECK(answer.gas_mol[0] > 1.2e-5);
}

TEST_CASE("alkali under a held pressure of carbon dioxide takes it up", "[property]") {
  const Solver solver = solver_of({"CO3^2-", "Na^+"});
  Task task = task_of(solver.system(), {{"Na^+", 1}});
  task.gases.push_back({*solver.system().gas("CO2"), 1.0});
  const Equilibrium answer = solved(solver, task);
  CHECK(answer.gas_mol[0] ==
        Approx(1.02).margin(0.04).epsilon(0));  // bicarbonate and what dissolves beside it
  CHECK(molality_of(solver, answer, "HCO3^-") == Approx(1).margin(0.05).epsilon(0));
}

TEST_CASE("pH and gas held at once", "[property]") {
  const Solver solver = solver_of({"CO3^2-", "Na^+", "Cl^-"});
  Task task = task_of(solver.system(), {{"Na^+", 0.1}, {"Cl^-", 0.1}});
  task.gases.push_back({*solver.system().gas("CO2"), 4.0e-4});
  task.pH = HeldPh{8.3, *solver.system().component("Na^+")};
  const Equilibrium answer = solved(solver, task);
  CHECK(answer.pH() == Approx(8.3).margin(1e-9).epsilon(0));
  CHECK(answer.gas_bar[*solver.system().gas("CO2")] == Approx(4.0e-4).margin(0).epsilon(1e-9));
}

namespace {

struct Held {
  int asked = 0, refused = 0;
};

/// Usual baths, each held within a pH unit of its own pH by the ion of its own alkali or acid.
Held hold_near_own_pH(const BathSystem& bath, ModelKind kind, unsigned seed, int cases) {
  const Solver solver = solver_of(bath.components(), room, kind);
  const ChemicalSystem& system = solver.system();
  std::mt19937_64 random(seed);
  std::uniform_real_distribution<double> away(-1, 1);
  Held found;
  for (int number = 0; number < cases; ++number) {
    Task task = near_usual(bath, system, 2, random);
    const double own = solved(solver, task).pH(), more = away(random);
    const std::size_t ion = *system.component(more > 0 ? bath.cation : bath.anion);
    task.pH = HeldPh{own + more, ion};
    INFO(activity::name(kind) << ", " << bath.name << ", seed " << seed << ", case " << number << ": pH "
                              << own + more << " with " << system.components()[ion] << ", own pH " << own);
    const auto held = solver.solve(task);
    ++found.asked;
    if (!held) {
      ++found.refused;
      continue;
    }
    CHECK(held->pH() == Approx(own + more).margin(1e-8).epsilon(0));
    CHECK(held->residuals.charge_mol_per_kg < 1e-10);
    // The acid or alkali that holds the pH is the one that reaches it. Where the energy does not curve upward
    // another answer may be found.
    task.pH.reset();
    task.component_mol[0] += held->held_ph_mol;
    task.component_mol[ion] -= held->held_ph_mol / system.species()[ion].charge;
    const Equilibrium given = solved(solver, task);
    if (bath.name != "pyrophosphate copper" || kind != ModelKind::pitzer)
      CHECK(given.pH() == Approx(own + more).margin(1e-6).epsilon(0));
  }
  return found;
}

}  // namespace

TEST_CASE("a pH near a bath's own is held, and its acid or alkali reaches it when given", "[property]") {
  for (const ModelKind kind : {ModelKind::davies, ModelKind::debye_huckel, ModelKind::sit, ModelKind::pitzer})
    for (const BathSystem& bath : bath_systems()) {
      if (kind == ModelKind::pitzer && bath.name == "pyrophosphate copper") continue;  // see below
      INFO(activity::name(kind) << ", " << bath.name);
      const Held found = hold_near_own_pH(bath, kind, 20260806, 60);
      CHECK(found.asked == 60);
      CHECK(found.refused == 0);
    }
}

// Not mended yet: pyrophosphate under Pitzer, where the model has several equilibria, is refused 1 in 50
// times.
TEST_CASE("a pH near a bath's own is never refused", "[property][!mayfail]") {
  CHECK(hold_near_own_pH(bath_systems()[1], ModelKind::pitzer, 20260807, 400).refused == 0);
}

TEST_CASE("a pH that a trace of alkali reaches is held by it", "[property]") {
  // 0.00007 mol NaOH; the counter-ion itself is a trace, which a step on the way may take below zero.
  for (const ModelKind kind : {ModelKind::davies, ModelKind::debye_huckel, ModelKind::sit}) {
    INFO(activity::name(kind));
    CHECK(hold_near_own_pH(bath_systems()[1], kind, 20260807, 400).refused == 0);
  }
  const Solver solver = solver_of(bath_systems()[0].components(), {5}, ModelKind::davies);
  Task task = task_of(solver.system(), {{"H^+", 0.0001685501730390726},
                                        {"Na^+", 0.0001},
                                        {"Cl^-", 0.47466013400063339},
                                        {"H3BO3", 0.3584057904149085},
                                        {"Ni^2+", 2.5909544206517787},
                                        {"SO4^2-", 2.3537586287379817}});
  let_precipitate(task, solver.system(), bath_systems()[0]);
  task.pH = HeldPh{4.31, *solver.system().component("Na^+")};
  CHECK(solver.solve(task));
}
