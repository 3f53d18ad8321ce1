#include <algorithm>

#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;
using activity::Convention;

namespace {

StatedSpecies species(std::string name, std::string reaction, double log10_K) {
  StatedSpecies stated{std::move(name), std::move(reaction), "invented", "bath.toml:12", {}, 0};
  stated.constant.log10_K = log10_K;
  return stated;
}

const Equilibria& association() { return Equilibria::built_in(Convention::association); }

}  // namespace

TEST_CASE("weak pairs stand only in the association equilibria", "[unit]") {
  for (const char* pair : {"NiSO4", "CuSO4", "NaSO4^-"}) {
    INFO(pair);
    CHECK(association().species().contains(pair));
    CHECK_FALSE(Equilibria::built_in(Convention::interaction).species().contains(pair));
  }
}

TEST_CASE("H^+ is a basis species, water and complexes are not", "[unit]") {
  const auto& basis = association().basis();
  const auto has = [&](const char* name) {
    return std::find(basis.begin(), basis.end(), name) != basis.end();
  };
  CHECK(has("H^+"));
  CHECK(has("Ni^2+"));
  CHECK(has("NO3^-"));
  CHECK_FALSE(has("H2O"));
  CHECK_FALSE(has("OH^-"));
  CHECK_FALSE(has("NiOH^+"));
}

TEST_CASE("a bath type's species is written over the basis, through others if need be", "[unit]") {
  const auto with = association().with(
      {species("NiX^+", "Ni^2+ + X^- = NiX^+", 5), species("NiX(OH)", "NiX^+ + OH^- = NiX(OH)", 4)}, {});
  REQUIRE(with);
  const SpeciesData& mixed = with->species().at("NiX(OH)");
  CHECK(mixed.made_of == Composition{{"H^+", -1}, {"Ni^2+", 1}, {"X^-", 1}});
  CHECK(mixed.water == 1);
  const double log10_Kw = association().species().at("OH^-").formation.log10_K;
  CHECK(mixed.formation.log10_K == Approx(5 + 4 + log10_Kw).margin(1e-12).epsilon(0));
  const auto& basis = with->basis();
  CHECK(std::find(basis.begin(), basis.end(), "X^-") != basis.end());
}

TEST_CASE("a bath type's species replaces a built-in one of the same name", "[unit]") {
  const auto with = association().with({species("HSO4^-", "H^+ + SO4^2- = HSO4^-", 2.5)}, {});
  REQUIRE(with);
  CHECK(with->species().at("HSO4^-").formation.log10_K == 2.5);
}

TEST_CASE("species that lead back to themselves or are not formed are refused with their place",
          "[failure]") {
  const auto circle =
      association().with({species("P", "Q + H^+ = P", 1), species("Q", "P + OH^- = Q", 1)}, {});
  REQUIRE_FALSE(circle);
  CHECK(circle.problems()[0].where == "bath.toml:12");
  CHECK(circle.problems()[0].what.find("leads back to itself") != std::string::npos);

  const auto absent = association().with({species("NiX^+", "Ni^2+ + X^- = NiXX^+", 5)}, {});
  REQUIRE_FALSE(absent);
  CHECK(absent.problems()[0].what == "the reaction does not form one NiX^+");

  const auto unreadable = association().with({species("NiX^+", "Ni^2+ and X^-", 5)}, {});
  REQUIRE_FALSE(unreadable);
  CHECK(unreadable.problems()[0].where == "bath.toml:12");
}
