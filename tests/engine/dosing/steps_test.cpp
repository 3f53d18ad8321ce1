// Order, portions, what a portion is dissolved in, and lists that the planner did not make.
#include <algorithm>
#include <bathwright/bath/at_aims.hpp>
#include <bathwright/dosing/check_plan.hpp>
#include <bathwright/matter/water.hpp>

#include "../../support/bath_type_named.hpp"
#include "../../support/demo_tank.hpp"

using namespace bathwright;
using demo::must;

namespace {

/// A demonstration tank at its aims, "al-1".
struct AtAims {
  bath::Tank tank;
  bath::Chemistry chemistry;
  bath::TankState state;

  [[nodiscard]] dosing::AdditionSheet checked(
      const std::vector<std::pair<std::string, double>>& additions) const {
    std::vector<dosing::Wanted> wanted;
    for (const auto& [id, kg] : additions) {
      const bath::ShelfItem* item = tank.on_shelf(id);
      wanted.push_back({item ? item->stock : demo::stock(id), kg});
    }
    return must(dosing::check_plan(tank, chemistry, state, wanted));
  }
};

AtAims at_aims(const std::string& name) {
  bath::Tank tank =
      must(shopfiles::read_tank(PROJECT_DIR "/baths/" + name + ".toml", matter::StockCatalogue::built_in()));
  bath::Chemistry chemistry = must(
      bath::Chemistry::prepare(bath_type_named(tank.bath_type), tank.temperature, tank.idle_temperature));
  bath::TankState state = must(bath::state_at_aims(tank, chemistry));
  return {std::move(tank), std::move(chemistry), std::move(state)};
}

const dosing::Check* check(const dosing::Step& step, const std::string& name) {
  const auto found = std::ranges::find(step.checks, name, &dosing::Check::name);
  return found == step.checks.end() ? nullptr : &*found;
}

}  // namespace

TEST_CASE("sulfuric acid is split so that no portion warms the tank too much", "[unit][dosing]") {
  // Shop practice: 1 g/L of acid warms a bath by about 0.2 degC; the anodizing tank allows 3.
  AtAims al = at_aims("al-1");
  const double litres = al.tank.working_volume.v;
  bath::ShelfItem& acid = *std::ranges::find(al.tank.shelf, "sulfuric-acid",
                                             [](const bath::ShelfItem& one) { return one.stock.id; });
  acid.largest_rise_g_per_L = 1000;
  const double kg = 0.03 * litres / acid.stock.assay;
  const auto steps = al.checked({{"sulfuric-acid", kg}}).plans.front().steps;
  REQUIRE(steps.size() >= 2);
  double all_C = 0;
  for (const dosing::Step& step : steps) {
    CHECK(step.warms_C <= 3.0001);
    all_C += step.warms_C;
  }
  CHECK(all_C == Approx(30 * 0.2).epsilon(0.25));
}

TEST_CASE("caustic goes into cold liquid, enough of it that it does not boil", "[unit][dosing]") {
  const AtAims zinc = at_aims("z-02");
  const auto step = zinc.checked({{"sodium-hydroxide", 10}}).plans.front().steps.front();
  REQUIRE(step.dissolve_in_L);
  CHECK(step.dissolve_in == "bath drawn off");  // there is no fill in this list
  // 1.1 MJ/kg into water: 40 degC are 6.6 L/kg.
  CHECK(*step.dissolve_in_L / step.kg == Approx(6.6).epsilon(0.05));
}

TEST_CASE("water to dissolve in comes out of the fill, so that the volume closes", "[property][dosing]") {
  const AtAims nickel = at_aims("n-07");
  const auto sheet = nickel.checked({{"water", 60}, {"nickel-chloride", 5}});
  const auto& plan = sheet.plans.front();
  double water_kg = 0;
  for (const dosing::Step& step : plan.steps) {
    if (step.chemical == "water") water_kg += step.kg;
    if (step.dissolve_in == "water")
      water_kg += *step.dissolve_in_L * matter::water_density(units::Celsius{20}).v;
  }
  CHECK(water_kg == Approx(60).epsilon(1e-9));
  CHECK(plan.steps.size() > 1);
  CHECK(plan.final_state.water_kg - nickel.state.water_kg ==
        Approx(60 + 5 * nickel.tank.on_shelf("nickel-chloride")->stock.assay * 6 * 18.0153 / 237.689)
            .epsilon(1e-3));
}

TEST_CASE("a salt is dissolved in what its solubility asks for", "[reference][dosing]") {
  // Boric acid, 55 degC: 12.4 g in 100 g of water (handbook, from memory: 11.5 at 50, 14.8 at 60 degC), of
  // which the sheet uses four fifths.
  const AtAims nickel = at_aims("n-07");
  const auto step = nickel.checked({{"water", 200}, {"boric-acid", 4}}).plans.front().steps.back();
  REQUIRE(step.dissolve_in == "water");
  CHECK(*step.dissolve_in_L / step.kg == Approx(1 / (0.8 * 0.131)).epsilon(0.1));
}

TEST_CASE("acid for a trim is thinned as the bath type says", "[unit][dosing]") {
  const AtAims nickel = at_aims("n-07");
  const auto step = nickel.checked({{"water", 20}, {"sulfuric-acid", 0.1}}).plans.front().steps.back();
  REQUIRE(step.dissolve_in_L);
  CHECK(*step.dissolve_in_L == Approx(10 * step.amount).epsilon(1e-9));
}

TEST_CASE("half of the sulfate, then an analysis", "[unit][dosing]") {
  const AtAims chromium = at_aims("cr-5");
  const auto steps = chromium.checked({{"sulfuric-acid", 0.2}}).plans.front().steps;
  REQUIRE(steps.size() == 2);
  CHECK(steps[0].analyse_after);
  CHECK_FALSE(steps[1].analyse_after);
}

TEST_CASE("each step says why it stands where it does", "[unit][dosing]") {
  const AtAims copper = at_aims("c-04");
  const auto plan = copper.checked({{"sodium-cyanide", 3}, {"copper-cyanide", 2}}).plans.front();
  CHECK(plan.feasible);
  CHECK_THAT(plan.steps.front().why_here, Catch::Contains("before the metal"));
  for (const dosing::Step& step : plan.steps) CHECK(check(step, "order") == nullptr);

  const auto turned = copper.checked({{"copper-cyanide", 2}, {"sodium-cyanide", 3}}).plans.front();
  CHECK_FALSE(turned.feasible);
  const dosing::Check* order = check(turned.steps.back(), "order");
  REQUIRE(order);
  CHECK(order->stops);
}

TEST_CASE("what an interlock refuses has no step, and the list is not feasible", "[failure][dosing]") {
  const AtAims copper = at_aims("c-04");
  const auto sheet = copper.checked({{"sodium-hydroxide", 1}, {"acetic-acid", 1}});
  REQUIRE(sheet.refused.size() == 1);
  CHECK(sheet.refused.front().rule == "interlock: acid_cyanide");
  CHECK_FALSE(sheet.plans.front().feasible);
  for (const dosing::Step& step : sheet.plans.front().steps) CHECK(step.chemical == "sodium-hydroxide");
  CHECK(copper.checked({{"sodium-hydroxide", 1}}).plans.front().feasible);
}

TEST_CASE("chemicals of one list that must not meet outside the tank are told", "[unit][dosing]") {
  const AtAims phosphate = at_aims("zp-01");
  const auto sheet = phosphate.checked({{"phosphoric-acid", 0.1}, {"sodium-nitrite", 0.02}});
  CHECK(sheet.refused.empty());
  REQUIRE(sheet.plans.front().keep_apart.size() == 1);
  CHECK_THAT(sheet.cautions.front(), Catch::Contains("never meet outside the tank"));
}

TEST_CASE("an amount that cannot be, and a chemical the bath does not know, are errors",
          "[failure][dosing]") {
  const AtAims nickel = at_aims("n-07");
  const auto fails = [&](const std::string& id, double kg) {
    return !dosing::check_plan(nickel.tank, nickel.chemistry, nickel.state, {{demo::stock(id), kg}});
  };
  CHECK(fails("boric-acid", -1));
  CHECK(fails("boric-acid", std::numeric_limits<double>::quiet_NaN()));
  CHECK(fails("sodium-hypophosphite", 1));
  CHECK_FALSE(fails("boric-acid", 0));
}
