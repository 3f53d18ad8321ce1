// Solids: saturation, crystal water, several at once, phases of proportional composition.
#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;

namespace {

double amount(const Solver& solver, const Equilibrium& answer, std::string_view solid) {
  REQUIRE(solver.system().solid(solid));
  return answer.solid_mol[*solver.system().solid(solid)];
}

double index_of(const Solver& solver, const Equilibrium& answer, std::string_view solid) {
  REQUIRE(solver.system().solid(solid));
  return answer.saturation_index[*solver.system().solid(solid)];
}

/// kg of water in liquid, in dissolved species and in solids that formed.
double all_water_kg(const Solver& solver, const Equilibrium& answer) {
  double mol = 0;
  for (std::size_t j = 0; j < answer.molality.size(); ++j)
    mol += solver.system().species()[j].water * answer.molality[j] * answer.water_kg;
  for (std::size_t k = 0; k < answer.solid_mol.size(); ++k)
    mol += solver.system().solids()[k].water * answer.solid_mol[k];
  return answer.water_kg + mol / water_mol_per_kg;
}

int solids_present(const Equilibrium& answer) {
  int present = 0;
  for (const double mol : answer.solid_mol) present += mol != 0;
  return present;
}

constexpr std::string_view hexahydrate = "NiSO4.6H2O (alpha)", heptahydrate = "NiSO4.7H2O";

}  // namespace

TEST_CASE("nickel sulfate in excess dissolves to its published solubility", "[reference]") {
  // tests/reference/solubility.csv, NiSO4 at 25 degC: 40.45 g per 100 g water (anhydrous), 2 %.
  const Solver solver = solver_of({"Ni^2+", "SO4^2-"});
  Task task = task_of(solver.system(), {});
  set_rule(task, solver.system(), heptahydrate, SolidRule::in_excess);
  const Equilibrium answer = solved(solver, task);
  const auto salt = matter::Formula::parse("NiSO4");
  REQUIRE(salt);
  const double dissolved = -amount(solver, answer, heptahydrate);
  CHECK(dissolved / answer.water_kg * salt->molar_mass().v / 10 == Approx(40.45).margin(0.81).epsilon(0));
  // Its crystal water joins the liquid: 7 mol for each mol dissolved.
  CHECK(answer.water_kg == Approx(1 + 7 * dissolved / water_mol_per_kg).margin(1e-6).epsilon(0));
  CHECK(all_water_kg(solver, answer) == Approx(1).margin(1e-11).epsilon(0));
  CHECK(index_of(solver, answer, heptahydrate) == Approx(0).margin(1e-9).epsilon(0));
}

TEST_CASE("what is above saturation precipitates and takes its water along", "[property]") {
  const Solver solver = solver_of({"Ni^2+", "SO4^2-"});
  Task task = task_of(solver.system(), {{"Ni^2+", 5}, {"SO4^2-", 5}});
  let_precipitate(task, solver.system());
  const Equilibrium answer = solved(solver, task);
  CHECK(solids_present(answer) == 1);
  CHECK(amount(solver, answer, heptahydrate) > 0.5);
  CHECK(answer.water_kg < 1);
  CHECK(all_water_kg(solver, answer) == Approx(1).margin(1e-11).epsilon(0));
  // The same saturated liquid as over an excess of the salt.
  Task excess = task_of(solver.system(), {});
  set_rule(excess, solver.system(), heptahydrate, SolidRule::in_excess);
  CHECK(molality_of(solver, answer, "Ni^2+") ==
        Approx(molality_of(solver, solved(solver, excess), "Ni^2+")).margin(1e-4).epsilon(0));
}

TEST_CASE("of two hydrates the stable one forms: hepta in the cold, hexa when warm", "[reference]") {
  // Transition near 31 degC (heading of tests/reference/solubility.csv).
  for (const auto& [t, stable, other] :
       {std::tuple{15.0, heptahydrate, hexahydrate}, {45.0, hexahydrate, heptahydrate}}) {
    INFO(t << " degC");
    const Solver solver = solver_of({"Ni^2+", "SO4^2-"}, {t});
    Task task = task_of(solver.system(), {{"Ni^2+", 6}, {"SO4^2-", 6}});
    set_rule(task, solver.system(), hexahydrate, SolidRule::may_precipitate);
    set_rule(task, solver.system(), heptahydrate, SolidRule::may_precipitate);
    const Equilibrium answer = solved(solver, task);
    CHECK(amount(solver, answer, stable) > 0.1);
    CHECK(amount(solver, answer, other) == 0);
  }
}

TEST_CASE("of the forms of nickel hydroxide only the least soluble may form", "[property]") {
  const Solver solver = solver_of({"Ni^2+", "Na^+", "Cl^-"});
  Task task = task_of(solver.system(), {{"Ni^2+", 0.1}, {"Na^+", 0.2}, {"Cl^-", 0.2}});
  std::vector<std::size_t> forms;
  task.solids.assign(solver.system().solids().size(), SolidRule::report_only);
  for (std::size_t k = 0; k < task.solids.size(); ++k)
    if (solver.system().solids()[k].formula == "Ni(OH)2") {
      forms.push_back(k);
      task.solids[k] = SolidRule::may_precipitate;
    }
  REQUIRE(forms.size() >= 2);
  const Equilibrium answer = solved(solver, task);
  int present = 0;
  for (const std::size_t k : forms) {
    present += answer.solid_mol[k] > 0;
    CHECK(answer.saturation_index[k] < 1e-8);
    if (answer.solid_mol[k] > 0) CHECK(answer.solid_mol[k] == Approx(0.1).margin(1e-4).epsilon(0));
  }
  CHECK(present == 1);
}

TEST_CASE("two salts with a common ion saturate together", "[reference]") {
  // tests/reference/solubility.csv, NaCl + KCl at 25 degC: 20.4 and 11.1 mass % (tolerance there).
  const Solver solver = solver_of({"Na^+", "K^+", "Cl^-"});
  Task task = task_of(solver.system(), {});
  set_rule(task, solver.system(), "NaCl", SolidRule::in_excess);
  set_rule(task, solver.system(), "KCl", SolidRule::in_excess);
  const Equilibrium answer = solved(solver, task);
  const double nacl = 58.44 * molality_of(solver, answer, "Na^+"),
               kcl = 74.55 * molality_of(solver, answer, "K^+");
  CHECK(100 * nacl / (1000 + nacl + kcl) == Approx(20.4).margin(0.5).epsilon(0));
  CHECK(100 * kcl / (1000 + nacl + kcl) == Approx(11.1).margin(0.5).epsilon(0));
  CHECK(solids_present(answer) == 2);
}

TEST_CASE("a solid that is only reported leaves the solution supersaturated", "[unit]") {
  const Solver solver = solver_of({"Ni^2+", "SO4^2-"});
  const Equilibrium answer = solved(solver, task_of(solver.system(), {{"Ni^2+", 5}, {"SO4^2-", 5}}));
  CHECK(solids_present(answer) == 0);
  CHECK(index_of(solver, answer, heptahydrate) > 0.1);
  CHECK(molality_of(solver, answer, "Ni^2+") == Approx(5).margin(0.01).epsilon(0));
}

TEST_CASE("a solid outside the temperatures of its constant never forms", "[unit]") {
  const Solver solver = solver_of({"Ni^2+", "SO4^2-"}, {60});
  REQUIRE_FALSE(solver.covers(*solver.system().solid(heptahydrate)));
  Task task = task_of(solver.system(), {{"Ni^2+", 8}, {"SO4^2-", 8}});
  set_rule(task, solver.system(), heptahydrate, SolidRule::may_precipitate);
  CHECK(amount(solver, solved(solver, task), heptahydrate) == 0);
}

TEST_CASE("barium sulfate takes all of the scarcer ion down", "[property]") {
  const Solver solver = solver_of({"Ba^2+", "SO4^2-", "Na^+", "Cl^-"});
  Task task = task_of(solver.system(), {{"Ba^2+", 0.01}, {"Cl^-", 0.02}, {"SO4^2-", 0.5}, {"Na^+", 1}});
  let_precipitate(task, solver.system());
  const Equilibrium answer = solved(solver, task);
  CHECK(amount(solver, answer, "BaSO4") == Approx(0.01).margin(1e-6).epsilon(0));
  CHECK(molality_of(solver, answer, "Ba^2+") > 0);
}
