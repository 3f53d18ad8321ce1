// The same at length, on the disk, with everything breaking at once.
#include <catch2/catch.hpp>

#include "stations.hpp"

using namespace plant_test;

TEST_CASE("everything breaks for a minute and nothing is lost", "[failure][plant]") {
  INFO("seed " << Catch::rngSeed());
  const Aftermath aftermath = run({.breakage = Breakage::all_together,
                                   .stations = 8,
                                   .time = std::chrono::seconds(60),
                                   .where = Where::disk,
                                   .seed = Catch::rngSeed()});
  CHECK(aftermath.lost_here == 0);
  CHECK(aftermath.lost_there == 0);
  CHECK(aftermath.on_server == aftermath.in_logs);
  CHECK(aftermath.same);
  CHECK(aftermath.verified);
}

TEST_CASE("twenty stations at five entries a second for twenty seconds", "[property][plant]") {
  const Aftermath aftermath =
      run({.stations = 20, .entries_a_second = 5, .time = std::chrono::seconds(20), .where = Where::disk});
  CHECK(aftermath.acknowledged == 2000);
  CHECK(aftermath.lost_here == 0);
  CHECK(aftermath.on_server == 2000);
  CHECK(aftermath.same);
  CHECK(aftermath.verified);
}
