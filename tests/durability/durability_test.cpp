// The faults in reduced extent in every run, in full behind the label "long". REPORT.md has the figures.
#include <catch2/catch.hpp>
#include <cstdlib>

#include "fault_table.hpp"
#include "trials.hpp"

using namespace faults;

namespace {

const Extent& extent() { return std::getenv("BATHWRIGHT_ALL_FAULTS") ? full : in_every_run; }

void check(const std::vector<FaultRow>& rows) {
  for (const FaultRow& row : rows)
    UNSCOPED_INFO(row.fault << ": " << row.runs << " runs, " << row.found << " of " << row.acknowledged
                            << " found");
  CHECK(failures(rows) == std::vector<std::string>{});
}

std::mt19937 random_numbers() {
  UNSCOPED_INFO("seed " << Catch::rngSeed());
  return std::mt19937(Catch::rngSeed());
}

}  // namespace

TEST_CASE("a killed writer loses nothing acknowledged", "[failure][logbook]") {
  auto random = random_numbers();
  check({killed_writers(extent(), random)});
}

TEST_CASE("a power cut loses nothing acknowledged, and a lying disk is seen to lose", "[failure][logbook]") {
  auto random = random_numbers();
  check(power_cuts(extent(), random));
}

TEST_CASE("a full disk is named, loses nothing, and the log goes on with space", "[failure][logbook]") {
  check(full_disks(extent()));
}

TEST_CASE("what others do around the log is named and loses nothing", "[failure][logbook]") {
  check(surroundings());
}

TEST_CASE("processes that write at once get one chain", "[failure][logbook]") {
  check(writers_at_once(extent()));
}

TEST_CASE("a damaged page is said or harmless, and the rest stays readable", "[failure][logbook]") {
  auto random = random_numbers();
  check(damaged_pages(extent(), random));
}
