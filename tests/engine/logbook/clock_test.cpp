#include "support.hpp"

using namespace bathwright::logbook;

TEST_CASE("times are written in UTC with milliseconds", "[unit][logbook]") {
  using std::chrono::milliseconds;
  CHECK(iso_utc(UtcTime{}) == "1970-01-01T00:00:00.000Z");
  CHECK(iso_utc(UtcTime(milliseconds(-1))) == "1969-12-31T23:59:59.999Z");
  CHECK(iso_utc(utc(2024, 2, 29, 23, 59) + milliseconds(59'007)) == "2024-02-29T23:59:59.007Z");
}

TEST_CASE("a clock set back is logged as it stood and order stays by sequence", "[failure][logbook]") {
  const TempFolder folder;
  HeldClock clock;
  auto log = must(Logbook::open(folder / "shop.log", OpenMode::create, clock));
  must(log.append(note("before")));
  clock.now -= std::chrono::hours(1);
  const Entry second = must(log.append(note("after")));
  CHECK(second.seq == 2);
  CHECK(second.at == "2026-03-02T04:40:00.000Z");
  CHECK(must(log.list()).back() == second);

  const Verification report = log.verify();
  CHECK(report.ok);
  REQUIRE(report.clock_steps.size() == 1);
  CHECK(report.clock_steps[0].seq == 2);
  CHECK(report.clock_steps[0].words ==
        "entry 2 is dated 2026-03-02T04:40:00.000Z, before the 2026-03-02T05:40:00.000Z of entry 1");
}
