#include <bathwright/speciation/reaction.hpp>
#include <catch2/catch.hpp>

using namespace bathwright;
using namespace bathwright::speciation;

TEST_CASE("a reaction reads as it is written", "[unit]") {
  const auto reaction = parse_reaction("3 H3BO3 = B3O3(OH)4^- + H^+ + 2 H2O", "here");
  REQUIRE(reaction);
  REQUIRE(reaction->left.size() == 1);
  CHECK(reaction->left[0].coefficient == 3);
  CHECK(reaction->left[0].name == "H3BO3");
  REQUIRE(reaction->right.size() == 3);
  CHECK(reaction->right[0].name == "B3O3(OH)4^-");
  CHECK(reaction->right[1].coefficient == 1);
  CHECK(reaction->right[2].coefficient == 2);
  CHECK(reaction->right[2].name == "H2O");
}

TEST_CASE("coefficients may be decimal, names may hold + and digits", "[unit]") {
  const auto reaction = parse_reaction("NiCO3.5.5H2O(s) = Ni^2+ + CO3^2- + 5.5 H2O", "here");
  REQUIRE(reaction);
  CHECK(reaction->left[0].name == "NiCO3.5.5H2O(s)");
  CHECK(reaction->right[0].name == "Ni^2+");
  CHECK(reaction->right[2].coefficient == 5.5);
}

TEST_CASE("a reaction that does not read is refused with its place", "[failure]") {
  for (const char* text : {"", "A", "A + B", "A = ", " = A", "A = B = C", "A +  + B = C", "0 A = B",
                           "-1 A = B", "inf A = B", "A == B", "A=B"}) {
    INFO(text);
    const auto reaction = parse_reaction(text, "species.csv:7");
    REQUIRE_FALSE(reaction);
    const Problem& problem = reaction.problems()[0];
    CHECK(problem.kind == Fault::bad_input);
    CHECK(problem.where == "species.csv:7");
    CHECK(problem.what == "cannot read the reaction '" + std::string(text) + "'");
    CHECK_FALSE(problem.expected.empty());
  }
}
