// A short run of the table in REPORT.md: gross errors are flagged and named, and nothing is cried over sound
// shifts.
#include <catch2/catch.hpp>

#include "shop.hpp"

using namespace planted_errors;

TEST_CASE("gross errors are flagged and named, sound shifts are not", "[property]") {
  for (const Shop& shop : shops()) {
    INFO(shop.tank_file);
    const auto counts = simulate(
        shop, {{}, {Error::twice_the_sample}, {Error::swapped_burettes}, {Error::made_twice, 0.2}}, 100, 3);
    for (const Count& count : counts) {
      INFO(name(count.planted.error) << ": flagged " << count.flagged << ", named " << count.named_first
                                     << " of " << count.shifts);
      if (count.planted.error == Error::none) {
        CHECK(count.flagged <= 2);  // at 1 in 1000, three in 100 come once in 6500 runs
        continue;
      }
      CHECK(count.flagged >= 0.8 * count.shifts);
      if (count.planted.error != Error::made_twice) CHECK(count.named_first >= 0.8 * count.flagged);
      CHECK(count.clear_and_wrong <= 0.05 * count.shifts);
    }
  }
}
