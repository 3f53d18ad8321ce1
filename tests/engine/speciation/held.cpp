// Held pH and held gas pressures.
#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;

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
