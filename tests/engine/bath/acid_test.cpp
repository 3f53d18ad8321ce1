// Baths whose acid or alkali is titrated, and chromic acid, where it is what the charges leave.
#include <bathwright/bath/chemistry.hpp>
#include <cmath>

#include "../../support/demo_tank.hpp"

using namespace bathwright;
using bath::FoundBy;
using demo::must;

namespace {

bath::Quantity quantity(const char* formula, speciation::Composition counts) {
  return {formula, formula, must(matter::Formula::parse(formula)), std::move(counts)};
}

bath::BathType bath_of(std::vector<bath::Component> components, std::vector<bath::Quantity> quantities) {
  bath::BathType type;
  type.id = type.name = "test";
  type.components = std::move(components);
  type.quantities = std::move(quantities);
  return type;
}

}  // namespace

TEST_CASE("acid that is titrated gives the pH, and the levels come back", "[property][bath]") {
  const auto type =
      bath_of({{"H^+", FoundBy::analysis}, {"Cu^2+", FoundBy::analysis}, {"SO4^2-", FoundBy::charge}},
              {quantity("CuSO4.5H2O", {{"Cu^2+", 1}}), quantity("H2SO4", {{"H^+", 0.5}})});
  const auto chemistry = must(bath::Chemistry::prepare(type, {25}, {15}));
  const auto state =
      must(chemistry.state_from({{"CuSO4.5H2O", 75}, {"H2SO4", 190}}, std::nullopt, {1000}, {25}));
  const auto view = must(chemistry.view(state));
  CHECK(view.volume_L == Approx(1000).epsilon(1e-10));
  CHECK(view.quantity_g_per_L[0] == Approx(75).epsilon(1e-10));
  CHECK(view.quantity_g_per_L[1] == Approx(190).epsilon(1e-10));
  CHECK(view.pH < 0.2);
  CHECK(view.pH > -1.5);
  // A pH is not looked at: the titration decides.
  CHECK(must(chemistry.state_from({{"CuSO4.5H2O", 75}, {"H2SO4", 190}}, 4.0, {1000}, {25})).component_mol ==
        state.component_mol);
}

TEST_CASE("alkali that is titrated is a total of H+ below zero", "[unit][bath]") {
  auto type = bath_of({{"H^+", FoundBy::analysis}, {"Zn^2+", FoundBy::analysis}, {"Na^+", FoundBy::charge}},
                      {quantity("Zn^2+", {{"Zn^2+", 1}}), quantity("NaOH", {{"H^+", -1}, {"Zn^2+", -2}})});
  type.sets.zinc = activity::ZincSet::alkaline;
  const auto chemistry = must(bath::Chemistry::prepare(type, {25}, {15}));
  const auto state = must(chemistry.state_from({{"Zn^2+", 10}, {"NaOH", 120}}, std::nullopt, {100}, {25}));
  const double zinc = 10.0 * 100 / 65.38, caustic = 120.0 * 100 / 39.997;
  CHECK(state.component_mol[0] == Approx(-caustic - 2 * zinc).epsilon(1e-4));
  CHECK(must(chemistry.view(state)).pH > 14);
}

TEST_CASE("what the charges leave may be the acid", "[unit][bath]") {
  const auto type =
      bath_of({{"H^+", FoundBy::charge}, {"CrO4^2-", FoundBy::analysis}, {"SO4^2-", FoundBy::analysis}},
              {quantity("CrO3", {{"CrO4^2-", 1}}), quantity("SO4^2-", {{"SO4^2-", 1}})});
  const auto chemistry = must(bath::Chemistry::prepare(type, {55}, {20}));
  const auto state = must(chemistry.state_from({{"CrO3", 250}, {"SO4^2-", 2.5}}, std::nullopt, {1000}, {55}));
  CHECK(state.component_mol[0] ==
        Approx(2 * (state.component_mol[1] + state.component_mol[2])).epsilon(1e-12));
  CHECK(chemistry.components()[chemistry.found_by_charge()] == "H^+");
  CHECK(chemistry.components()[chemistry.counter_ion()] != "H^+");
}

TEST_CASE("a bath type may bring a component the tables lack", "[unit][bath]") {
  auto type = bath_of({{"H^+", FoundBy::pH},
                       {"CH2(OH)2", FoundBy::analysis},
                       {"Cl^-", FoundBy::charge},
                       {"Na^+", FoundBy::analysis}},
                      {quantity("CH2O", {{"CH2(OH)2", 1}}), quantity("Na^+", {{"Na^+", 1}})});
  type.own_species = {{"CH2(OH)2", "", "a book", "test", {}, 0}};
  const auto chemistry = must(bath::Chemistry::prepare(type, {25}, {15}));
  const auto view =
      must(chemistry.view(must(chemistry.state_from({{"CH2O", 3}, {"Na^+", 5}}, 6.0, {10}, {25}))));
  CHECK(view.quantity_g_per_L[0] == Approx(3));
}

TEST_CASE("where the acid follows from the pH, a pH is asked for", "[failure][bath]") {
  const auto refused =
      demo::chemistry().state_from({{"Ni^2+", 70}, {"Cl^-", 14}, {"H3BO3", 40}}, std::nullopt, {2400}, {55});
  REQUIRE_FALSE(refused);
  CHECK(text(refused.problems()).find("pH: is not given") != std::string::npos);
}
