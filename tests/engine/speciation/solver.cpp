// Solutions without solids: published pH, balances, and what must not matter.
#include <algorithm>
#include <bathwright/activity/debye_huckel_slope.hpp>
#include <cmath>
#include <numbers>
#include <random>

#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;
using activity::ModelKind;

namespace {

constexpr ModelKind all_models[] = {ModelKind::davies, ModelKind::debye_huckel, ModelKind::pitzer};

void check_residuals(const Equilibrium& answer) {
  CHECK(answer.residuals.mass_balance < 1e-12);
  CHECK(answer.residuals.mass_action < 1e-10);
  CHECK(answer.residuals.saturation < 1e-8);
  CHECK(answer.residuals.charge_mol_per_kg < 1e-10);
  CHECK(answer.residuals.negative_solid == 0);
}

}  // namespace

TEST_CASE("pure water has half of pKw as its pH", "[reference]") {
  // Marshall & Franck 1981, from memory; half of the tolerance of pKw in equilibria.cpp.
  for (const ModelKind kind : all_models)
    for (const auto& [t, pKw] : {std::pair{0.0, 14.94}, {25.0, 13.995}, {50.0, 13.27}, {100.0, 12.25}}) {
      INFO(activity::name(kind) << " " << t << " degC");
      const Solver solver = solver_of({}, {t}, kind);
      const Equilibrium answer = solved(solver, task_of(solver.system(), {}));
      CHECK(answer.pH() == Approx(pKw / 2).margin(0.03).epsilon(0));
      check_residuals(answer);
    }
}

TEST_CASE("primary pH standards at 25 degC", "[reference]") {
  // tests/reference/ph.csv: Buck et al. 2002 and others named there; 0.02 is the target for any model.
  struct Row {
    const char* standard;
    Names components;
    Amounts mol;  // H^+ where the salts bring it
    double pH;
  };
  for (const Row& row : std::vector<Row>{
           {"HCl 0.1", {"Cl^-"}, {{"Cl^-", 0.1}}, 1.094},
           {"phosphate 0.025 + 0.025",
            {"K^+", "Na^+", "PO4^3-"},
            {{"H^+", 0.075}, {"K^+", 0.025}, {"Na^+", 0.05}, {"PO4^3-", 0.05}},
            6.865},
           {"borax 0.01", {"Na^+", "H3BO3"}, {{"H^+", -0.02}, {"Na^+", 0.02}, {"H3BO3", 0.04}}, 9.180},
       }) {
    INFO(row.standard);
    const Solver solver = solver_of(row.components);
    const Equilibrium answer = solved(solver, task_of(solver.system(), row.mol));
    CHECK(answer.pH() == Approx(row.pH).margin(0.02).epsilon(0));
    check_residuals(answer);
  }
}

TEST_CASE("the carbonate pH standard at 25 degC, on the scale standards are defined on", "[reference]") {
  // A trace of chloride shows gamma_Cl, which the convention sets: pH = -log10(a_H gamma_Cl) - A I^0.5 / (1
  // + 1.5 I^0.5), Buck et al. 2002, Pure Appl. Chem. 74:2169. Unscaled, Pitzer's single ions give 9.990.
  const Solver solver = solver_of({"Na^+", "CO3^2-", "Cl^-"});
  const Task task =
      task_of(solver.system(), {{"H^+", 0.025}, {"Na^+", 0.075 + 1e-6}, {"CO3^2-", 0.05}, {"Cl^-", 1e-6}});
  const Equilibrium answer = solved(solver, task);
  const double root = std::sqrt(answer.ionic_strength);
  const double A = 3 * activity::osmotic_slope(room) / std::numbers::ln10;
  const double ln_gamma_Cl = answer.ln_gamma[*solver.system().species_index("Cl^-")];
  const double conventional = answer.pH() - ln_gamma_Cl / std::numbers::ln10 - A * root / (1 + 1.5 * root);
  CHECK(conventional == Approx(10.012).margin(0.02).epsilon(0));
}

TEST_CASE("scaling the amounts and the water together changes nothing", "[property]") {
  for (const ModelKind kind : all_models) {
    const Solver solver = solver_of({"Ni^2+", "SO4^2-", "Cl^-", "H3BO3"}, room, kind);
    Task task = task_of(solver.system(), {{"Ni^2+", 1.1}, {"SO4^2-", 0.9}, {"Cl^-", 0.41}, {"H3BO3", 0.6}});
    const Equilibrium one = solved(solver, task);
    for (double& mol : task.component_mol) mol *= 3000;
    task.water_kg *= 3000;
    const Equilibrium tank = solved(solver, task);
    INFO(activity::name(kind));
    CHECK(tank.pH() == Approx(one.pH()).margin(1e-9).epsilon(0));
    CHECK(tank.water_kg == Approx(3000 * one.water_kg).margin(0).epsilon(1e-11));
    for (std::size_t j = 0; j < one.molality.size(); ++j)
      CHECK(tank.molality[j] == Approx(one.molality[j]).margin(0).epsilon(1e-8));
  }
}

TEST_CASE("the order of the components does not matter", "[property]") {
  const Amounts amounts{{"Ni^2+", 1.1}, {"SO4^2-", 0.9}, {"Cl^-", 0.41}, {"H3BO3", 0.6}, {"NH3", 0.2}};
  Names order{"Ni^2+", "SO4^2-", "Cl^-", "H3BO3", "NH3"};
  const Solver first = solver_of(order);
  const Equilibrium expected = solved(first, task_of(first.system(), amounts));
  std::mt19937 random(5);
  for (int repeat = 0; repeat < 5; ++repeat) {
    std::shuffle(order.begin(), order.end(), random);
    const Solver solver = solver_of(order);
    const Equilibrium answer = solved(solver, task_of(solver.system(), amounts));
    for (const SystemSpecies& species : first.system().species()) {
      INFO(species.name);
      CHECK(molality_of(solver, answer, species.name) ==
            Approx(molality_of(first, expected, species.name)).margin(0).epsilon(1e-8));
    }
  }
}

TEST_CASE("a component that is absent changes nothing", "[property]") {
  const Solver narrow = solver_of({"Na^+", "Cl^-"}), wide = solver_of({"Na^+", "Cl^-", "Cu^2+", "CO3^2-"});
  const Amounts salt{{"Na^+", 0.5}, {"Cl^-", 0.5}};
  const Equilibrium a = solved(narrow, task_of(narrow.system(), salt));
  const Equilibrium b = solved(wide, task_of(wide.system(), salt));
  CHECK(b.pH() == Approx(a.pH()).margin(1e-9).epsilon(0));
  CHECK(b.ln_water_activity == Approx(a.ln_water_activity).margin(1e-13).epsilon(0));
  CHECK(molality_of(wide, b, "Cu^2+") == 0);
}

TEST_CASE("the same input gives the same bits", "[property]") {
  const Solver solver = solver_of({"Ni^2+", "SO4^2-", "Cl^-"});
  Task task = task_of(solver.system(), {{"Ni^2+", 3}, {"SO4^2-", 2.5}, {"Cl^-", 1}});
  let_precipitate(task, solver.system());
  CHECK(solved(solver, task).molality == solved(solver, task).molality);
}

TEST_CASE("water taken up and given off by species is accounted", "[property]") {
  // 2 CrO4^2- + 2 H^+ = Cr2O7^2- + H2O gives off water: total water = liquid + bound.
  const Solver solver = solver_of({"CrO4^2-"});
  const Equilibrium answer = solved(solver, task_of(solver.system(), {{"H^+", 4}, {"CrO4^2-", 2}}));
  double bound = 0;
  for (std::size_t j = 0; j < answer.molality.size(); ++j)
    bound += solver.system().species()[j].water * answer.molality[j] * answer.water_kg;
  CHECK(answer.water_kg + bound / water_mol_per_kg == Approx(1).margin(1e-12).epsilon(0));
  CHECK(molality_of(solver, answer, "Cr2O7^2-") > 0.5);
  CHECK(answer.water_kg > 1);
}
