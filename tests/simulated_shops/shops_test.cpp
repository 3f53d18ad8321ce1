// A few of the shops of REPORT.md: the intervals hold the truth about as often as they say.
#include <catch2/catch.hpp>

#include "bench.hpp"

using namespace simulated_shops;

TEST_CASE("learning finds a shop's true figures", "[reference][learning]") {
  constexpr int shops = 24, weeks = 12;
  int shown = 0, covered = 0;
  for (const Kind& kind : kinds()) {
    const Bench bench = bench_of(kind);
    const Study s = study(kind, bench, weeks, shops, 11);
    CHECK(s.failed == 0);
    CHECK(s.rms_learned < s.rms_by_policy);
    for (const Row& row : s.rows) {
      INFO(kind.name << ": " << row.label << ", " << row.covered << " of " << row.shops);
      // Of 24 intervals of 90 % fewer than 16 hold the truth once in 2000 times (binomial).
      CHECK(row.covered >= 16);
      CHECK(row.rms < 1.1 * row.rms_prior);
      shown += row.shops, covered += row.covered;
    }
  }
  // All together: 85 to 97 %, what REPORT.md shows with its larger numbers.
  CHECK(covered > 0.85 * shown);
  CHECK(covered < 0.98 * shown);
}

TEST_CASE("a wrong titration is named in almost every log", "[reference][learning]") {
  const Kind& watts = kinds().front();
  const Named n = named(watts, bench_of(watts), 8, 20, 12, Fault::titration_wrong);
  CHECK(n.planted == 20);
  CHECK(n.named >= 18);
}
