// What depends on the state of the bath, what is put in by which rule, and what a deposit takes.
#include <bathwright/matter/formula.hpp>

#include "shop.hpp"

using namespace forecast_test;

namespace {

/// Aluminium that goes away by itself, in an hour k of what there is: dn/dt = -k n.
struct Decaying : Anodizer {
  static constexpr double k_per_h = 0.004;
  explicit Decaying(double shift_h) {
    bath::Use& use = type.uses.front();
    use.counted_in = bath::CountedIn::hour;
    use.rate = [](const bath::IndicatorView& view) -> Result<std::vector<double>> {
      return std::vector{-k_per_h * view.quantity_g_per_L[0] * view.volume_L};
    };
    chemistry = must(bath::Chemistry::prepare(type, {25}, {25}));
    policy = {};
    policy.calendar = {static_cast<int>(std::lround(24 / shift_h)), shift_h, 7, 0, {}};
    policy.horizon_days = 10;
  }
  [[nodiscard]] double error() const {
    const auto run = must(ready().run(start));  // nothing evaporates: it stands above its mark in the end
    return level(run, 10, 0) * run.days[10].volume_L / (10.1136 * 8000 * std::exp(-240 * k_per_h)) - 1;
  }
};

Replenishment rule_of(const char* stock, Replenishment::By by, double kg_per_unit) {
  Replenishment rule;
  rule.by = by;
  rule.stock = stock;
  rule.kg_per_unit = kg_per_unit;
  return rule;
}

double kg_of(const forecast::Run& run, const std::string& stock) {
  for (const auto& one : run.ledger.chemicals)
    if (one.stock == stock) return one.kg;
  return 0;
}

}  // namespace

TEST_CASE("an effect that depends on the state converges with the square of the shift",
          "[property][forecast]") {
  const double e8 = Decaying(8).error(), e4 = Decaying(4).error(), e2 = Decaying(2).error(),
               e1 = Decaying(1).error();
  CHECK(std::abs(e8) < 3e-4);
  CHECK(e8 / e4 == Approx(4).epsilon(0.05));
  CHECK(e4 / e2 == Approx(4).epsilon(0.05));
  CHECK(e2 / e1 == Approx(4).epsilon(0.05));
}

TEST_CASE("a rate that has no answer ends the forecast, with the day", "[failure][forecast]") {
  Decaying shop(8);
  int calls = 0;
  shop.type.uses.front().rate = [&calls](const bath::IndicatorView&) -> Result<std::vector<double>> {
    if (++calls <= 18) return std::vector{0.0};
    return Problem{Fault::out_of_range, "anodizing", "no answer", "", ""};
  };
  shop.chemistry = must(bath::Chemistry::prepare(shop.type, {25}, {25}));
  const auto run = must(shop.ready().run(shop.start));
  REQUIRE_FALSE(run.ended.empty());
  CHECK(run.days.size() == 4);  // twice a shift, three shifts a day
  CHECK(text(run.ended).find("day 4") != std::string::npos);
  CHECK(text(run.ended).find("no answer") != std::string::npos);
}

TEST_CASE("gold plated is gold taken, whatever the complex weighs", "[reference][forecast]") {
  bath::BathType type;
  type.id = type.name = "gold";
  type.components = {{"H^+", FoundBy::analysis}, {"Au(CN)2^-", FoundBy::analysis}, {"K^+", FoundBy::charge}};
  type.own_species = {{"Au(CN)2^-", "", "test", "", {}, 0}};
  type.quantities = {quantity("Au(CN)2^-", "Au(CN)2^-", {{"Au(CN)2^-", 1}}),
                     quantity("KOH", "KOH", {{"H^+", -1}})};
  bath::Use use;
  use.id = "deposition";
  use.counted_in = bath::CountedIn::ampere_hour;
  use.deposits = "Au(CN)2^-";
  use.electrons = 1;
  use.cathode_efficiency = 0.4;
  type.uses = {use};
  const auto chemistry = must(bath::Chemistry::prepare(type, {25}, {25}));
  auto tank = tank_of(type, 100);
  tank.aims = {{"Au(CN)2^-", 12, 10, 14}};
  const auto start = must(chemistry.state_from({{"Au(CN)2^-", 12}, {"KOH", 1}}, std::nullopt, {100}, {25}));
  Policy policy;
  policy.work = {{"deposition", {10, 0}}};
  policy.horizon_days = 1;
  const auto run = must(must(Forecast::prepare(tank, chemistry, policy)).run(start));
  // 7.3491 g of gold an ampere-hour; 249.0 g of the ion hold 196.97 g of it.
  const double gold_g = 10 * 0.4 * 7.3491, ion_g = gold_g * 249.002 / 196.967;
  CHECK((level(run, 0, 0) - level(run, 1, 0)) * 100 == Approx(ion_g).epsilon(1e-4));
  REQUIRE(run.ledger.metals.size() == 1);
  CHECK(run.ledger.metals[0].element == "Au");
  CHECK(run.ledger.metals[0].deposited_kg == Approx(gold_g / 1000).epsilon(1e-4));
  CHECK(run.days[1].turnovers == Approx(ion_g / (12 * 100)).epsilon(1e-4));
}

TEST_CASE("anodes may give more than the current, and a shop knows its own efficiency", "[unit][forecast]") {
  Anodizer shop;
  bath::Use& use = shop.type.uses.front();
  use.effects.clear();
  use.deposits = "Al^3+";
  use.electrons = 3;
  use.cathode_efficiency = 0.9;
  use.anode_efficiency = 1;
  shop.chemistry = must(bath::Chemistry::prepare(shop.type, {25}, {25}));
  shop.policy.area_m2_per_shift = {};
  shop.policy.horizon_days = 1;
  const auto grown = [&] {
    const auto run = must(shop.ready().run(shop.start));
    return (level(run, 1, 0) - level(run, 0, 0)) * 8000;
  };
  const double all = 42000 * 3600 / 96485.33212 / 3 * 26.982;
  CHECK(grown() == Approx(0.1 * all).epsilon(1e-5));
  shop.policy.own_rates = {
      {"anodizing", {}, {}, forecast::Uncertain{0.95, 0.01}, forecast::Uncertain{1.1, 0}}};
  CHECK(grown() == Approx(0.15 * all).epsilon(1e-5));
  shop.policy.own_rates.front().effects = std::map<std::string, double>{{"Al^3+", 0.001}};
  CHECK(grown() == Approx(0.15 * all + 42).epsilon(1e-5));
}

TEST_CASE("chemicals go in by fill, turnover, shift and litre", "[unit][forecast]") {
  Anodizer shop;
  bath::Use& use = shop.type.uses.front();
  use.deposits = "Al^3+";
  use.electrons = 3;
  shop.chemistry = must(bath::Chemistry::prepare(shop.type, {25}, {25}));
  shop.tank.aims = {{"H2SO4", 180, 165, 200}, {"Al^3+", 10, 5, 15}};
  shop.tank.shelf = {shelf("sulfuric-acid", 1)};
  shop.policy.work = {{"anodizing", {4200, 0}}};
  shop.policy.evaporation_L_per_h = {2, 0};
  shop.policy.horizon_days = 5;
  const auto run_of = [&](Replenishment rule) {
    shop.policy.replenishment = {std::move(rule)};
    return must(shop.ready().run(shop.start));
  };
  using By = Replenishment::By;
  const auto fill = run_of(rule_of("sulfuric-acid", By::fill, 0.01));
  CHECK(kg_of(fill, "sulfuric-acid") == Approx(0.01 * fill.days.back().top_up_L).epsilon(1e-9));
  const auto turnover = run_of(rule_of("sulfuric-acid", By::turnover, 100));
  CHECK(kg_of(turnover, "sulfuric-acid") == Approx(100 * turnover.days.back().turnovers).epsilon(1e-9));
  auto by_volume = rule_of("sulfuric-acid", By::hour, 0);
  by_volume.L_per_unit = 0.5;
  CHECK(kg_of(run_of(by_volume), "sulfuric-acid") ==
        Approx(5 * 24 * 0.5 * shop.tank.shelf[0].stock.kg_per_L).epsilon(1e-12));
  // Every second of three shifts a day: 7 times in 5 days; each is up to the aim of the rule.
  shop.policy.calendar = {3, 8, 7, 0, {}};
  auto by_shift = rule_of("sulfuric-acid", By::analysis, 0);
  by_shift.quantity = "H2SO4";
  by_shift.every_shifts = 2;
  by_shift.to = 185;
  const auto shifts = run_of(by_shift);
  CHECK(level(shifts, 2, 1) == Approx(185).epsilon(1e-9));  // after shift 6
  CHECK(level(shifts, 1, 1) < 185);
  auto dead_band = by_shift;
  dead_band.below = 100;
  CHECK(kg_of(run_of(dead_band), "sulfuric-acid") == 0);
}

TEST_CASE("the load that a bleed can carry follows its closed form", "[reference][forecast]") {
  // Settled: c = f p/(f D + B); f = B c/(p - D c).
  Anodizer shop;
  shop.policy.bleed_L_per_day = 100;
  const double p = 42000 * 3600 / 96485.33212 * 26.982 / 3 * 0.35, D = 56, B = 100, c = 12;
  const auto load = must(shop.ready().largest_load(shop.start, "Al^3+", c));
  REQUIRE(load);
  CHECK(*load == Approx(B * c / (p - D * c)).epsilon(1e-5));
  CHECK_FALSE(must(shop.ready().largest_load(shop.start, "Al^3+", 100)));  // p/D is below
  shop.policy.drag_in_L_per_m2 = {};
  shop.policy.water_g_per_L = {{"Al^3+", 13}};
  CHECK(must(shop.ready().largest_load(shop.start, "Al^3+", c)) == 0.0);
}

TEST_CASE("inputs are ranked by how far they move the day", "[reference][forecast]") {
  Anodizer shop;
  shop.policy.limits = {{"Al^3+", 15}};
  const auto all = must(shop.ready().sensitivity(shop.start, 0.01));
  REQUIRE(all.size() == 1);
  const auto& influences = all.front().influences;
  REQUIRE(influences.size() >= 3);
  CHECK(influences[0].input == "effects of anodizing");
  // t = -ln((15 - c_inf)/(c_0 - c_inf))/k with c_inf = p/D, p times exp(+-0.1).
  const auto day = [](double p, double D) {
    return -std::log((15 - p / D) / (10.1136 - p / D)) / (D / 8000);
  };
  const double p = 42000 * 3600 / 96485.33212 * 26.982 / 3 * 0.35;
  REQUIRE(influences[0].day_higher);
  CHECK(*influences[0].day_higher == Approx(day(p * std::exp(0.1), 56)).epsilon(1e-3));
  CHECK(*influences[0].day_lower == Approx(day(p * std::exp(-0.1), 56)).epsilon(1e-3));
  for (std::size_t i = 1; i < influences.size(); ++i) CHECK(influences[i].days <= influences[i - 1].days);
}

TEST_CASE("the day of the policy as it stands is not the median of the samples", "[unit][forecast]") {
  Anodizer shop;
  shop.policy.limits = {{"Al^3+", 15}};
  const auto forecast = shop.ready();
  const auto one = must(forecast.run(shop.start));
  Forecast::Sampling sampling;
  sampling.samples = 50;
  const auto bands = must(forecast.sample(shop.start, sampling));
  const auto met = forecast.limits(one);
  const auto at = std::ranges::find_if(met, [](const auto& limit) { return limit.day.has_value(); });
  REQUIRE(at != met.end());
  const auto& sampled = bands.limits[static_cast<std::size_t>(at - met.begin())];
  CHECK(sampled.day == at->day);
  REQUIRE(sampled.day_p50);
  CHECK(*sampled.day_p50 != *sampled.day);
  CHECK(*sampled.day_p05 < *sampled.day);
  CHECK(*sampled.day_p95 > *sampled.day);
}

TEST_CASE("what no bleed can hold is told, and the reason", "[failure][forecast]") {
  Anodizer shop;  // what fills it up brings more than the limit
  shop.policy.work.clear();
  shop.policy.water_g_per_L = {{"Al^3+", 13}};
  const auto bleed = shop.ready().bleed_to_hold(shop.start, "Al^3+", 12);
  REQUIRE_FALSE(bleed);
  CHECK(bleed.problems().front().kind == Fault::not_converged);
  CHECK(text(bleed.problems()).find("no bleed holds it") != std::string::npos);
}

TEST_CASE("a level that only freezing out takes down settles where it leaves it", "[reference][forecast]") {
  // Chilled every night: c' = c - (v/V)(c - left) tends to what is left (scenario of the trade: a third to
  // 40 g/L). Crystals take water with them, which is filled up again.
  Anodizer shop;
  shop.policy.work.clear();
  shop.policy.area_m2_per_shift = {};
  shop.policy.freeze_outs = {{"Al^3+", "Al2(SO4)3.18H2O", 1, 2000, 4}};
  const auto settled = must(shop.ready().steady_state(shop.start));
  REQUIRE(settled);
  CHECK((*settled)[0] == Approx(4).epsilon(1e-6));
  CHECK_FALSE(must(shop.ready().bleed_to_hold(shop.start, "Al^3+", 5)));
}

TEST_CASE("a bleed at work takes no more a week than its days", "[unit][forecast]") {
  Anodizer shop;
  shop.policy.work.clear();
  shop.policy.area_m2_per_shift = {};
  shop.policy.calendar = {2, 8, 5, 0, {}};
  shop.policy.bleed_L_per_day = 80;
  shop.policy.bleed_at_work = true;
  shop.policy.horizon_days = 7;
  const auto run = must(shop.ready().run(shop.start));
  CHECK(run.days[5].waste_L == Approx(400));
  CHECK(run.days[7].waste_L == Approx(400));
  CHECK(level(run, 5, 0) / level(run, 0, 0) == Approx(std::exp(-400 / 8000.0)).epsilon(1e-9));
}

TEST_CASE("inputs that were learned together are drawn together", "[unit][forecast]") {
  // Work and effects only count as their product: opposite to each other they leave nothing to chance.
  Anodizer shop;
  shop.policy.area_m2_per_shift = {};
  shop.policy.work.front().per_shift.u_rel = 0.1;
  Forecast::Sampling sampling;
  sampling.samples = 200;
  sampling.u_level_rel = 0;
  const auto width = [&] {
    const auto bands = must(shop.ready().sample(shop.start, sampling));
    return bands.quantity[0].p95.back() - bands.quantity[0].p05.back();
  };
  const double apart = width();
  shop.policy.correlations = {{"work, anodizing", "effects of anodizing", -0.999}};
  CHECK(width() < 0.1 * apart);
  shop.policy.correlations = {{"work, anodizing", "effects of anodizing", 0.999}};
  CHECK(width() == Approx(std::sqrt(2.0) * apart).epsilon(0.15));
  shop.policy.correlations = {{"work, anodizing", "weather", 0.5}};
  CHECK_FALSE(Forecast::prepare(shop.tank, shop.chemistry, shop.policy));
}

TEST_CASE("what was put in at a shift's end does not lift the aims", "[unit][forecast]") {
  // A feed that brings water stands above the mark until water is held back: the level is that of the mark.
  Anodizer shop;
  shop.tank.aims = {{"H2SO4", 180, 165, 200}};
  shop.tank.shelf = {shelf("sulfuric-acid", 1), shelf("sulfuric-acid-35", 1)};
  shop.policy.bleed_L_per_day = 400;
  auto by_hand = rule_of("sulfuric-acid-35", Replenishment::By::turnover, 0);
  by_hand.by = Replenishment::By::analysis;
  by_hand.quantity = "H2SO4";
  by_hand.to = 170;
  auto later = by_hand;
  later.stock = "sulfuric-acid";
  later.to = 180;
  shop.policy.calendar = {1, 24, 7, 0, {}};
  by_hand.every_shifts = 1;
  shop.policy.replenishment = {by_hand, later};
  const auto run = must(shop.ready().run(shop.start));
  CHECK(run.days[3].volume_L == Approx(8000).epsilon(1e-9));
  CHECK(level(run, 3, 1) == Approx(180).epsilon(1e-9));
}

TEST_CASE("where the model has left its range nothing is judged, and the day is told", "[unit][forecast]") {
  Anodizer shop;
  shop.type.max_ionic_strength = 3;  // told twice of it
  shop.chemistry = must(bath::Chemistry::prepare(shop.type, {25}, {25}));
  shop.policy.area_m2_per_shift = {};
  shop.policy.horizon_days = 120;
  const auto run = must(shop.ready().run(shop.start));
  REQUIRE(run.beyond);
  CHECK(run.beyond->day > 0);
  const auto& first = run.days[static_cast<std::size_t>(run.beyond->day)];
  CHECK(std::isnan(first.pH));
  CHECK_FALSE(std::isnan(run.days[static_cast<std::size_t>(run.beyond->day) - 1].pH));
  CHECK(std::isnan(run.days.back().pH));
  CHECK(run.days.back().quantity_g_per_L[0] > first.quantity_g_per_L[0]);  // amounts go on
}
