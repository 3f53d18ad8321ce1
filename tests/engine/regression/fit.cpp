// The fit on measurements made up from the engine itself with a changed constant: it must find the constant.
#include <bathwright/regression/fit.hpp>
#include <bathwright/solution/solution.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <random>

using namespace bathwright;
using namespace bathwright::regression;

namespace {

const speciation::Equilibria& built_in() {
  return speciation::Equilibria::built_in(activity::Convention::interaction);
}

Unknown of_constant(const std::string& constant, Parameter parameter) {
  Unknown unknown;
  unknown.what.emplace<OfConstant>(OfConstant{constant, parameter});
  unknown.where = "test";
  return unknown;
}

Task boric_acid(std::vector<Parameter> find) {
  Task task;
  task.source = "made up";
  task.equilibria = built_in();
  for (const Parameter parameter : find) task.unknowns.push_back(of_constant("H3BO3", parameter));
  return task;
}

Measurement solubility(double t_C, double value, double uncertainty) {
  Measurement m;
  m.recipe.temperature = {t_C};
  m.recipe.excess = {"H3BO3"};
  m.quantity = Quantity::solubility;
  m.of = "H3BO3";
  m.value = value;
  m.uncertainty = uncertainty;
  m.label = std::to_string(t_C);
  m.where = "test:1";
  return m;
}

/// What the engine finds with log10 K, dH and dCp of boric acid replaced.
double made_up(double t_C, double log10_K, double dH, double dCp) {
  speciation::Constant constant = *built_in().stated("H3BO3");
  constant.log10_K = log10_K;
  constant.dH_kJ_per_mol = dH;
  constant.dCp_J_per_molK = dCp;
  const auto changed = built_in().with_constant("H3BO3", constant);
  REQUIRE(changed);
  solution::Recipe recipe;
  recipe.temperature = {t_C};
  recipe.model = activity::ModelKind::pitzer;
  recipe.excess = {"H3BO3"};
  const auto solved = solution::solve(recipe, *changed);
  REQUIRE(solved);
  for (const auto& solid : solved->solids)
    if (solid.name == "H3BO3") return solid.dissolved_mol;
  FAIL("boric acid is gone");
  return 0;
}

}  // namespace

TEST_CASE("exact measurements give back the constant they were made with", "[property]") {
  Task task = boric_acid({Parameter::log10_K, Parameter::dH_kJ_per_mol, Parameter::dCp_J_per_molK});
  for (const double t : {5., 25., 45., 65., 85.})
    task.measurements.push_back(solubility(t, made_up(t, 0.02, 20, 60), 0.01));
  const auto found = fit(task);
  INFO((found ? std::string{} : text(found.problems())));
  REQUIRE(found);
  CHECK(found->found[0].value == Approx(0.02).margin(1e-6).epsilon(0));
  CHECK(found->found[1].value == Approx(20).margin(1e-3).epsilon(0));
  CHECK(found->found[2].value == Approx(60).margin(0.05).epsilon(0));
  CHECK(found->fit_error < 1e-6);
  CHECK_FALSE(found->test_error);
}

TEST_CASE("the standard error is that of the mean of repeated measurements", "[property]") {
  // One unknown, n measurements of one solubility with a scatter: log10 K is their weighted mean, its
  // standard error that of the mean. ln s moves with ln K nearly one to one for a dilute neutral solute.
  Task task = boric_acid({Parameter::log10_K});
  const double s = made_up(25, -0.03, 22, 0);
  const int n = 4;
  for (int k = 0; k < n; ++k)
    task.measurements.push_back(solubility(25, s * (1 + (k % 2 ? 0.01 : -0.01)), 0.01 * s));
  const auto found = fit(task);
  REQUIRE(found);
  CHECK(found->found[0].value == Approx(-0.03).margin(1e-5).epsilon(0));
  // chi2 = n, n - 1 degrees of freedom: the stated 1 % is widened by (n/(n - 1))^0.5
  CHECK(found->reduced_chi2 == Approx(static_cast<double>(n) / (n - 1)).epsilon(1e-3));
  const double slope = (std::log10(made_up(25, -0.02, 22, 0)) - std::log10(made_up(25, -0.04, 22, 0))) / 0.02;
  const double expected = 0.01 / std::log(10.) / slope / std::sqrt(n) * std::sqrt(found->reduced_chi2);
  CHECK(found->found[0].standard_error == Approx(expected).epsilon(0.01));
  CHECK(found->fit_error == Approx(0.01).epsilon(1e-3));
}

TEST_CASE("what is held out moves nothing and is judged", "[unit]") {
  Task task = boric_acid({Parameter::log10_K});
  task.measurements.push_back(solubility(25, made_up(25, 0.01, 22, 0), 0.01));
  task.measurements.push_back(solubility(25, 2 * made_up(25, 0.01, 22, 0), 0.01));
  task.measurements.back().held_out = true;
  const auto found = fit(task);
  REQUIRE(found);
  CHECK(found->found[0].value == Approx(0.01).margin(1e-6).epsilon(0));
  REQUIRE(found->test_error);
  CHECK(*found->test_error == Approx(0.5).epsilon(1e-3));
}

TEST_CASE("the order of the measurements does not matter", "[property]") {
  Task task = boric_acid({Parameter::log10_K, Parameter::dH_kJ_per_mol});
  for (const double t : {5., 25., 60.})
    task.measurements.push_back(solubility(t, made_up(t, 0, 21, 40) * 1.01, 0.02));
  const auto forth = fit(task);
  std::reverse(task.measurements.begin(), task.measurements.end());
  const auto back = fit(task);
  REQUIRE(forth);
  REQUIRE(back);
  for (std::size_t k = 0; k < 2; ++k)
    CHECK(forth->found[k].value == Approx(back->found[k].value).epsilon(1e-6));
}

TEST_CASE("a constant is found from pH, free ion and water activity too", "[property]") {
  // A solution of 0.01 mol/kg Na2SO4 and 0.01 mol/kg H2SO4: the dissociation of HSO4^- moves all three.
  speciation::Constant changed = *built_in().stated("HSO4^-");
  changed.log10_K += 0.2;
  const auto equilibria = built_in().with_constant("HSO4^-", changed);
  REQUIRE(equilibria);
  Measurement m;
  m.recipe.ingredients = {{"Na2SO4", 0.01, "test"}, {"H2SO4", 0.01, "test"}};
  m.where = "test:1";
  solution::Recipe with_model = m.recipe;
  with_model.model = activity::ModelKind::pitzer;
  const auto made = solution::solve(with_model, *equilibria);
  REQUIRE(made);
  for (const Quantity quantity : {Quantity::pH, Quantity::molality, Quantity::water_activity}) {
    INFO(name(quantity));
    m.quantity = quantity;
    m.of = quantity == Quantity::molality ? "HSO4^-" : "";
    m.value = quantity == Quantity::pH ? made->pH : made->water_activity;
    for (const auto& species : made->species)
      if (species.name == m.of) m.value = species.molality;
    m.uncertainty = quantity == Quantity::pH ? 0.01 : 1e-6;
    Task task;
    task.equilibria = built_in();
    task.unknowns = {of_constant("HSO4^-", Parameter::log10_K)};
    task.measurements = {m};
    const auto found = fit(task);
    REQUIRE(found);
    CHECK(found->found[0].value == Approx(changed.log10_K).margin(1e-4).epsilon(0));
  }
}

TEST_CASE("what cannot be determined is named", "[failure]") {
  Task one_temperature = boric_acid({Parameter::log10_K, Parameter::dH_kJ_per_mol});
  one_temperature.measurements = {solubility(25, 0.9, 0.01), solubility(25, 0.91, 0.01)};
  const auto free = fit(one_temperature);
  REQUIRE_FALSE(free);
  CHECK(free.problems()[0].what == "the measurements do not determine dH_kJ_per_mol of H3BO3");

  Task too_few = boric_acid({Parameter::log10_K, Parameter::dH_kJ_per_mol});
  too_few.measurements = {solubility(25, 0.9, 0.01)};
  const auto few = fit(too_few);
  REQUIRE_FALSE(few);
  CHECK(few.problems()[0].what == "1 measurements for 2 unknowns");

  Task unknown = boric_acid({Parameter::log10_K});
  unknown.unknowns[0] = of_constant("H3BO4", Parameter::log10_K);
  unknown.measurements = {solubility(25, 0.9, 0.01)};
  const auto nobody = fit(unknown);
  REQUIRE_FALSE(nobody);
  CHECK(nobody.problems()[0].what == "no species, solid or gas is called H3BO4");

  Task absent = boric_acid({Parameter::log10_K});
  absent.measurements = {solubility(25, 0.9, 0.01)};
  absent.measurements[0].of = "NaCl";
  const auto not_there = fit(absent);
  REQUIRE_FALSE(not_there);
  CHECK(not_there.problems()[0].where == "test:1");
  CHECK(not_there.problems()[0].what == "NaCl does not occur in the solution");
}

TEST_CASE("the label says whose constant it is", "[unit]") {
  Task task;
  task.source = "week 40";
  CHECK(provenance(task) == "regressed from week 40");
  task.fitted_by = "Brindlewick Surface Works";
  CHECK(provenance(task) == "fitted to this tank by Brindlewick Surface Works, from week 40");
}
