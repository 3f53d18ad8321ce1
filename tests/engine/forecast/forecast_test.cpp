// Build-up against closed forms, scenarios of the trade and the laws of conservation.
#include <chrono>

#include "shop.hpp"

using namespace forecast_test;

TEST_CASE("a constant input against drag-out follows its closed form", "[reference][forecast]") {
  // dc/dt = (p - D c)/V: c = p/D + (c0 - p/D) exp(-D t/V). Elementary.
  const Anodizer shop;
  const auto run = must(shop.ready().run(shop.start));
  const double p = 42000 * 3600 / 96485.33212 * 26.982 / 3 * 0.35, D = 56, V = 8000, c0 = 10.1136;
  for (const int day : {1, 7, 30}) {
    CAPTURE(day);
    CHECK(level(run, day, 0) == Approx(p / D + (c0 - p / D) * std::exp(-D * day / V)).epsilon(1e-6));
  }
}

TEST_CASE("an anodizing tank meets its aluminium limit when the trade says", "[reference][forecast]") {
  // Worked scenario of the trade, common practice: 8000 L, 4933 g/day, 56 L/day dragged out, 10.11 g/L today.
  Anodizer shop;
  shop.policy.limits = {{"Al^3+", 15}};
  const auto forecast = shop.ready();
  const auto limits = forecast.limits(must(forecast.run(shop.start)));
  const auto aluminium = std::ranges::find_if(
      limits, [](const auto& l) { return l.name.find("Al^3+ above") != std::string::npos; });
  REQUIRE(aluminium != limits.end());
  REQUIRE(aluminium->day);
  CHECK(*aluminium->day == Approx(9.24508).epsilon(0.002));
  CHECK(aluminium->cause == forecast::Cause::by_product);

  const auto settled = must(forecast.steady_state(shop.start));
  REQUIRE(settled);
  CHECK((*settled)[0] == Approx(88.0893).epsilon(1e-6));
  const auto bleed = must(forecast.bleed_to_hold(shop.start, "Al^3+", 12));
  REQUIRE(bleed);
  CHECK(*bleed == Approx(355.084).epsilon(1e-5));
  CHECK_FALSE(must(forecast.bleed_to_hold(shop.start, "Al^3+", 100)));

  // A quarter decanted and filled up again.
  shop.policy.work.clear();
  shop.policy.area_m2_per_shift = {};
  shop.policy.decants = {{1, 2000}};
  CHECK(level(must(shop.ready().run(shop.start)), 1, 0) == Approx(7.58518).epsilon(1e-4));
}

TEST_CASE("acid replaced by analysis carries its sulfate and its cost", "[unit][forecast]") {
  Anodizer shop;
  shop.tank.aims = {{"H2SO4", 180, 165, 200}};
  shop.tank.shelf = {shelf("sulfuric-acid", 1)};
  Replenishment acid;
  acid.by = Replenishment::By::analysis;
  acid.stock = "sulfuric-acid";
  acid.quantity = "H2SO4";
  shop.policy.replenishment = {acid};
  shop.policy.bleed_L_per_day = 355.084;
  const auto run = must(shop.ready().run(shop.start));
  CHECK(level(run, 1, 1) == Approx(180).epsilon(1e-9));
  CHECK(level(run, 30, 1) == Approx(180).epsilon(1e-9));
  // Held at 180 g/L all the time it would be (D + B) 180 + 3/2 H2SO4 per Al = 100.89 kg a day (scenario of
  // the trade); made up once a day, the level has fallen by then and less was lost:
  //   V (180 - c(24 h)), c(t) = -q/B + (180 + q/B) exp(-B t/V), q the acid the aluminium takes.
  const double B = 56 + 355.084, V = 8000, q = 42000 * 3600 / 96485.33212 * 0.35 / 3 * 1.5 * 98.072;
  const double kg = (run.days[30].cost - run.days[29].cost) * shop.tank.shelf[0].stock.assay;
  CHECK(kg == Approx((180 + q / B) * -std::expm1(-B / V) * V / 1000).epsilon(1e-5));
}

TEST_CASE("a day has the density and the water of its solution", "[unit][forecast]") {
  const Anodizer shop;
  const auto run = must(shop.ready().run(shop.start));
  const forecast::Day& last = run.days.back();
  const bath::TankView view = must(shop.chemistry.view(run.end));
  CHECK(last.density_kg_per_L == Approx(view.density_kg_per_L).epsilon(1e-12));
  // A litre weighs what its water weighs and what is dissolved in that.
  double kg_per_kg_of_water = 1;
  for (const bath::SpeciesView& species : view.species)
    kg_per_kg_of_water += species.molality * must(matter::Formula::parse(species.name)).molar_mass().v / 1000;
  CHECK(last.water_kg_per_L * kg_per_kg_of_water == Approx(last.density_kg_per_L).epsilon(1e-4));
  CHECK(run.days.front().density_kg_per_L < last.density_kg_per_L);  // aluminium builds up
}

TEST_CASE("nothing is made and nothing is lost over ten thousand shifts", "[property][forecast]") {
  Anodizer shop;
  shop.tank.aims = {{"H2SO4", 180, 165, 200}};
  shop.tank.shelf = {shelf("sulfuric-acid", 1)};
  Replenishment acid;
  acid.by = Replenishment::By::analysis;
  acid.stock = "sulfuric-acid";
  acid.quantity = "H2SO4";
  acid.every_days = 2;
  shop.policy.replenishment = {acid};
  shop.policy.calendar = {3, 8, 5, 2, {{20, 10}}};
  shop.policy.decants = {{14, 1500}};
  shop.policy.horizon_days = 3400;
  const auto run = must(shop.ready().run(shop.start));
  for (const auto& [what, residual] : run.balance) {
    INFO(what);
    CHECK(std::abs(residual) < 1e-11);
  }
}

TEST_CASE("a shut shop loses nothing", "[unit][forecast]") {
  Anodizer shop;
  shop.policy.calendar.closed = {{0, 30}};
  const auto run = must(shop.ready().run(shop.start));
  CHECK(level(run, 30, 0) == Approx(level(run, 0, 0)).epsilon(1e-12));
  CHECK(run.days.back().drag_out_L == 0);
}

TEST_CASE("a calendar counted from another day keeps its weekdays and what is shut", "[unit][forecast]") {
  using namespace std::chrono_literals;
  forecast::Calendar undated;
  undated.days_per_week = 5;
  auto dated = undated.starting(2026y / 1 / 5);  // a Monday
  CHECK(dated.first_weekday == 0);
  dated.closed = {{24, 2}};  // 29 and 30 January, a Thursday and a Friday
  const auto later = dated.starting(2026y / 1 / 28);
  CHECK(later.first_weekday == 2);
  CHECK(later.date(0) == 2026y / 1 / 28);
  for (int day = 0; day < 40; ++day) CHECK(later.works_on(day) == dated.works_on(day + 23));
  CHECK_FALSE(later.works_on(1));
  undated.closed = {{1, 1}};
  CHECK_FALSE(undated.starting(2026y / 1 / 28).works_on(1));
  CHECK(undated.starting(2026y / 1 / 28).works_on(5));
}

TEST_CASE("samples are the same whatever the threads, and stop when told", "[unit][forecast]") {
  const Anodizer shop;
  const auto forecast = shop.ready();
  Forecast::Sampling sampling;
  sampling.samples = 40;
  sampling.threads = 1;
  const auto one = must(forecast.sample(shop.start, sampling));
  sampling.threads = 3;
  const auto three = must(forecast.sample(shop.start, sampling));
  CHECK(one.quantity[0].p50 == three.quantity[0].p50);
  CHECK(one.quantity[0].p05.back() < one.quantity[0].p50.back());
  const auto stopped = forecast.sample(shop.start, sampling, [](double) { return false; });
  CHECK_FALSE(stopped);
}

TEST_CASE("a policy that names what nobody knows is refused with every fault", "[failure][forecast]") {
  Anodizer shop;
  shop.policy.work = {{"plating", {1, 0}}};
  shop.policy.water_g_per_L = {{"Ca^2+", 0.04}};
  const auto refused = Forecast::prepare(shop.tank, shop.chemistry, shop.policy);
  REQUIRE_FALSE(refused);
  CHECK(text(refused.problems()).find("'plating' is no use") != std::string::npos);
  CHECK(text(refused.problems()).find("'Ca^2+' is no quantity") != std::string::npos);
}
