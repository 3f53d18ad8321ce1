#include <bathwright/bath/uncertainty.hpp>
#include <bathwright/speciation/sensitivity.hpp>
#include <cmath>
#include <numbers>
#include <random>

#include "../../support/demo_tank.hpp"

using namespace bathwright;
using demo::must;

namespace {

double total_kg(const bath::TankState& state) {
  return demo::chemistry().density(state).v * demo::chemistry().volume_L(state);
}

/// Saturation index of a solid when the tank is speciated as it is.
double saturation(const speciation::Solver& solver, const bath::TankState& state, const std::string& solid,
                  std::optional<double> pH = std::nullopt) {
  speciation::Task task;
  task.component_mol = state.component_mol;
  task.water_kg = state.water_kg;
  if (pH) task.pH = speciation::HeldPh{*pH, *solver.system().component("SO4^2-")};
  return must(solver.solve(task)).saturation_index[*solver.system().solid(solid)];
}

const bath::Headroom& headroom(const bath::TankView& view, const std::string& solid) {
  for (const bath::Headroom& room : view.headroom)
    if (room.solid == solid) return room;
  FAIL("no headroom of " << solid);
  return view.headroom.front();
}

}  // namespace

TEST_CASE("a state gives its levels, pH and volume back", "[property][bath]") {
  INFO("seed " << Catch::rngSeed());
  std::mt19937_64 random(Catch::rngSeed());
  std::uniform_real_distribution<double> sulfate(150, 350), chloride(20, 90), boric(20, 50),
      acidity(2.5, 5.2), litres(100, 5000);
  for (int i = 0; i < 30; ++i) {
    const double s = sulfate(random), c = chloride(random), b = boric(random), pH = acidity(random),
                 V = litres(random);
    CAPTURE(s, c, b, pH, V);
    const bath::TankState state = demo::state(s, c, b, pH, V);
    const bath::TankView view = must(demo::chemistry().quick_view(state));
    CHECK(view.volume_L == Approx(V).epsilon(1e-10));
    CHECK(view.pH == Approx(pH).margin(1e-8).epsilon(0));
    CHECK(demo::level(view, "NiSO4.6H2O") == Approx(s).epsilon(1e-10));
    CHECK(demo::level(view, "NiCl2.6H2O") == Approx(c).epsilon(1e-10));
    CHECK(demo::level(view, "H3BO3") == Approx(b).epsilon(1e-10));
    double charge = 0, ions = 0;
    for (std::size_t k = 0; k < state.component_mol.size(); ++k) {
      const int z = demo::chemistry().working().system().species()[k].charge;
      charge += z * state.component_mol[k];
      ions += std::abs(z) * state.component_mol[k];
    }
    CHECK(std::abs(charge) < 1e-12 * ions);
  }
}

TEST_CASE("twice the tank is the same bath", "[property][bath]") {
  bath::TankState state = demo::state(263.4, 48.03, 36.97, 4.1);
  const bath::TankView one = must(demo::chemistry().quick_view(state));
  for (double& mol : state.component_mol) mol *= 2;
  state.water_kg *= 2;
  const bath::TankView two = must(demo::chemistry().quick_view(state));
  CHECK(two.volume_L == Approx(2 * one.volume_L).epsilon(1e-12));
  CHECK(two.pH == Approx(one.pH).margin(1e-9).epsilon(0));
  CHECK(two.ionic_strength == Approx(one.ionic_strength).epsilon(1e-10));
}

TEST_CASE("what is weighed in arrives", "[property][bath]") {
  const bath::TankState before = demo::state(263.4, 48.03, 36.97);
  SECTION("a pure salt adds its mass, crystal water included") {
    matter::StockChemical pure = demo::stock("nickel-sulfate");
    pure.assay = 1;
    const auto after = bath::Chemistry::after(before, must(demo::chemistry().brings(pure)), 20);
    CHECK(total_kg(after) - total_kg(before) ==
          Approx(20).epsilon(1e-4));  // 18.0153 against 18.015 g/mol of water
    CHECK(after.water_kg - before.water_kg == Approx(20 * 6 * 18.015 / 262.839).epsilon(1e-4));
  }
  SECTION("the rest of an acid is water") {
    const auto brings = must(demo::chemistry().brings(demo::stock("sulfuric-acid")));
    CHECK(brings.component_mol[0] == Approx(2 * 960 / 98.072).epsilon(1e-4));  // 96 % by mass, 98.072 g/mol
    CHECK(brings.water_kg == Approx(0.04).margin(1e-12).epsilon(0));
  }
  SECTION("basic nickel carbonate takes up acid; its carbonate leaves as gas") {
    // NiCO3.2Ni(OH)2.4H2O + 6 H+ -> 3 Ni2+ + CO2 + 9 H2O: hand calculation, 376.175 g/mol
    const auto brings = must(demo::chemistry().brings(demo::stock("nickel-carbonate")));
    const double mol = demo::stock("nickel-carbonate").assay * 1000 / 376.175;
    const auto nickel = *demo::chemistry().working().system().component("Ni^2+");
    CHECK(brings.component_mol[nickel] == Approx(3 * mol).epsilon(1e-4));
    CHECK(brings.component_mol[0] == Approx(-6 * mol).epsilon(1e-4));
    CHECK(brings.water_kg == Approx(9 * mol * 0.0180153).epsilon(1e-4));
  }
  SECTION("what a lot contains beside its substance comes along, its charge made up by the counter-ion") {
    // 1 kg of boric acid with 0.2 % chloride: 2/35.45 mol, in place of half as much sulfate.
    matter::StockChemical lot = demo::stock("boric-acid");
    const auto clean = must(demo::chemistry().brings(lot));
    lot.contains = {{"Cl^-", 0.002}};
    const auto brings = must(demo::chemistry().brings(lot));
    const auto chloride = *demo::chemistry().working().system().component("Cl^-");
    const auto sulfate = *demo::chemistry().working().system().component("SO4^2-");
    CHECK(brings.component_mol[chloride] == Approx(2 / 35.45).epsilon(1e-4));
    CHECK(brings.component_mol[sulfate] == Approx(-1 / 35.45).epsilon(1e-4));
    CHECK(brings.component_mol[0] == clean.component_mol[0]);
  }
  SECTION("a chemical the bath type does not know is refused by name") {
    const auto brings = demo::chemistry().brings(demo::stock("sodium-hypophosphite"));
    REQUIRE_FALSE(brings);
    CHECK_THAT(brings.problems().front().text(),
               Catch::Contains("sodium-hypophosphite") && Catch::Contains("H2PO2^-"));
  }
}

TEST_CASE("headroom is what the tank really takes", "[property][bath]") {
  const bath::TankState state = demo::state(263.4, 48.03, 36.97, 4.1, 2340);
  const bath::TankView view = must(demo::chemistry().view(state));
  SECTION("boric acid, dissolved at the working temperature up to its headroom, is just saturated") {
    const bath::Headroom& room = headroom(view, "H3BO3");
    REQUIRE(room.working_kg > 0);
    matter::StockChemical pure = demo::stock("boric-acid");
    pure.assay = 1;
    const auto full = bath::Chemistry::after(state, must(demo::chemistry().brings(pure)), room.working_kg);
    CHECK(saturation(demo::chemistry().working(), full, "H3BO3") == Approx(0).margin(1e-6).epsilon(0));
  }
  SECTION("what crystallises when idle leaves a saturated bath behind") {
    const bath::Headroom& room = headroom(view, "H3BO3");
    REQUIRE(room.idle_kg < 0);  // common practice: a cold Watts bath holds about 30 g/L
    matter::StockChemical pure = demo::stock("boric-acid");
    pure.assay = 1;
    const auto left = bath::Chemistry::after(state, must(demo::chemistry().brings(pure)), room.idle_kg);
    CHECK(saturation(demo::chemistry().idle(), left, "H3BO3") == Approx(0).margin(1e-6).epsilon(0));
  }
  SECTION("a hydroxide forms above the pH it says") {
    const bath::Headroom& room = headroom(view, "Ni(OH)2 (freshly precipitated)");
    CHECK(std::isnan(room.working_kg));
    CHECK(saturation(demo::chemistry().working(), state, room.solid, room.forms_above_pH) ==
          Approx(0).margin(1e-3).epsilon(0));
  }
  SECTION("a hydrate counts only where its constant holds") {
    CHECK(headroom(view, "NiSO4.7H2O").covers_idle);
    CHECK_FALSE(headroom(view, "NiSO4.7H2O").covers_working);
    CHECK(headroom(view, "NiSO4.6H2O (beta)").covers_working);
  }
  SECTION("a solid with an ion that is not there is left out") {
    for (const bath::Headroom& room : view.headroom) CHECK(room.solid != "CaSO4.2H2O (gypsum)");
  }
}

TEST_CASE("gypsum shows up with hard water", "[unit][bath]") {
  const auto state = must(demo::chemistry().state_from(
      {{"NiSO4.6H2O", 280}, {"NiCl2.6H2O", 50}, {"H3BO3", 40}, {"Ca^2+", 0.3}}, 4.2, {2400}, {55}));
  const bath::TankView view = must(demo::chemistry().view(state));
  CHECK(headroom(view, "CaSO4.2H2O (gypsum)").covers_working);
  CHECK(std::isfinite(headroom(view, "CaSO4.2H2O (gypsum)").working_kg));
}

TEST_CASE("levels that cannot be are refused by name", "[failure][bath]") {
  const auto refusal = [](std::map<std::string, double> levels, double pH = 4.2, double volume = 2400) {
    const auto state = demo::chemistry().state_from(levels, pH, {volume}, {55});
    REQUIRE_FALSE(state);
    return text(state.problems());
  };
  CHECK_THAT(refusal({{"Ni^2+", 10}, {"Cl^-", 60}, {"H3BO3", 40}}),
             Catch::Contains("SO4^2-") && Catch::Contains("counter-ion"));
  CHECK_THAT(refusal({{"Ni^2+", 70}, {"Cl^-", 14}}), Catch::Contains("H3BO3") && Catch::Contains("no level"));
  CHECK_THAT(refusal({{"Ni^2+", -70}, {"Cl^-", 14}, {"H3BO3", 40}}),
             Catch::Contains("Ni^2+") && Catch::Contains("-70"));
  CHECK_THAT(refusal({{"Zn^2+", 70}, {"Cl^-", 14}, {"H3BO3", 40}}), Catch::Contains("Zn^2+"));
  CHECK_THAT(refusal({{"Ni^2+", 70}, {"Cl^-", 14}, {"H3BO3", 40}}, 30), Catch::Contains("pH"));
  CHECK_THAT(refusal({{"Ni^2+", 70}, {"Cl^-", 14}, {"H3BO3", 40}}, 4.2, 0), Catch::Contains("volume"));
  CHECK_THAT(refusal({{"Ni^2+", std::nan("")}, {"Cl^-", 14}, {"H3BO3", 40}}), Catch::Contains("Ni^2+"));
  CHECK_THAT(refusal({}), Catch::Contains("no levels"));
}

TEST_CASE("a temperature outside the bath type's range is refused", "[failure][bath]") {
  const auto chemistry = bath::Chemistry::prepare(demo::watts(), {97}, {18});
  REQUIRE_FALSE(chemistry);
  CHECK_THAT(text(chemistry.problems()), Catch::Contains("97") && Catch::Contains("Watts"));
}

TEST_CASE("a nickel bath is far from ideal", "[reference][bath]") {
  // Hand-worked ionic strength of the bath taken as fully dissociated, molar scale: worked example WE-18 of
  // tests/reference/worked_examples.csv gives 5.13 mol/L for 300/45/40 g/L; per kg of water it is larger.
  const auto view = must(demo::chemistry().quick_view(demo::state(300, 45, 40)));
  CHECK(view.ionic_strength > 5.13);
  CHECK(view.ionic_strength < 5.13 * 1.15);
  // Free nickel is a twentieth of what a table of concentrations suggests: the point of the tool.
  for (const bath::SpeciesView& species : view.species)
    if (species.name == "Ni^2+") {
      CHECK(species.gamma < 0.08);
      CHECK(species.gamma > 0.03);
    }
}

TEST_CASE("headroom and free ions carry the uncertainty of the solved tank", "[unit][bath]") {
  const bath::Chemistry& chemistry = demo::chemistry();
  const bath::TankState state = demo::state(263.4, 48.03, 36.97, 4.1);
  const bath::TankView view = must(bath::view_with_uncertainty(chemistry, state));
  const auto solved = [&](const speciation::Solver& solver, std::optional<double> pH, const char* excess) {
    speciation::Task task;
    task.component_mol = state.component_mol;
    task.water_kg = state.water_kg;
    if (pH) task.pH = speciation::HeldPh{*pH, chemistry.counter_ion()};
    if (excess) {
      task.solids.assign(solver.system().solids().size(), speciation::SolidRule::report_only);
      task.solids[*solver.system().solid(excess)] = speciation::SolidRule::in_excess;
    }
    return must(speciation::uncertainty(solver, task, must(solver.solve(task))));
  };
  const speciation::ChemicalSystem& system = chemistry.working().system();
  const auto held = solved(chemistry.working(), view.pH, nullptr);
  for (const bath::SpeciesView& species : view.species) {
    CAPTURE(species.name);
    CHECK(species.u_log10_activity.value() ==
          Approx(held.ln_activity[*system.species_index(species.name)] / std::numbers::ln10)
              .epsilon(1e-6)
              .margin(1e-12));
    if (species.name == "H^+") CHECK(*species.u_log10_activity < 1e-9);  // the pH was measured
    if (species.name == "Ni^2+") CHECK(*species.u_log10_activity > 0);
  }
  const char* boric = "H3BO3";
  const bath::Headroom& room = headroom(view, boric);
  const std::size_t solid = *system.solid(room.solid);
  CHECK(room.u_working_log10.value() > 0);
  CHECK(room.u_working_log10.value() == Approx(held.saturation_index[solid]).epsilon(1e-6).margin(0));
  CHECK(room.u_idle_kg.value() ==
        Approx(solved(chemistry.idle(), std::nullopt, boric).solid_mol[solid] * 0.061833)
            .epsilon(1e-4)
            .margin(0));
  CHECK_FALSE(room.u_forms_above_pH);
  const bath::Headroom& hydroxide = headroom(view, "Ni(OH)2 (freshly precipitated)");
  CHECK_FALSE(hydroxide.u_working_kg);
  CHECK(hydroxide.u_forms_above_pH.value() ==
        Approx(solved(chemistry.working(), hydroxide.forms_above_pH, nullptr)
                   .saturation_index[*system.solid("Ni(OH)2 (freshly precipitated)")] /
               2)
            .epsilon(1e-6)
            .margin(0));
  CHECK_FALSE(must(chemistry.view(state)).headroom.front().u_working_log10);  // only on demand
}
