// Stations as processes, cut off and killed: nothing acknowledged is lost, nothing is there twice.
#include "stations.hpp"

#include <catch2/catch.hpp>

using namespace plant_test;

namespace {

void check_nothing_lost(const Aftermath& aftermath) {
  INFO("acknowledged " << aftermath.acknowledged << ", in the logs " << aftermath.in_logs
                       << ", said to be there " << aftermath.said_to_be_there << ", on the server "
                       << aftermath.on_server << "; " << aftermath.words);
  CHECK(aftermath.acknowledged > 0);
  CHECK(aftermath.lost_here == 0);
  CHECK(aftermath.said_to_be_there > 0);
  CHECK(aftermath.lost_there == 0);
  CHECK(aftermath.in_logs >= aftermath.acknowledged);
  CHECK(aftermath.on_server == aftermath.in_logs);
  CHECK(aftermath.same);
  CHECK(aftermath.verified);
}

void check_fault(Breakage fault) {
  INFO("seed " << Catch::rngSeed());
  const Aftermath aftermath = run({.breakage = fault, .seed = Catch::rngSeed()});
  check_nothing_lost(aftermath);
  CHECK(aftermath.faults > 0);
  if (fault == Breakage::server_frozen) CHECK(aftermath.while_frozen > 0);
}

}  // namespace

TEST_CASE("stations are killed", "[failure][plant]") { check_fault(Breakage::stations_killed); }
TEST_CASE("the server is killed", "[failure][plant]") { check_fault(Breakage::server_killed); }
TEST_CASE("the server is frozen, and the stations go on", "[failure][plant]") {
  check_fault(Breakage::server_frozen);
}
TEST_CASE("connections are cut", "[failure][plant]") { check_fault(Breakage::connections_cut); }

TEST_CASE("twenty stations log and send at once", "[property][plant]") {
  const Aftermath aftermath = run({.stations = 20, .entries_a_second = 5, .time = std::chrono::seconds(2)});
  check_nothing_lost(aftermath);
  CHECK(aftermath.said_to_be_there == aftermath.in_logs);  // each sent its last entry before it ended
  CHECK(aftermath.acknowledged == 20 * 5 * 2);
}
