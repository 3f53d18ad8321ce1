#include <bathwright/shopfiles/solution_file.hpp>
#include <catch2/catch.hpp>
#include <string>

using namespace bathwright;
using shopfiles::SolidsAllowed;
using shopfiles::SolutionFile;

namespace {
SolutionFile solution_of(const std::string& written) {
  const auto solution = shopfiles::read_solution_text("s.toml", written);
  INFO((solution ? "" : text(solution.problems())));
  REQUIRE(solution);
  return *solution;
}
}  // namespace

TEST_CASE("a solution per kg of water is read as it stands", "[unit][shopfiles]") {
  const SolutionFile s = solution_of(R"(temperature = "25 degC"
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
  CHECK(s.model == "auto");
  CHECK(s.pH == 4.0);
  CHECK(s.counter_ion == "Cl^-");
  REQUIRE(s.ingredients.size() == 2);
  CHECK(s.ingredients[0].formula == "NiSO4");
  CHECK(s.ingredients[0].amount == 1);
  CHECK_FALSE(s.ingredients[0].per_litre);
  CHECK(s.ingredients[1].where == "s.toml:6: per_kg_water.H2SO4");
  CHECK(s.solids_allowed == SolidsAllowed::listed);
  CHECK(s.allowed == std::vector<std::string>{"H3BO3"});
  CHECK(s.excess == std::vector<std::string>{"CaSO4.2H2O"});
  CHECK(s.gases_atm.at("CO2") == 4.2e-4);
}

TEST_CASE("a solution per litre comes out in mol/L", "[unit][shopfiles]") {
  const SolutionFile s = solution_of(
      "temperature = \"77 degF\"\nmodel = \"pitzer\"\nsolids = { allow = \"none\" }\n"
      "[per_litre]\n\"NiSO4.6H2O\" = \"270 g/L\"\n\"H2SO4\" = \"0,1 mol/L\"\n");
  CHECK(s.temperature.v == Approx(25).margin(1e-9).epsilon(0));
  CHECK(s.solids_allowed == SolidsAllowed::none);
  REQUIRE(s.ingredients.size() == 2);
  CHECK(s.ingredients[0].per_litre);
  CHECK(s.ingredients[0].amount ==
        Approx(270 / 262.839).margin(1e-5).epsilon(0));  // M(NiSO4.6H2O), example D1
  CHECK(s.ingredients[1].amount == Approx(0.1).margin(1e-12).epsilon(0));
}

TEST_CASE("pure water is a solution", "[unit][shopfiles]") {
  const SolutionFile s = solution_of("temperature = \"25 degC\"");
  CHECK(s.ingredients.empty());
  CHECK(s.solids_allowed == SolidsAllowed::all);
  CHECK_FALSE(s.pH);
}
