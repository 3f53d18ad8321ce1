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
  REQUIRE(policy->replenishment.size() == 1);
  CHECK(policy->replenishment[0].kg_per_unit == Approx(0.0006));
  CHECK(policy->decants.at(0).litres == Approx(500));
  CHECK(policy->limits.at(0).high_g_per_L == Approx(15));
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
