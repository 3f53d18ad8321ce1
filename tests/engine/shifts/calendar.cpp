#include <bathwright/shifts/calendar.hpp>

#include <catch2/catch.hpp>
#include <chrono>

#include "moments.hpp"

using namespace bathwright::shifts;
using std::chrono::hours;
using std::chrono::minutes;

namespace {

Calendar ready_made_calendar(const char* pattern, const char* zone) {
  return calendar_of(*ready_made(pattern, zone));
}

ShiftSpan at(const Calendar& calendar, const char* moment) {
  const auto span = calendar.shift_at(utc(moment));
  INFO(moment << " UTC belongs to no shift");
  REQUIRE(span);
  return *span;
}

}  // namespace

TEST_CASE("a night shift keeps the date it started on", "[unit][shifts]") {
  const Calendar calendar = ready_made_calendar("3x8", "Europe/Berlin");
  const ShiftSpan night{"night", utc("2026-03-02 21:00"), utc("2026-03-03 05:00"), "2026-03-02 night"};
  CHECK(at(calendar, "2026-03-02 21:00") == night);
  CHECK(at(calendar, "2026-03-02 23:30") == night);
  CHECK(calendar.shift_at(utc("2026-03-03 05:00") - std::chrono::milliseconds(1)) == night);
  CHECK(at(calendar, "2026-03-03 05:00").label == "2026-03-03 early");
  CHECK(calendar.zone().local_text(night.from) == "2026-03-02 22:00");
  CHECK(calendar.next_shift(night.from).label == "2026-03-03 early");
  CHECK(calendar.next_shift(night.from - std::chrono::milliseconds(1)) == night);
}

TEST_CASE("a shift during which the clock is changed is longer or shorter", "[unit][shifts]") {
  const Calendar berlin = ready_made_calendar("3x8", "Europe/Berlin");
  const ShiftSpan spring = at(berlin, "2026-03-29 00:30"), autumn = at(berlin, "2026-10-25 00:30");
  CHECK(spring.label == "2026-03-28 night");
  CHECK(spring.to - spring.from == hours(7));
  CHECK(autumn.label == "2026-10-24 night");
  CHECK(autumn.to - autumn.from == hours(9));
  CHECK(at(berlin, "2026-10-25 01:30") == autumn);  // the second time the clock shows 02:30

  const Calendar chicago = ready_made_calendar("2x12", "America/Chicago");
  const ShiftSpan march = at(chicago, "2026-03-08 08:00"), november = at(chicago, "2026-11-01 07:00");
  CHECK(march.label == "2026-03-07 night");
  CHECK(march.to - march.from == hours(11));
  CHECK(november.to - november.from == hours(13));

  const Calendar lord_howe = ready_made_calendar("3x8", "Australia/Lord_Howe");
  const ShiftSpan april = at(lord_howe, "2026-04-04 15:00"), october = at(lord_howe, "2026-10-03 15:30");
  CHECK(april.to - april.from == minutes(8 * 60 + 30));
  CHECK(october.to - october.from == minutes(7 * 60 + 30));

  const Calendar kolkata = ready_made_calendar("3x8", "Asia/Kolkata");
  for (const ShiftSpan& span : kolkata.shifts_between(utc("2026-01-01 00:00"), utc("2027-01-01 00:00")))
    REQUIRE(span.to - span.from == hours(8));
}

TEST_CASE("a start that the clock skips is at the change, one that comes twice at the first",
          "[unit][shifts]") {
  const Calendar calendar = calendar_of({"Europe/Berlin", {{"a", "02:30"}, {"b", "14:30"}}});
  const ShiftSpan spring = at(calendar, "2026-03-29 01:00"), autumn = at(calendar, "2026-10-25 00:30");
  CHECK(spring.label == "2026-03-29 a");
  CHECK(spring.from == utc("2026-03-29 01:00"));  // 03:00 on the wall
  CHECK(autumn.label == "2026-10-25 a");
  CHECK(autumn.from == utc("2026-10-25 00:30"));
  CHECK(at(calendar, "2026-10-25 01:29") == autumn);
}

TEST_CASE("a shift that lies wholly in what the clock skips does not take place", "[unit][shifts]") {
  const Calendar calendar =
      calendar_of({"Europe/Berlin", {{"a", "02:10"}, {"short", "02:20", "02:50"}, {"b", "02:50"}}});
  const auto spans = calendar.shifts_between(utc("2026-03-29 00:00"), utc("2026-03-29 02:00"));
  REQUIRE(spans.size() == 2);
  CHECK(spans[0].label == "2026-03-28 b");
  CHECK(spans[1].label == "2026-03-29 b");
}

// Samoa left out 30 December 2011 (International Date Line Act 2011).
TEST_CASE("a day that is left out is left out", "[unit][shifts]") {
  const Calendar calendar = ready_made_calendar("3x8", "Pacific/Apia");
  const auto spans = calendar.shifts_between(utc("2011-12-30 00:00"), utc("2011-12-31 00:00"));
  REQUIRE(spans.size() == 4);
  for (std::size_t i = 1; i < spans.size(); ++i) CHECK(spans[i].from == spans[i - 1].to);
  CHECK(spans.front().label == "2011-12-29 late");
  CHECK(spans.back().label == "2011-12-31 early");
}

TEST_CASE("shifts may leave gaps, and have their days", "[unit][shifts]") {
  const std::vector<std::string> weekdays = {"Mon", "Tue", "Wed", "Thu", "Fri"};
  const Calendar calendar = calendar_of(
      {"America/Chicago", {{"day", "07:00", "15:30", weekdays}, {"saturday", "08:00", "12:00", {"Sat"}}}});
  // Friday 2026-03-06; Chicago is UTC-6 until 8 March.
  CHECK(at(calendar, "2026-03-06 21:29").label == "2026-03-06 day");
  CHECK_FALSE(calendar.shift_at(utc("2026-03-06 21:30")));
  CHECK(calendar.next_shift(utc("2026-03-06 21:30")).label == "2026-03-07 saturday");
  const ShiftSpan monday = calendar.next_shift(utc("2026-03-07 18:00"));
  CHECK(monday.label == "2026-03-09 day");
  CHECK(monday.from == utc("2026-03-09 12:00"));
  CHECK(calendar.shifts_between(utc("2026-03-02 00:00"), utc("2026-03-16 00:00")).size() == 12);

  const Calendar weekly = calendar_of({"UTC", {{"audit", "08:00", "09:00", {"Wed"}}}});
  CHECK(weekly.next_shift(utc("2026-03-04 08:00")).label == "2026-03-11 audit");
}

TEST_CASE("every minute of two years belongs to one shift of a gapless pattern", "[property][shifts]") {
  struct Row {
    const char* zone;
    std::vector<Shift> shifts;
  };
  const Row row = GENERATE(values<Row>({
      {"Europe/Berlin", {{"early", "06:00"}, {"late", "14:00"}, {"night", "22:00"}}},
      {"America/Chicago", {{"day", "06:00", "18:00"}, {"night", "18:00", "06:00"}}},
      {"Australia/Lord_Howe", {{"a", "01:45"}, {"b", "02:10"}, {"c", "13:00"}}},
      {"America/Havana", {{"a", "00:30"}, {"b", "23:40"}}},  // midnight is skipped and repeated
      {"Asia/Kolkata", {{"all", "00:00", "00:00"}}},
      {"Europe/Berlin",
       {{"week", "06:00", "06:00", {"Mon", "Tue", "Wed", "Thu", "Fri"}},
        {"saturday", "06:00", "02:30", {"Sat"}},
        {"sunday", "02:30", "06:00", {"Sun"}},
        {"late sunday", "06:00", "06:00", {"Sun"}}}},
  }));
  INFO(row.zone);
  const Calendar calendar = calendar_of({row.zone, row.shifts});
  const UtcTime from = utc("2025-07-01 00:00"), to = utc("2027-07-01 00:00");
  const auto spans = calendar.shifts_between(from, to);
  REQUIRE(spans.front().from <= from);
  REQUIRE(spans.back().to >= to);
  for (std::size_t i = 1; i < spans.size(); ++i) {
    INFO(spans[i].label);
    REQUIRE(spans[i].from == spans[i - 1].to);
    REQUIRE(calendar.next_shift(spans[i - 1].from) == spans[i]);
  }
  std::size_t i = 0;
  for (UtcTime t = from; t < to; t += minutes(1)) {
    while (spans[i].to <= t) ++i;
    const auto found = calendar.shift_at(t);
    if (found == spans[i]) continue;  // REQUIRE a million times would take most of the time
    FAIL(calendar.zone().local_text_with_offset(t) << " is not in " << spans[i].label);
  }
}

TEST_CASE("a pattern that makes no sense is answered with everything that is wrong", "[failure][shifts]") {
  const auto told = [](const ShiftPattern& pattern) {
    const auto calendar = Calendar::of(pattern);
    REQUIRE_FALSE(calendar);
    return bathwright::text(calendar.problems());
  };
  CHECK(
      told({"Europe/Berlim",
            {{"day", "6:00", "25:00"}, {"day", "14:00", "", {"Mon", "Tus", "Mon"}}, {"", ""}}}) ==
      "zone: the time zone 'Europe/Berlim' is not known; expected an IANA name, such as Europe/Berlin or "
      "America/Chicago. Did you mean Europe/Berlin?\n"
      "shift 'day': starts: '6:00' is no time of day; expected hours and minutes from 00:00 to 23:59, two "
      "digits each\n"
      "shift 'day': ends: '25:00' is no time of day; expected hours and minutes from 00:00 to 23:59, two "
      "digits each\n"
      "shift 'day': name: two shifts have it; expected a name of its own for each\n"
      "shift 'day': days: 'Tus' is no day of the week; expected Mon, Tue, Wed, Thu, Fri, Sat, Sun. Did "
      "you mean Tue?\n"
      "shift 'day': days: Mon stands there twice. Remove one of them.\n"
      "shift number 3: name: is missing; expected a short name: night\n"
      "shift number 3: starts: is missing; expected hours and minutes from 00:00 to 23:59, two digits each\n");
  CHECK(told({"UTC", {}}).find("shifts: there is none; expected at least one shift") == 0);
  CHECK(
      told({"UTC", {{"day", "06:00", "14:30"}, {"late", "14:00", "22:00"}}}) ==
      "shift 'late': starts at 14:00 on Mon, while 'day' of 06:00 to 14:30 still runs; expected one shift at a "
      "time. Move an end or a start, or name the days of each.\n");
  CHECK(told({"UTC", {{"night", "22:00", "06:30", {"Sun"}}, {"early", "06:00", "14:00", {"Mon"}}}})
            .find("shift 'early': starts at 06:00 on Mon, while 'night'") == 0);
  CHECK(told({"UTC", {{"a", "06:00"}, {"b", "06:00"}}}).find("shift 'b': starts at 06:00") == 0);
  CHECK(
      told({"UTC", {{"day", "06:00", "", {"Mon", "Fri"}}}}) ==
      "shift 'day': ends: is not given, and after Mon the next shift starts 96 h later; expected an end, or a "
      "shift that follows within 24 h\n");
  CHECK(told({"UTC", {{std::string(101, 'n'), "06:00"}}}).find("is longer than 100 bytes") !=
        std::string::npos);
  CHECK(told({"UTC", {{"a\nb", "06:00"}}}).find("holds control characters") != std::string::npos);
}
