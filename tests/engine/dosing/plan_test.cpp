#include <bathwright/dosing/plan.hpp>
#include <cmath>
#include <random>

#include "../../support/demo_tank.hpp"

using namespace bathwright;
using demo::must;

namespace {

dosing::AdditionSheet planned(const bath::TankState& state, const bath::Tank& tank = demo::tank(),
                              const dosing::Request& request = {}) {
  return must(dosing::plan_additions(tank, demo::chemistry(), state, request));
}

double kg_of(const dosing::Plan& plan, const std::string& chemical) {
  for (const dosing::Addition& addition : plan.additions)
    if (addition.chemical == chemical) return addition.kg;
  return 0;
}

int steps_of(const dosing::Plan& plan, const std::string& chemical) {
  int count = 0;
  for (const dosing::Step& step : plan.steps) count += step.chemical == chemical;
  return count;
}

bath::Tank with_shelf(const std::vector<std::string>& ids) {
  bath::Tank tank = demo::tank();
  std::erase_if(tank.shelf, [&](const bath::ShelfItem& item) {
    return std::find(ids.begin(), ids.end(), item.stock.id) == ids.end();
  });
  return tank;
}

/// The tank of the demonstration morning: 2340 L, the levels of its three titrations, pH 4.1.
bath::TankState morning() { return demo::state(263.4133, 48.0345, 36.97339, 4.1, 2340); }

}  // namespace

TEST_CASE("the demonstration morning ends at its aims", "[reference][dosing]") {
  // Hand calculation, volumes added without mixing effects: mass = (aim V_mark - found V_now) / assay. Aims
  // and final volume are the same here, so the true volume change moves only the water to fill up with; and
  // the basic nickel carbonate that trims the pH brings nickel that the sulfate need not.
  const dosing::Plan plan = planned(morning()).plans.front();
  INFO((plan.unmet.empty() ? std::string() : plan.unmet.front()));
  CHECK(plan.feasible);
  CHECK(kg_of(plan, "nickel-chloride") == Approx(7.71489).epsilon(0.002));
  CHECK(kg_of(plan, "boric-acid") == Approx(14.354).epsilon(0.002));
  const double carbonate = kg_of(plan, "nickel-carbonate");
  const double nickel_of_carbonate = carbonate * demo::stock("nickel-carbonate").assay * 3 * 58.693 / 376.175;
  CHECK(carbonate > 0);
  CHECK(carbonate < 0.2);
  CHECK(kg_of(plan, "nickel-sulfate") + nickel_of_carbonate * 262.839 / 58.693 / 0.99 ==
        Approx(56.1746).epsilon(0.002));
  // Filled with water alone the tank would take 60 L; the salts displace most of it.
  CHECK(kg_of(plan, "water") > 15);
  CHECK(kg_of(plan, "water") < 30);
  CHECK(steps_of(plan, "nickel-sulfate") == 3);  // largest single rise 10 g/L, from 256.8 to 280
  CHECK(steps_of(plan, "boric-acid") == 2);      // 5 g/L

  CHECK(plan.final_view.volume_L == Approx(2400).epsilon(1e-8));
  CHECK(plan.final_view.pH == Approx(4.2).margin(1e-4).epsilon(0));
  CHECK(demo::level(plan.final_view, "NiSO4.6H2O") == Approx(280).epsilon(1e-6));
  CHECK(demo::level(plan.final_view, "NiCl2.6H2O") == Approx(50).epsilon(1e-6));
  CHECK(demo::level(plan.final_view, "H3BO3") == Approx(42).epsilon(1e-6));
}

TEST_CASE("a plan re-checked from its own slip ends where it said", "[property][dosing]") {
  // Independent of the planner: amounts from the slip's masses and formulae, solved by a system made here.
  const bath::TankState start = morning();
  const dosing::Plan plan = planned(start).plans.front();
  const auto system = std::make_shared<const speciation::ChemicalSystem>(must(
      speciation::ChemicalSystem::make(speciation::Equilibria::built_in(activity::Convention::interaction),
                                       {"SO4^2-", "Ni^2+", "H3BO3", "Cl^-"})));
  const auto solver =
      must(speciation::Solver::prepare(system, activity::ModelKind::pitzer, {55}, demo::watts().sets.acid));
  speciation::Task task;
  for (const std::string& name : system->components())
    task.component_mol.push_back(start.component_mol[*demo::chemistry().working().system().component(name)]);
  task.water_kg = start.water_kg;
  const auto add = [&](const std::string& component, double mol) {
    task.component_mol[*system->component(component)] += mol;
  };
  constexpr double water = 0.0180153;  // kg/mol
  for (const dosing::Step& step : plan.steps) {
    const double g = 1000 * step.kg * demo::tank().on_shelf(step.chemical)->stock.assay;
    if (step.chemical == "water") task.water_kg += step.kg;
    if (step.chemical == "nickel-sulfate")
      add("Ni^2+", g / 262.839), add("SO4^2-", g / 262.839), task.water_kg += 6 * g / 262.839 * water;
    if (step.chemical == "nickel-chloride")
      add("Ni^2+", g / 237.683), add("Cl^-", 2 * g / 237.683), task.water_kg += 6 * g / 237.683 * water;
    if (step.chemical == "boric-acid") add("H3BO3", g / 61.831);
    if (step.chemical == "nickel-carbonate")
      add("Ni^2+", 3 * g / 376.175), add("H^+", -6 * g / 376.175), task.water_kg += 9 * g / 376.175 * water;
  }
  const auto end = must(solver.solve(task));
  CHECK(end.pH() == Approx(plan.final_view.pH).margin(2e-4).epsilon(0));  // molar masses typed to six digits
  for (const bath::SpeciesView& species : plan.final_view.species)
    if (const auto at = system->species_index(species.name); at && species.molality > 1e-3) {
      INFO(species.name);
      CHECK(end.molality[*at] == Approx(species.molality).epsilon(1e-4));
    }
}

TEST_CASE("a tank at its aims needs nothing", "[unit][dosing]") {
  const dosing::Plan plan = planned(demo::state(280, 50, 42)).plans.front();
  CHECK(plan.feasible);
  CHECK(plan.additions.empty());
  CHECK(plan.steps.empty());
  CHECK(plan.cost == Approx(0).margin(1e-3).epsilon(0));
}

TEST_CASE("low tanks are brought home from anywhere", "[property][dosing]") {
  INFO("seed " << Catch::rngSeed());
  std::mt19937_64 random(Catch::rngSeed());
  std::uniform_real_distribution<double> share(0.8, 0.97), acidity(3.7, 4.7), litres(2200, 2340);
  for (int i = 0; i < 25; ++i) {
    const double s = 280 * share(random), c = 50 * share(random), b = 42 * share(random),
                 pH = acidity(random), V = litres(random);
    CAPTURE(s, c, b, pH, V);
    const dosing::Plan plan = planned(demo::state(s, c, b, pH, V)).plans.front();
    CHECK(plan.unmet.empty());
    CHECK(plan.final_view.pH == Approx(4.2).margin(0.01).epsilon(0));  // less than a gram is not dosed
    CHECK(demo::level(plan.final_view, "NiSO4.6H2O") == Approx(280).epsilon(1e-6));
    for (const dosing::Step& step : plan.steps) CHECK(step.kg > 0);
  }
}

TEST_CASE("pH is trimmed with what moves it the right way", "[unit][dosing]") {
  CHECK(kg_of(planned(demo::state(270, 48, 40, 4.5)).plans.front(), "sulfuric-acid") > 0);
  CHECK(kg_of(planned(demo::state(270, 48, 40, 4.5)).plans.front(), "nickel-carbonate") == 0);
  CHECK(kg_of(planned(demo::state(270, 48, 40, 3.9)).plans.front(), "nickel-carbonate") > 0);
  CHECK(kg_of(planned(demo::state(270, 48, 40, 3.9)).plans.front(), "sulfuric-acid") == 0);
}

TEST_CASE("an acid and an alkali are never dosed together", "[unit][dosing]") {
  // Cheap hydrochloric acid with cheap caustic would be the least-cost chloride.
  bath::Tank tank = demo::tank();
  for (const char* id : {"hydrochloric-acid", "sodium-hydroxide-solution"})
    tank.shelf.push_back({demo::stock(id), 0.05, bath::ShelfItem::Per::kilogram, std::nullopt, std::nullopt});
  const dosing::Plan plan = planned(demo::state(265, 42, 38, 4.2, 2340), tank).plans.front();
  const double acid = kg_of(plan, "hydrochloric-acid") + kg_of(plan, "sulfuric-acid");
  const double alkali = kg_of(plan, "sodium-hydroxide-solution") + kg_of(plan, "nickel-carbonate");
  CHECK((acid == 0 || alkali == 0));
  CHECK(plan.unmet.empty());
}

TEST_CASE("a bath type's hard limits hold for what nobody aims at", "[unit][dosing]") {
  // Chloride from table salt alone: more sodium than the 15 g/L at which Watts nickel stops.
  bath::Tank tank = with_shelf({"nickel-sulfate", "boric-acid", "water"});
  tank.shelf.push_back(
      {demo::stock("sodium-chloride"), 0.3, bath::ShelfItem::Per::kilogram, std::nullopt, std::nullopt});
  std::erase_if(tank.aims,
                [](const bath::Aim& aim) { return aim.quantity != "Cl^-" && aim.quantity != "NiCl2.6H2O"; });
  tank.aims.front() = {"Cl^-", 40, 35, 45};
  const dosing::Plan plan = planned(demo::state(200, 20, 35, 4.2, 2300), tank).plans.front();
  CHECK_FALSE(plan.feasible);
  bool said = false;
  for (const dosing::Step& step : plan.steps)
    for (const dosing::Check& check : step.checks)
      said = said || (check.name == "sodium" && !check.ok && check.stops);
  CHECK(said);
}

TEST_CASE("a tank that starts outside its pH stops can be brought back", "[unit][dosing]") {
  const dosing::Plan acid = planned(demo::state(270, 48, 40, 2.9)).plans.front();
  CHECK(acid.feasible);
  CHECK(acid.final_view.pH == Approx(4.2).margin(1e-3).epsilon(0));
}

TEST_CASE("the cheaper of two bags is taken", "[unit][dosing]") {
  bath::Tank tank = demo::tank();
  bath::ShelfItem other{demo::stock("nickel-sulfate-heptahydrate"), 0, bath::ShelfItem::Per::kilogram,
                        std::nullopt, std::nullopt};
  // Per mol of nickel the heptahydrate is 6.9 % heavier: cheaper only below 5.10 / 1.0685 at equal assay.
  other.stock.assay = 0.99;
  other.price = 4.7;
  tank.shelf.push_back(other);
  const dosing::Plan cheaper = planned(morning(), tank).plans.front();
  CHECK(kg_of(cheaper, "nickel-sulfate-heptahydrate") > 50);
  CHECK(kg_of(cheaper, "nickel-sulfate") == 0);
  tank.shelf.back().price = 4.85;
  CHECK(kg_of(planned(morning(), tank).plans.front(), "nickel-sulfate-heptahydrate") == 0);
}

TEST_CASE("what the shelf cannot reach is said, with the nearest plan", "[failure][dosing]") {
  SECTION("too strong already") {
    const dosing::Plan plan = planned(demo::state(330, 50, 42, 4.2, 2400)).plans.front();
    CHECK_FALSE(plan.feasible);
    REQUIRE_FALSE(plan.unmet.empty());
    CHECK_THAT(plan.unmet.front(), Catch::Contains("aim 280"));
    CHECK(plan.final_view.volume_L <= 2550.0001);  // never over the brim
  }
  SECTION("too strong, but inside its window") {
    const dosing::Plan plan = planned(demo::state(300, 50, 42, 4.2, 2400)).plans.front();
    CHECK(plan.feasible);
    REQUIRE_FALSE(plan.unmet.empty());
    CHECK_THAT(plan.unmet.front(), Catch::Contains("inside its window"));
  }
  SECTION("nothing on the shelf for boric acid") {
    const dosing::Plan plan =
        planned(morning(), with_shelf({"nickel-sulfate", "nickel-chloride", "water"})).plans.front();
    CHECK_FALSE(plan.feasible);
    std::string all;
    for (const std::string& one : plan.unmet) all += one + "\n";
    CHECK_THAT(all, Catch::Contains("boric acid"));
    CHECK(demo::level(plan.final_view, "NiSO4.6H2O") == Approx(280).epsilon(1e-6));
  }
  SECTION("a chemical that is none of this bath's is refused, the rest is planned") {
    bath::Tank tank = demo::tank();
    tank.shelf.push_back(
        {demo::stock("sodium-hypophosphite"), 1, bath::ShelfItem::Per::kilogram, std::nullopt, std::nullopt});
    const dosing::AdditionSheet sheet = planned(morning(), tank);
    REQUIRE(sheet.refused.size() == 1);
    CHECK_THAT(sheet.refused.front().reason, Catch::Contains("sodium-hypophosphite"));
    CHECK(sheet.plans.front().feasible);
  }
}

TEST_CASE("buffer before salts, salts before the pH trim, water first", "[unit][dosing]") {
  const dosing::Plan plan = planned(morning()).plans.front();
  std::vector<std::string> order;
  for (const dosing::Addition& addition : plan.additions) order.push_back(addition.chemical);
  CHECK(order == std::vector<std::string>{"water", "boric-acid", "nickel-sulfate", "nickel-chloride",
                                          "nickel-carbonate"});
}

TEST_CASE("boric acid that an idle tank cannot hold is told at every step", "[unit][dosing]") {
  const dosing::Plan plan = planned(morning()).plans.front();
  for (const dosing::Step& step : plan.steps) {
    bool told = false;
    for (const dosing::Check& check : step.checks)
      if (check.name.starts_with("H3BO3 at 18")) told = !check.ok && !check.stops;
    CHECK(told);
  }
}

TEST_CASE("the chance to end inside the window", "[unit][dosing]") {
  // One quantity off its window's middle: nickel chloride ends at 50, window 40 to 60, u = 5 g/L now in the
  // same volume: P = 2 Phi(2) - 1 = 0.9545 (normal table).
  const auto sheet = planned(demo::state(280, 50, 42), demo::tank(), {.uncertainty = {{"NiCl2.6H2O", 5.0}}});
  REQUIRE(sheet.plans.front().probability_in_window);
  CHECK(*sheet.plans.front().probability_in_window == Approx(0.9545).margin(1e-4).epsilon(0));
  CHECK_FALSE(planned(demo::state(280, 50, 42)).plans.front().probability_in_window);
}

TEST_CASE("every sheet defers to who decides", "[unit][dosing]") {
  const dosing::AdditionSheet sheet = planned(morning());
  std::string all;
  for (const std::string& caution : sheet.cautions) all += caution + "\n";
  CHECK_THAT(all, Catch::Contains("safety data sheet") && Catch::Contains("local codes") &&
                      Catch::Contains("licensed practice"));
  CHECK_THAT(all, Catch::Contains("nickel(II) sulfate hexahydrate: Carcinogen"));
  CHECK_THAT(all, !Catch::Contains("Sodium stays"));  // nothing with sodium goes in
}
