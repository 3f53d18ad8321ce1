// No attraction is counted twice: what the interaction parameters hold never stands as a species beside them.
#include <algorithm>

#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;
using activity::Convention;
using activity::ModelKind;
using activity::ZincSet;

namespace {

const Equilibria& interaction(ZincSet zinc = ZincSet::dilute) {
  return Equilibria::built_in(Convention::interaction, zinc);
}

StatedSpecies complex(const std::string& name, const std::string& reaction) {
  StatedSpecies stated{name, reaction, "invented", "bath.toml:7", {}, 0};
  stated.constant.log10_K = 1;
  return stated;
}

}  // namespace

TEST_CASE("complexes inside a fit are left out, those of unfitted pairs stay", "[unit]") {
  for (const char* held : {"NiCl^+", "CoCl4^2-", "CuCl3^-", "CuCl4^2-", "ZnCl^+", "ZnCl4^2-", "FeCl^2+",
                           "AlSO4^+", "NiSO4", "NaSO4^-", "CaOH^+", "Mg(CH3COO)^+"}) {
    INFO(held);
    CHECK_FALSE(interaction().species().contains(held));
    CHECK(Equilibria::built_in(Convention::association).species().contains(held));
  }
  // No Cd-Cl, Pb-Cl, Fe(III)-SO4 or Ni-SCN parameters are published; hydrogensulfate and the hydroxides of
  // zinc stood beside the fits when they were made.
  for (const char* explicit_one :
       {"CdCl^+", "PbCl2", "FeSO4^+", "Ni(SCN)^+", "HSO4^-", "Zn(OH)4^2-", "HCO3^-"}) {
    INFO(explicit_one);
    CHECK(interaction().species().contains(explicit_one));
  }
}

TEST_CASE("a mixture that counts an attraction twice is refused", "[failure]") {
  struct Case {
    const char *name, *reaction;
  };
  // The last one is written through another complex, the one before through water.
  for (const Case& c :
       {Case{"NiCl^+", "Ni^2+ + Cl^- = NiCl^+"}, Case{"NiSO4", "Ni^2+ + SO4^2- = NiSO4"},
        Case{"Na2SO4", "2 Na^+ + SO4^2- = Na2SO4"}, Case{"CaOH^+", "Ca^2+ + H2O = CaOH^+ + H^+"},
        Case{"FeCl2^+", "FeCl^2+ + Cl^- = FeCl2^+"}}) {
    INFO(c.reaction);
    const auto refused = interaction().with({complex(c.name, c.reaction)}, {});
    REQUIRE_FALSE(refused);
    CHECK(refused.problems()[0].where == "bath.toml:7");
    CHECK(refused.problems()[0].what.find("counts an attraction twice") != std::string::npos);
    CHECK(Equilibria::built_in(Convention::association).with({complex(c.name, c.reaction)}, {}));
  }
}

TEST_CASE("a complex that no fit holds is taken with interaction too", "[unit]") {
  for (const auto& stated :
       {complex("NiX^+", "Ni^2+ + X^- = NiX^+"), complex("CdCl^+", "Cd^2+ + Cl^- = CdCl^+"),
        complex("HSO4^-", "H^+ + SO4^2- = HSO4^-"),
        complex("NiCl(OH)", "Ni^2+ + Cl^- + H2O = NiCl(OH) + H^+")}) {
    INFO(stated.reaction);
    CHECK(interaction().with({stated}, {}));
  }
}

TEST_CASE("equilibria of one convention are refused by a model of the other", "[failure]") {
  const Names salt{"Na^+", "Cl^-"};
  for (const auto& [tables, model] : {std::pair{Convention::association, ModelKind::pitzer},
                                      std::pair{Convention::interaction, ModelKind::davies}}) {
    const auto refused = Solver::prepare(system_of(Equilibria::built_in(tables), salt), model, room);
    REQUIRE_FALSE(refused);
    CHECK(refused.problems()[0].what.find("other convention") != std::string::npos);
  }
}

TEST_CASE("each set for zinc brings its own constant", "[unit]") {
  CHECK(interaction(ZincSet::chloride).species().at("ZnCl4^2-").formation.log10_K == -1.047);
  CHECK_FALSE(interaction(ZincSet::chloride).species().contains("ZnCl3^-"));
  const auto zincate = [&](ZincSet set) {
    const auto& species = interaction(set).species();
    // over H^+: each OH^- costs an ionization of water
    return species.at("Zn(OH)4^2-").formation.log10_K - 4 * species.at("OH^-").formation.log10_K;
  };
  CHECK(zincate(ZincSet::alkaline) == Approx(14.733).margin(1e-9).epsilon(0));
  CHECK(zincate(ZincSet::dilute) > 15);
}

TEST_CASE("the sets for zinc follow from chloride and alkali", "[unit]") {
  using activity::parameter_sets_for;
  CHECK(parameter_sets_for({{"Zn^2+", 0.5}, {"Cl^-", 1}}).zinc == ZincSet::dilute);
  CHECK(parameter_sets_for({{"Zn^2+", 0.5}, {"Cl^-", 4}, {"K^+", 3}}).zinc == ZincSet::chloride);
  CHECK(parameter_sets_for({{"Zn^2+", 0.2}, {"Na^+", 3}, {"H^+", -2.6}}).zinc == ZincSet::alkaline);
  CHECK(parameter_sets_for({{"Na^+", 3}, {"H^+", -3}}).zinc == ZincSet::dilute);
  CHECK(parameter_sets_for({{"Cl^-", 1}, {"SO4^2-", 1}}).acid == activity::AcidSet::chloride);
}

TEST_CASE("hydrogensulfate follows the constant that the temperature tables were fitted with",
          "[reference]") {
  // Clegg, Rard & Pitzer 1994 (engine/data/README.md), from memory; a constant dCp meets it within 0.04.
  const Constant& K = interaction().species().at("HSO4^-").formation;
  for (const double t : {0.0, 25.0, 50.0, 75.0, 100.0}) {
    const double T = t + 273.15;
    const double published =
        -(562.69486 - 102.5154 * std::log(T) - 1.117033e-4 * T * T + 0.2477538 * T - 13273.75 / T);
    INFO(t << " degC");
    CHECK(K.log10_at({t}) == Approx(published).margin(0.042).epsilon(0));
  }
}
