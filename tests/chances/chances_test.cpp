// A chance that was told comes true as often as it says. REPORT.md has the long run.
#include <catch2/catch.hpp>
#include <cmath>

#include "shops.hpp"

TEST_CASE("shops end inside their windows as often as they were told", "[property][dosing]") {
  std::string problem;
  const auto all = shops::open_shops(60, 400, 1, problem);
  REQUIRE(problem.empty());
  double told = 0, found = 0, variance = 0;
  for (const shops::Shop& shop : all) {
    told += shop.told;
    found += shop.inside;
    variance += shop.told * (1 - shop.told);
  }
  CHECK(told > 10);
  CHECK(told < 50);
  CHECK(found == Approx(told).margin(3.5 * std::sqrt(variance)).epsilon(0));
}
