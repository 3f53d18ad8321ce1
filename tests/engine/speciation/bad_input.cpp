// What the solver refuses, and in which words.
#include <bathwright/speciation/session.hpp>
#include <limits>

#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;

namespace {

Solver brine() { return solver_of({"Na^+", "Cl^-"}); }

Problem refusal(const Solver& solver, const Task& task) {
  const auto answer = solver.solve(task);
  REQUIRE_FALSE(answer);
  return answer.problems()[0];
}

constexpr double not_a_number = std::numeric_limits<double>::quiet_NaN();
constexpr double infinite = std::numeric_limits<double>::infinity();

}  // namespace

TEST_CASE("amounts that are no numbers are refused with the component's name", "[failure]") {
  const Solver solver = brine();
  for (const double wrong : {not_a_number, infinite, -infinite}) {
    Task task = task_of(solver.system(), {{"Na^+", 1}, {"Cl^-", 1}});
    task.component_mol[2] = wrong;
    const Problem problem = refusal(solver, task);
    CHECK(problem.kind == Fault::bad_input);
    CHECK(problem.where == "Cl^-");
    CHECK(problem.what == "the amount is not a number");
  }
}

TEST_CASE("a negative amount is refused, of H^+ it is net alkali", "[failure]") {
  const Solver solver = brine();
  Task task = task_of(solver.system(), {{"Na^+", 1}});
  CHECK(task.component_mol[0] == -1);
  CHECK(solver.solve(task));
  task.component_mol[2] = -0.5;
  const Problem problem = refusal(solver, task);
  CHECK(problem.where == "Cl^-");
  CHECK(problem.what.find("negative") != std::string::npos);
}

TEST_CASE("all bad amounts are reported together", "[failure]") {
  const Solver solver = brine();
  Task task = task_of(solver.system(), {});
  task.component_mol = {0, -1, not_a_number};
  task.water_kg = 0;
  const auto answer = solver.solve(task);
  REQUIRE_FALSE(answer);
  CHECK(answer.problems().size() == 3);
}

TEST_CASE("water must be a positive amount", "[failure]") {
  const Solver solver = brine();
  for (const double wrong : {0.0, -1.0, not_a_number, infinite}) {
    Task task = task_of(solver.system(), {});
    task.water_kg = wrong;
    CHECK(refusal(solver, task).where == "water");
  }
}

TEST_CASE("the number of totals must be that of the components", "[failure]") {
  const Solver solver = brine();
  Task task;
  task.component_mol = {0, 1};
  const Problem problem = refusal(solver, task);
  CHECK(problem.what == "totals for 2 components");
  CHECK(problem.expected == "3");
}

TEST_CASE("held values must be numbers and pressures positive", "[failure]") {
  const Solver solver = solver_of({"CO3^2-", "Na^+"});
  for (const double wrong : {0.0, -1.0, not_a_number, infinite}) {
    Task task = task_of(solver.system(), {});
    task.gases.push_back({*solver.system().gas("CO2"), wrong});
    CHECK(refusal(solver, task).where == "CO2");
  }
  Task task = task_of(solver.system(), {});
  task.pH = HeldPh{not_a_number, 2};
  CHECK(refusal(solver, task).where == "pH");
}

TEST_CASE("a pH or a pressure that cannot be held is refused or met, never faked", "[failure]") {
  const Solver solver = solver_of({"Na^+", "Cl^-"});
  for (const double pH : {-5.0, -30.0, 30.0}) {
    INFO("pH " << pH);
    Task task = task_of(solver.system(), {{"Na^+", 0.1}, {"Cl^-", 0.1}});
    task.pH = HeldPh{pH, *solver.system().component("Cl^-")};
    const auto answer = solver.solve(task);
    if (answer) CHECK(answer->pH() == Approx(pH).margin(1e-8).epsilon(0));
    if (answer) CHECK(answer->residuals.mass_balance < 1e-12);
  }
}

TEST_CASE("more components or species than fit are refused with the limit", "[failure]") {
  const Equilibria& equilibria = equilibria_for(activity::ModelKind::pitzer);
  Names names;
  for (const std::string& name : equilibria.basis())
    if (name != "H^+") names.push_back(name);
  REQUIRE(names.size() >= max_components);
  names.resize(max_components);  // and H^+
  const auto components = ChemicalSystem::make(equilibria, names);
  REQUIRE_FALSE(components);
  CHECK(components.problems()[0].kind == Fault::out_of_range);
  CHECK(components.problems()[0].what == "49 components");
  CHECK(components.problems()[0].expected == "at most 48");
  names.pop_back();
  const auto species = ChemicalSystem::make(equilibria, names);
  REQUIRE_FALSE(species);
  CHECK(species.problems()[0].what.find("dissolved species") != std::string::npos);
  CHECK(species.problems()[0].expected == "at most 256");
}

TEST_CASE("a session is as good as new after input it refused", "[failure]") {
  const Solver solver = brine();
  Session session(solver);
  Equilibrium answer;
  const Task task = task_of(solver.system(), {{"Na^+", 1}, {"Cl^-", 1.2}});
  REQUIRE(session.solve(task, answer));
  const double pH = answer.pH();
  for (const double wrong : {not_a_number, infinite, -1.0}) {
    Task bad = task;
    bad.component_mol[1] = wrong;
    CHECK_FALSE(session.solve_near_last(bad, answer));
    CHECK_FALSE(session.solve(bad, answer));
    REQUIRE(session.solve_near_last(task, answer));
    CHECK(answer.pH() == Approx(pH).margin(1e-12).epsilon(0));
  }
}

TEST_CASE("a droplet and a sea are solved alike", "[property]") {
  const Solver solver = brine();
  const double pH = solved(solver, task_of(solver.system(), {{"Na^+", 1}, {"Cl^-", 1.2}})).pH();
  for (const double kg : {1e-12, 1e-3, 1e6, 1e12}) {
    INFO(kg << " kg of water");
    Task task = task_of(solver.system(), {{"Na^+", kg}, {"Cl^-", 1.2 * kg}});
    task.water_kg = kg;
    CHECK(solved(solver, task).pH() == Approx(pH).margin(1e-9).epsilon(0));
  }
}

TEST_CASE("a component nobody knows is refused with the nearest one", "[failure]") {
  const auto system =
      ChemicalSystem::make(Equilibria::built_in(activity::Convention::interaction), {"Ni^2+", "SO4^2"});
  REQUIRE_FALSE(system);
  CHECK(system.problems()[0].where == "SO4^2");
  CHECK(system.problems()[0].try_this == "Did you mean SO4^2-?");
}

TEST_CASE("a temperature outside 0 to 100 degC is refused", "[failure]") {
  const auto system = system_of(equilibria_for(activity::ModelKind::pitzer), {"Na^+", "Cl^-"});
  for (const double t : {-5.0, 101.0}) {
    const auto solver = Solver::prepare(system, activity::ModelKind::pitzer, {t});
    REQUIRE_FALSE(solver);
    CHECK(solver.problems()[0].expected == "0 to 100 degC");
  }
}
