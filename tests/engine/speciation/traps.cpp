// What a careless solver gets wrong without noticing.
#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;
using activity::ModelKind;

namespace {

/// Invented neutral metal M and ligand L, so that gamma = 1 and the answer has a closed form.
Solver strong_complex(double log10_beta) {
  StatedSpecies complex{"XeKr", "Xe + Kr = XeKr", "invented", "trap", {}, 0};
  complex.constant.log10_K = log10_beta;
  const auto with = equilibria_for(ModelKind::davies).with({complex}, {});
  REQUIRE(with);
  auto solver = Solver::prepare(system_of(*with, {"Xe", "Kr"}), ModelKind::davies, room);
  REQUIRE(solver);
  return *std::move(solver);
}

}  // namespace

TEST_CASE("equal totals of metal and ligand: the free ion falls as beta^-1/2", "[property]") {
  // M + L = ML, totals T: beta x^2 + x - T = 0, x = 2 T/(1 + sqrt(1 + 4 beta T)).
  for (const double log10_beta : {5., 15., 25., 30., 40.})
    for (const double total : {1e-6, 0.01, 1.0}) {
      const Solver solver = strong_complex(log10_beta);
      const Equilibrium answer = solved(solver, task_of(solver.system(), {{"Xe", total}, {"Kr", total}}));
      const double beta = std::pow(10, log10_beta);
      const double expected = 2 * total / (1 + std::sqrt(1 + 4 * beta * total));
      INFO("log10 beta " << log10_beta << ", total " << total);
      CHECK(molality_of(solver, answer, "Xe") == Approx(expected).margin(0).epsilon(1e-8));
      CHECK(molality_of(solver, answer, "Kr") == Approx(expected).margin(0).epsilon(1e-8));
    }
}

TEST_CASE("totals from 1e-300 to the absurd are solved or refused by name", "[property]") {
  for (const ModelKind kind : {ModelKind::davies, ModelKind::pitzer}) {
    const Solver solver = solver_of({"Ni^2+", "SO4^2-", "Na^+"}, room, kind);
    for (const double mol : {1e-300, 1e-200, 1e-100, 1e-30, 1e-15}) {
      INFO(activity::name(kind) << " " << mol);
      Task task = task_of(solver.system(), {{"Ni^2+", mol}, {"SO4^2-", mol}, {"Na^+", 0.1}});
      let_precipitate(task, solver.system());
      const Equilibrium answer = solved(solver, task);
      CHECK(answer.residuals.mass_balance < 1e-12);
      CHECK(std::isfinite(answer.pH()));
    }
    for (const double mol : {50., 1e3, 1e6, 1e30, 1e300}) {
      INFO(activity::name(kind) << " " << mol);
      const auto answer = solver.solve(task_of(solver.system(), {{"Ni^2+", mol}, {"SO4^2-", mol}}));
      if (answer)
        CHECK(answer->residuals.mass_balance < 1e-12);
      else
        CHECK_FALSE(answer.problems()[0].what.empty());
    }
  }
}

TEST_CASE("pH below 0 and above 14", "[property]") {
  const Solver acid = solver_of({"Cl^-"});
  CHECK(solved(acid, task_of(acid.system(), {{"Cl^-", 6}})).pH() < 0);
  const Solver alkali = solver_of({"Na^+"});
  CHECK(solved(alkali, task_of(alkali.system(), {{"Na^+", 6}})).pH() > 14);
}

TEST_CASE("an exact duplicate of a solid does not upset the solver", "[property]") {
  const Equilibria& built_in = equilibria_for(ModelKind::pitzer);
  const StatedSolid twin{"twin of NaCl", "NaCl", "NaCl(s) = Na^+ + Cl^-", "invented", "", "trap", {}, 0, 100,
                         false};
  StatedSolid copy = twin;
  for (const SolidData& solid : built_in.solids())
    if (solid.name == "NaCl") copy.constant = solid.dissolution;
  const auto with = built_in.with({}, {copy});
  REQUIRE(with);
  auto solver = Solver::prepare(system_of(*with, {"Na^+", "Cl^-"}), ModelKind::pitzer, room);
  REQUIRE(solver);
  Task task = task_of(solver->system(), {{"Na^+", 8}, {"Cl^-", 8}});
  let_precipitate(task, solver->system());
  const Equilibrium answer = solved(*solver, task);
  CHECK(answer.solid_mol[*solver->system().solid("NaCl")] +
            answer.solid_mol[*solver->system().solid("twin of NaCl")] ==
        Approx(8 - 6.1).margin(0.1).epsilon(0));
}

TEST_CASE("totals that are all zero are pure water", "[property]") {
  const Solver solver = solver_of({"Ni^2+", "SO4^2-", "Cl^-"});
  Task task = task_of(solver.system(), {});
  let_precipitate(task, solver.system());
  const Equilibrium answer = solved(solver, task);
  CHECK(answer.water_kg == Approx(1).margin(1e-7).epsilon(0));
  CHECK(molality_of(solver, answer, "Ni^2+") == 0);
}

TEST_CASE("a solid that holds nearly all of a component leaves the dissolved rest exact", "[property]") {
  // AgCl, equal totals: Ag^+ + Cl^- at saturation do not depend on how much solid there is.
  const Solver solver = solver_of({"Ag^+", "Cl^-"}, room, ModelKind::davies);
  const auto dissolved = [&](double total) {
    Task task = task_of(solver.system(), {{"Ag^+", total}, {"Cl^-", total}});
    let_precipitate(task, solver.system());
    return molality_of(solver, solved(solver, task), "Ag^+");
  };
  CHECK(dissolved(5) == Approx(dissolved(1e-3)).margin(0).epsilon(1e-6));
}

TEST_CASE("complexes of a high charge stay finite in strong salt", "[property]") {
  const Solver solver = solver_of({"Cu^2+", "P2O7^4-", "K^+", "Na^+"});
  const Equilibrium answer = solved(
      solver, task_of(solver.system(), {{"Cu^2+", 0.3}, {"P2O7^4-", 0.9}, {"K^+", 3.4}, {"Na^+", 0.2}}));
  for (const double m : answer.molality) CHECK(std::isfinite(m));
  CHECK(answer.residuals.mass_balance < 1e-12);
}
