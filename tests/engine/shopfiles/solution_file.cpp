#include <bathwright/shopfiles/solution_file.hpp>
#include <catch2/catch.hpp>
#include <string>

using namespace bathwright;
using solution::MayForm;
using solution::Recipe;

namespace {
Recipe solution_of(const std::string& written) {
  const auto solution = shopfiles::read_solution_text("s.toml", written);
  INFO((solution ? "" : text(solution.problems())));
  REQUIRE(solution);
  return *solution;
}
}  // namespace

TEST_CASE("a solution per kg of water is read as it stands", "[unit][shopfiles]") {
  const Recipe s = solution_of(R"(temperature = "25 degC"
pH = 4
counter_ion = "Cl^-"
[per_kg_water]
"NiSO4" = 1.0
"H2SO4" = 0.1
[solids]
allow = ["H3BO3"]
excess = ["CaSO4.2H2O"]
[gases]
"CO2" = 4.2e-4
)");
  CHECK(s.temperature.v == 25);
  CHECK_FALSE(s.model);
  CHECK(s.pH == 4.0);
  CHECK(s.counter_ion == "Cl^-");
  REQUIRE(s.ingredients.size() == 2);
  CHECK(s.ingredients[0].formula == "NiSO4");
  CHECK(s.ingredients[0].mol == 1);
  CHECK_FALSE(s.per_litre);
  CHECK(s.ingredients[1].where == "s.toml:6: per_kg_water.H2SO4");
  CHECK(s.may_form == MayForm::listed);
  CHECK(s.allowed == std::vector<std::string>{"H3BO3"});
  CHECK(s.excess == std::vector<std::string>{"CaSO4.2H2O"});
  CHECK(s.gases_atm.at("CO2") == 4.2e-4);
}

TEST_CASE("a solution per litre comes out in mol/L", "[unit][shopfiles]") {
  const Recipe s = solution_of(
      "temperature = \"77 degF\"\nmodel = \"pitzer\"\nsolids = { allow = \"none\" }\n"
      "[per_litre]\n\"NiSO4.6H2O\" = \"270 g/L\"\n\"H2SO4\" = \"0,1 mol/L\"\n");
  CHECK(s.temperature.v == Approx(25).margin(1e-9).epsilon(0));
  CHECK(s.may_form == MayForm::none);
  REQUIRE(s.ingredients.size() == 2);
  CHECK(s.per_litre);
  CHECK(s.model == activity::ModelKind::pitzer);
  CHECK(s.ingredients[0].mol == Approx(270 / 262.839).margin(1e-5).epsilon(0));  // M(NiSO4.6H2O), example D1
  CHECK(s.ingredients[1].mol == Approx(0.1).margin(1e-12).epsilon(0));
}

TEST_CASE("pure water is a solution", "[unit][shopfiles]") {
  const Recipe s = solution_of("temperature = \"25 degC\"");
  CHECK(s.ingredients.empty());
  CHECK(s.may_form == MayForm::all);
  CHECK_FALSE(s.pH);
}
