#include <bathwright/shopfiles/policy_file.hpp>
#include <catch2/catch.hpp>

using namespace bathwright;
using namespace bathwright::shopfiles;

namespace {

bath::BathType anodizing() {
  bath::BathType type;
  type.id = type.name = "anodizing";
  type.quantities = {{"Al^3+", "aluminium", matter::Formula::parse("Al^3+").value(), {{"Al^3+", 1}}}};
  bath::Use use;
  use.id = "anodizing";
  use.counted_in = bath::CountedIn::ampere_hour;
  type.uses = {use};
  return type;
}

std::string refusal(std::string_view file) {
  const auto policy = read_policy_text("policy.toml", file, anodizing());
  REQUIRE_FALSE(policy);
  return text(policy.problems());
}

}  // namespace

TEST_CASE("a policy is read in the units it is written in", "[unit][shopfiles]") {
  const auto policy = read_policy_text("policy.toml", R"(horizon_days = 90
[calendar]
shifts_per_day = 2
hours_per_shift = "8 h"
days_per_week = 5
closed = [{ first_day = 30, days = 3 }]
[work]
anodizing = { per_shift = "21 kAh", uncertainty = "10 %" }
[area]
per_shift = "28000 dm2"
[drag_out]
film = "0.1 L/m2"
uncertainty = "30 %"
[evaporation]
working = "72 L/d"
[water]
brings = { "Al^3+" = "40 mg/L" }
[bleed]
rate = "2 L/h"
at_work = true
[[correlated]]
one = "drag-out"
other = "work, anodizing"
correlation = -0.4
[[replenish]]
chemical = "sulfuric-acid"
use = "anodizing"
for_each = "1 kAh"
amount = "0.6 kg"
[[decant]]
every_days = 14
volume = "0.5 m3"
[limit]
"Al^3+" = "15 g/L"
)",
                                       anodizing());
  INFO((policy ? std::string() : text(policy.problems())));
  REQUIRE(policy);
  CHECK(policy->horizon_days == 90);
  CHECK(policy->calendar.works_on(29));
  CHECK_FALSE(policy->calendar.works_on(31));
  CHECK_FALSE(policy->calendar.works_on(5));  // a Saturday
  REQUIRE(policy->work.size() == 1);
  CHECK(policy->work[0].per_shift.value == 21000);
  CHECK(policy->work[0].per_shift.u_rel == Approx(0.1));
  CHECK(policy->area_m2_per_shift.value == Approx(280));
  CHECK(policy->drag_out_L_per_m2.value == Approx(0.1));
  CHECK(policy->evaporation_L_per_h.value == Approx(3));
  CHECK(policy->water_g_per_L.at("Al^3+") == Approx(0.04));
  CHECK(policy->bleed_L_per_day == Approx(48));
  CHECK(policy->bleed_L_per_h(true) == Approx(3));  // in 16 h of work
  CHECK(policy->bleed_L_per_h(false) == 0);
  REQUIRE(policy->correlations.size() == 1);
  CHECK(policy->correlations[0].other == "work, anodizing");
  CHECK(policy->correlations[0].correlation == -0.4);
  REQUIRE(policy->replenishment.size() == 1);
  CHECK(policy->replenishment[0].kg_per_unit == Approx(0.0006));
  CHECK(policy->decants.at(0).litres == Approx(500));
  CHECK(policy->limits.at(0).high_g_per_L == Approx(15));
}

namespace {

/// A bath with a use of each kind of count.
bath::BathType every_count() {
  bath::BathType type;
  type.id = type.name = "every count";
  const auto quantity = [&](const char* id) {
    type.quantities.push_back({id, id, matter::Formula::parse(id).value(), {{id, 1}}});
  };
  quantity("Ni^2+");
  quantity("Ca^2+");
  quantity("CO3^2-");
  const auto use = [&](const char* id, bath::CountedIn counted_in) {
    bath::Use one;
    one.id = id;
    one.counted_in = counted_in;
    if (counted_in == bath::CountedIn::ampere_hour) one.deposits = "Ni^2+";
    type.uses.push_back(one);
  };
  use("current", bath::CountedIn::ampere_hour);
  use("grams", bath::CountedIn::gram_deposited);
  use("area", bath::CountedIn::m2_of_work);
  use("air", bath::CountedIn::m2_surface_hour);
  return type;
}

forecast::Policy read_every(std::string_view file) {
  const auto policy = read_policy_text("policy.toml", file, every_count());
  INFO((policy ? std::string() : text(policy.problems())));
  REQUIRE(policy);
  return *policy;
}

std::string refused_every(std::string_view file) {
  const auto policy = read_policy_text("policy.toml", file, every_count());
  REQUIRE_FALSE(policy);
  return text(policy.problems());
}

}  // namespace

TEST_CASE("work is told by the day, by thickness, and with what the shop found", "[unit][shopfiles]") {
  const auto policy = read_every(R"([calendar]
shifts_per_day = 2
hours_per_shift = "8 h"
[work]
current = { per_day = "22 kAh", cathode_efficiency = "95 %", anode_efficiency = { value = "104 %", uncertainty = "2 %" } }
grams = { per_day = "960 dm2", thickness = "25 um", density = "8.1 kg/L", metal = "92 %" }
area = { per_shift = "50 m2", effects = { "Ni^2+" = "86.24 g/m2", "Ca^2+" = "-1 mg/dm2" }, effects_uncertainty = "20 %" }
air = { effects = { "CO3^2-" = "0.5 kg/m2 d" }, uncertainty = "50 %" }
[area]
per_day = "960 dm2"
)");
  REQUIRE(policy.work.size() == 3);
  CHECK(policy.work[0].per_shift.value == 11000);
  CHECK(policy.work[1].per_shift.value == Approx(1788.48 / 2));  // scenario of the trade
  CHECK(policy.area_m2_per_shift.value == Approx(4.8));
  REQUIRE(policy.own_rates.size() == 3);
  CHECK(policy.own_rates[0].cathode_efficiency->value == Approx(0.95));
  CHECK(policy.own_rates[0].anode_efficiency->value == Approx(1.04));
  CHECK(policy.own_rates[0].anode_efficiency->u_rel == Approx(0.02));
  CHECK(policy.own_rates[1].effects->at("Ni^2+") == Approx(86.24));
  CHECK(policy.own_rates[1].effects->at("Ca^2+") == Approx(-0.1));
  CHECK(*policy.own_rates[1].effects_u_rel == Approx(0.2));
  CHECK(policy.own_rates[2].effects->at("CO3^2-") == Approx(500.0 / 24));
  CHECK(*policy.own_rates[2].effects_u_rel == Approx(0.5));
}

TEST_CASE("dates, seasons, air, rinses and rules are read", "[unit][shopfiles]") {
  const auto policy = read_every(R"([calendar]
shifts_per_day = 3
hours_per_shift = "8 h"
starts = "2026-03-04"
closed = [{ from = "2026-08-03", to = "2026-08-14" }]
[work]
current = { per_shift = "1 kAh" }
[water]
hardness = "10 degdH"
season = [{ from = "11-01", to = "02-28", brings = { "Ca^2+" = "20 mg/L" } }]
[carbon_dioxide]
uptake = "20 g/m2 h"
[waste]
price = 180
unit = "m3"
[[rinse]]
volume = "300 L"
returns = true
[[rinse]]
volume = "200 L"
stages = 2
flow = "5 L/min"
[[decant]]
on_day = 3
share = "25 %"
[[replenish]]
chemical = "a"
for_each = "1000 Ah"
amount = "0.5 L"
[[replenish]]
chemical = "b"
per_day = "24 kg"
[[replenish]]
chemical = "c"
for_each_fill = "100 L"
amount = "200 g"
[[replenish]]
chemical = "d"
for_each_turnover = 2
amount = "3 kg"
[[replenish]]
chemical = "e"
to_aim = "Ni^2+"
every_shifts = 2
to = "6 g/L"
below = "5.5 g/L"
)");
  CHECK(policy.calendar.first_weekday == 2);  // a Wednesday
  CHECK(policy.calendar.closed.at(0).first_day == 152);
  CHECK(policy.calendar.closed.at(0).days == 12);
  CHECK(policy.water_g_per_L.at("Ca^2+") == Approx(0.17848 * 40.078 / 100.086));
  CHECK(policy.seasons.at(0).g_per_L.at("Ca^2+") == Approx(0.02));
  CHECK(policy.carbon_dioxide->per_m2);
  CHECK(policy.waste_price_per_L == Approx(0.18));
  REQUIRE(policy.rinses.size() == 2);
  CHECK(policy.rinses[0].returns);
  CHECK(policy.rinses[1].flow_L_per_h == Approx(300));
  CHECK(policy.decants.at(0).share == Approx(0.25));
  using By = forecast::Replenishment::By;
  const auto& rules = policy.replenishment;
  REQUIRE(rules.size() == 5);
  CHECK(rules[0].use == "current");
  CHECK(rules[0].L_per_unit == Approx(0.0005));
  CHECK(rules[1].kg_per_unit == Approx(1));
  CHECK((rules[2].by == By::fill && rules[2].kg_per_unit == Approx(0.002)));
  CHECK((rules[3].by == By::turnover && rules[3].kg_per_unit == Approx(1.5)));
  CHECK((rules[4].every_shifts == 2 && *rules[4].to == Approx(6) && *rules[4].below == Approx(5.5)));
}

TEST_CASE("what does not go together in a policy is told with the mend", "[failure][shopfiles]") {
  CHECK_THAT(refused_every("[work]\ncurrent = { per_day = \"1 Ah\", per_shift = \"1 Ah\" }\n"),
             Catch::Contains("one of the two"));
  CHECK_THAT(refused_every("[work]\narea = { per_day = \"1 m2\", effects = { \"Ni^2+\" = \"1 g/Ah\" } }\n"),
             Catch::Contains("not what this use is counted in") && Catch::Contains("g/m2"));
  CHECK_THAT(refused_every("[work]\ngrams = { per_day = \"1 g\", cathode_efficiency = \"90 %\" }\n"),
             Catch::Contains("plates metal by current"));
  CHECK_THAT(refused_every("[work]\nair = { per_shift = \"1 h\" }\n"), Catch::Contains("by the clock"));
  CHECK_THAT(
      refused_every("[calendar]\nshifts_per_day = 1\nhours_per_shift = \"8 h\"\nstarts = \"2026-02-30\"\n"),
      Catch::Contains("is no date") && Catch::Contains("policy.toml:4"));
  CHECK_THAT(
      refused_every(
          "[water]\nbrings = {}\nseason = [{ from = \"05-01\", to = \"09-30\", hardness = \"1 degdH\" }]\n"),
      Catch::Contains("Add starts to the calendar"));
  CHECK_THAT(refused_every("[water]\nhardness = \"12 dH\"\n"), Catch::Contains("no hardness"));
  CHECK_THAT(refusal("[water]\nhardness = \"12 degdH\"\n"), Catch::Contains("no account of calcium"));
  CHECK_THAT(refused_every("[[rinse]]\nvolume = \"300 L\"\n"), Catch::Contains("never renewed"));
  CHECK_THAT(
      refused_every(
          "[[rinse]]\nvolume = \"3 L\"\nreturns = true\n[[rinse]]\nvolume = \"3 L\"\nreturns = true\n"),
      Catch::Contains("a rinse before it"));
  CHECK_THAT(refused_every("[[replenish]]\nchemical = \"a\"\nfor_each = \"1 Ah\"\namount = \"1 kg\"\n"),
             Catch::Contains("one of several uses, or of none"));
  CHECK_THAT(refused_every("[[replenish]]\nchemical = \"a\"\nto_aim = \"Ni^3+\"\n"),
             Catch::Contains("Did you mean Ni^2+?"));
  CHECK_THAT(refused_every("[[decant]]\nevery_days = 3\non_day = 2\nvolume = \"1 L\"\n"),
             Catch::Contains("one of the two"));
  CHECK_THAT(refused_every("[carbon_dioxide]\nuptake = \"20 g\"\n"), Catch::Contains("has no '/'"));
}

TEST_CASE("what cannot be in a policy is told with its line and the mend", "[failure][shopfiles]") {
  CHECK_THAT(refusal("[work]\nanodising = { per_shift = \"1 Ah\" }\n"),
             Catch::Contains("policy.toml:2") && Catch::Contains("Did you mean anodizing?"));
  CHECK_THAT(refusal("[work]\nanodizing = { per_shift = \"1 kg\" }\n"), Catch::Contains("ampere-hours"));
  CHECK_THAT(refusal("[drag_out]\nfilm = \"1.0 mL\"\n"), Catch::Contains("has no '/'"));
  CHECK_THAT(refusal("[calendar]\nshifts_per_day = 4\nhours_per_shift = \"8 h\"\n"),
             Catch::Contains("longer than a day"));
  CHECK_THAT(refusal("[[replenish]]\nchemical = \"sulfuric-acid\"\n"), Catch::Contains("no rule"));
  CHECK_THAT(refusal("[limit]\n\"Al^2+\" = \"15 g/L\"\n"), Catch::Contains("Did you mean Al^3+?"));
  CHECK_THAT(refusal("horizon_days = 1.5\n"), Catch::Contains("whole number"));
  CHECK_THAT(refusal("bleeds = 3\n"), Catch::Contains("policy.toml:1"));
}
