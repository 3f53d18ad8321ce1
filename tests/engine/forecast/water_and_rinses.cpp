// Where the water goes, what the rinses hold, and what the air brings: against closed forms.
#include "shop.hpp"

using namespace forecast_test;

namespace {

/// Nothing dissolves and nothing is lost but what a test adds.
struct Still : Anodizer {
  Still() {
    policy.work.clear();
    policy.horizon_days = 400;
  }
};

/// Caustic soda that turns to soda.
bath::BathType caustic() {
  bath::BathType type;
  type.id = type.name = "caustic";
  type.components = {{"H^+", FoundBy::analysis}, {"CO3^2-", FoundBy::analysis}, {"Na^+", FoundBy::charge}};
  type.quantities = {quantity("NaOH", "NaOH", {{"H^+", -1}}), quantity("Na2CO3", "Na2CO3", {{"CO3^2-", 1}})};
  return type;
}

}  // namespace

TEST_CASE("water to fill up is what evaporates and leaves, less what comes in", "[property][forecast]") {
  Still shop;
  shop.start = must(shop.chemistry.state_from({{"Al^3+", 0.1}, {"H2SO4", 0.5}}, std::nullopt, {8000}, {25}));
  shop.policy.calendar = {2, 8, 7, 0, {}};
  shop.policy.area_m2_per_shift = {280, 0};
  shop.policy.drag_in_L_per_m2 = {0.04, 0};
  shop.policy.evaporation_L_per_h = {3, 0};
  shop.policy.idle_evaporation_L_per_h = 1;
  shop.policy.bleed_L_per_day = 20;
  shop.policy.horizon_days = 10;
  const auto run = must(shop.ready().run(shop.start));
  // Practice: top-up = evaporation + drag-out + bleed - drag-in; nearly pure water of 25 degC, 1.003 L a kg.
  const double a_day = 16 * 3 + 8 * 1 + 56 + 20 - 2 * 280 * 0.04;
  CHECK(run.days.back().top_up_L == Approx(10 * a_day).epsilon(0.003));
  CHECK(run.days.back().volume_L == Approx(8000).epsilon(1e-10));
  CHECK(run.balance.at("water") == Approx(0).margin(1e-12));
}

TEST_CASE("what is put in beyond what leaves stands above the mark, then runs over", "[unit][forecast]") {
  Still shop;
  shop.tank.shelf = {shelf("sulfuric-acid", 1)};
  Replenishment acid;
  acid.stock = "sulfuric-acid";
  acid.kg_per_unit = 20;
  shop.policy.replenishment = {acid};
  shop.policy.area_m2_per_shift = {};
  shop.policy.horizon_days = 4;
  const auto run = must(shop.ready().run(shop.start));
  CHECK(run.days[1].volume_L > 8000);
  CHECK(run.days[1].waste_L == 0);
  CHECK(run.days.back().volume_L == Approx(8400).epsilon(1e-9));  // the brim
  CHECK(run.days.back().waste_L > 0);
  CHECK(run.days.back().top_up_L == 0);
  CHECK(level(run, 4, 1) > level(run, 3, 1));
  for (const auto& [what, residual] : run.balance) {
    INFO(what);
    CHECK(std::abs(residual) < 1e-12);
  }
}

TEST_CASE("counter-current rinses dilute as their closed form says", "[reference][forecast]") {
  // D (c_i-1 - c_i) = Q (c_i - c_i+1), c_n+1 = 0: c_n/c_0 = (r - 1)/(r^(n+1) - 1), r = Q/D. For r >> 1 this
  // is (D/Q)^n, the rule of the trade.
  Still shop;
  shop.policy.area_m2_per_shift = {240, 0};  // 1 L/h
  shop.policy.rinses = {{"rinse", 50, 3, 20, false, 0}};
  const auto run = must(shop.ready().run(shop.start));
  REQUIRE(run.rinsed.stages.size() == 3);
  const double r = 20, tank = run.days.back().quantity_g_per_L[0], last = run.rinsed.stages[2].g_per_L[0];
  CHECK(last / tank == Approx((r - 1) / (std::pow(r, 4) - 1)).epsilon(1e-3));  // the tank thins meanwhile
  CHECK(last / tank == Approx(std::pow(1 / r, 3)).epsilon(0.06));
  // All that is dragged out goes to treatment or stays on the work.
  double dragged = 0;
  for (const auto& flow : run.ledger.flows)
    if (flow.name == "drag-out") dragged = -flow.kg[0] / 400;
  CHECK(run.rinsed.kg_per_day[0] + run.rinsed.carried_kg_per_day[0] == Approx(dragged).epsilon(2e-3));
  CHECK(run.rinsed.waste_L_per_day == Approx(480));
  for (const auto& [what, residual] : run.balance) {
    INFO(what);
    CHECK(std::abs(residual) < 1e-11);
  }
}

TEST_CASE("a drag-out tank gives back what evaporation makes room for", "[reference][forecast]") {
  // Steady: D c_0 = (D + R) c_1; R c_1 comes back, D c_1 goes on: the share lost is D/(D + R).
  Still shop;
  shop.policy.area_m2_per_shift = {240, 0};  // D = 1 L/h
  shop.policy.evaporation_L_per_h = {4, 0};  // R = D + evaporation, less what salts leave room for
  shop.policy.rinses = {{"drag-out tank", 200, 1, 0, true, 0}};
  shop.policy.horizon_days = 100;
  const auto run = must(shop.ready().run(shop.start));
  const double R = run.rinsed.returned_L_per_day / 24;
  CHECK(R == Approx(5).epsilon(0.02));
  CHECK(run.rinsed.stages[0].g_per_L[0] / level(run, 100, 0) == Approx(1 / (1 + R)).epsilon(0.01));
  double dragged = 0, back = 0;
  for (const auto& flow : run.ledger.flows)
    (flow.name == "drag-out" ? dragged : flow.name == "rinse returned" ? back : dragged) += flow.kg[0];
  CHECK(back / -dragged == Approx(R / (1 + R)).epsilon(0.02));
  Still without;
  without.policy.area_m2_per_shift = {240, 0};
  without.policy.horizon_days = 100;
  CHECK(level(run, 100, 0) > level(must(without.ready().run(without.start)), 100, 0));
}

TEST_CASE("a still rinse that is dumped holds what was dragged in since", "[unit][forecast]") {
  Still shop;
  shop.policy.area_m2_per_shift = {240, 0};
  shop.policy.rinses = {{"still", 1000, 1, 0, false, 7}};
  shop.policy.horizon_days = 13;
  const auto run = must(shop.ready().run(shop.start));
  // Six days of 24 L at some 10 g/L into 1000 L: c = c_0 (1 - exp(-D t/V)).
  CHECK(run.rinsed.stages[0].g_per_L[0] / level(run, 13, 0) ==
        Approx(-std::expm1(-24 * 6 / 1000.0)).epsilon(0.02));
  CHECK(run.rinsed.waste_L_per_day == Approx(1000.0 / 13));
}

TEST_CASE("carbon dioxide turns caustic to carbonate, both in their shares", "[reference][forecast]") {
  const bath::BathType type = caustic();
  auto tank = tank_of(type, 5000);
  const auto chemistry = must(bath::Chemistry::prepare(type, {25}, {25}));
  const auto start =
      must(chemistry.state_from({{"NaOH", 114.506}, {"Na2CO3", 61}}, std::nullopt, {5000}, {25}));
  Policy policy;
  policy.horizon_days = 28;
  policy.carbon_dioxide = forecast::Uptake{{2618.26 / 24, 0}, false};
  const auto run = must(must(Forecast::prepare(tank, chemistry, policy)).run(start));
  // Nothing evaporates: the tank stands a little above its mark in the end.
  const auto grams = [](const forecast::Run& of, int day, std::size_t q) {
    return level(of, day, q) * of.days.at(static_cast<std::size_t>(day)).volume_L;
  };
  // 6305.63 g of Na2CO3 a day from 2.61826 kg of CO2, and 0.754746 g of NaOH a gram (scenario of the trade).
  CHECK((grams(run, 28, 1) - grams(run, 0, 1)) / 28 == Approx(6305.63).epsilon(1e-4));
  CHECK((grams(run, 0, 0) - grams(run, 28, 0)) / 28 == Approx(0.754746 * 6305.63).epsilon(1e-4));
  for (const auto& [what, residual] : run.balance) {
    INFO(what);
    CHECK(std::abs(residual) < 1e-12);
  }
  // By surface, and refused where there is none, or where no carbonate is kept account of.
  policy.carbon_dioxide = forecast::Uptake{{20, 0}, true};
  CHECK_FALSE(Forecast::prepare(tank, chemistry, policy));
  tank.surface = units::SquareDecimetres{500};
  const auto by_surface = must(must(Forecast::prepare(tank, chemistry, policy)).run(start));
  CHECK((grams(by_surface, 28, 1) - grams(by_surface, 0, 1)) / 28 ==
        Approx(100 * 24 * 105.988 / 44.009).epsilon(1e-4));
  Still acid;
  acid.policy.carbon_dioxide = forecast::Uptake{{20, 0}, false};
  CHECK_FALSE(Forecast::prepare(acid.tank, acid.chemistry, acid.policy));
}

TEST_CASE("water of another season brings what it holds", "[unit][forecast]") {
  Still shop;
  shop.policy.area_m2_per_shift = {};
  shop.policy.evaporation_L_per_h = {10, 0};
  shop.policy.calendar.starts = std::chrono::sys_days(std::chrono::year(2026) / 12 / 22);
  shop.policy.seasons = {{std::chrono::December / 25, std::chrono::January / 3, {{"Al^3+", 0.1}}}};
  shop.policy.horizon_days = 30;
  const auto run = must(shop.ready().run(shop.start));
  CHECK(level(run, 3, 0) == Approx(level(run, 0, 0)).epsilon(1e-9));
  // Ten days of 240 kg with 0.1 g a kg.
  CHECK((level(run, 13, 0) - level(run, 3, 0)) * 8000 == Approx(240).epsilon(0.01));
  CHECK(level(run, 30, 0) == Approx(level(run, 13, 0)).epsilon(1e-6));
  shop.policy.calendar.starts.reset();
  CHECK_FALSE(Forecast::prepare(shop.tank, shop.chemistry, shop.policy));
}
