#include <bathwright/shifts/due.hpp>

#include <catch2/catch.hpp>

#include "moments.hpp"

using namespace bathwright::shifts;
using std::chrono::hours;

TEST_CASE("what is due counts from the last time", "[unit][shifts]") {
  const Schedule analysis{"N-07", "analysis of nickel", hours(24)};
  const UtcTime last = utc("2026-03-01 05:40");
  const Due early = due(analysis, last, utc("2026-03-02 05:40"));
  CHECK(early.at == utc("2026-03-02 05:40"));
  CHECK_FALSE(early.overdue);
  CHECK(due(analysis, last, utc("2026-03-02 05:41")).overdue);

  const Due never = due(analysis, {}, last);
  CHECK(never.overdue);
  CHECK(never.at == last);
  CHECK_FALSE(never.last);
}

TEST_CASE("what falls due before the next shift ends is listed, the earliest first", "[unit][shifts]") {
  const Calendar calendar = calendar_of(*ready_made("2x12", "UTC"));
  const UtcTime now = utc("2026-03-02 10:00");  // day shift to 18:00; the next ends on the 3rd at 06:00
  const UtcTime last = utc("2026-03-01 06:00");
  const auto one = [&](const char* what, int every_h) {
    return due({"N-07", what, hours(every_h)}, last, now);
  };
  const auto list = due_by_end_of_next_shift(
      {one("at its end", 48), one("in it", 47), one("overdue", 12), one("in this one", 30)}, calendar, now);
  REQUIRE(list.size() == 3);
  CHECK(list[0].what == "overdue");
  CHECK(list[1].what == "in this one");
  CHECK(list[2].what == "in it");
}
