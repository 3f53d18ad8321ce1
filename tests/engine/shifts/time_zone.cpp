#include <bathwright/shifts/time_zone.hpp>

#include <catch2/catch.hpp>
#include <chrono>
#include <cstdio>
#include <regex>
#include <string>
#include <vector>

#include "moments.hpp"

using namespace bathwright::shifts;
using std::chrono::seconds;

namespace {

TimeZone zone_of(const char* name) {
  const auto zone = TimeZone::find(name);
  REQUIRE(zone);
  return *zone;
}

std::string output_of(const std::string& command) {
  std::string output;
  FILE* pipe = popen(command.c_str(), "r");
  if (!pipe) return output;
  char piece[4096];
  while (const std::size_t got = std::fread(piece, 1, sizeof piece, pipe)) output.append(piece, got);
  pclose(pipe);
  return output;
}

struct Change {
  const char* zone;
  const char* last_before;  ///< UTC, the last second before the clock is changed
  const char* shown_before;
  const char* shown_after;  ///< one second later
};

}  // namespace

// Directive 2000/84/EC, articles 2 and 3: summer time from the last Sunday in March to the last Sunday in
// October, 1 a.m. GMT. Energy Policy Act of 2005 (US), section 110: second Sunday of March to first Sunday of
// November, at 2 a.m. local. Standard Time Act 1987 (New South Wales), Lord Howe Island: half an hour, first
// Sunday in October to first Sunday in April, at 2 a.m. local. Worked out by hand: the Sundays are 29 March,
// 25 October; 8 March, 1 November; 5 April, 4 October 2026.
TEST_CASE("clocks change when the law says", "[reference][shifts]") {
  const Change change = GENERATE(values<Change>({
      {"Europe/Berlin", "2026-03-29 00:59:59", "2026-03-29 01:59 +01:00", "2026-03-29 03:00 +02:00"},
      {"Europe/Berlin", "2026-10-25 00:59:59", "2026-10-25 02:59 +02:00", "2026-10-25 02:00 +01:00"},
      {"America/Chicago", "2026-03-08 07:59:59", "2026-03-08 01:59 -06:00", "2026-03-08 03:00 -05:00"},
      {"America/Chicago", "2026-11-01 06:59:59", "2026-11-01 01:59 -05:00", "2026-11-01 01:00 -06:00"},
      {"Australia/Lord_Howe", "2026-04-04 14:59:59", "2026-04-05 01:59 +11:00", "2026-04-05 01:30 +10:30"},
      {"Australia/Lord_Howe", "2026-10-03 15:29:59", "2026-10-04 01:59 +10:30", "2026-10-04 02:30 +11:00"},
      {"Asia/Kolkata", "2026-03-29 00:59:59", "2026-03-29 06:29 +05:30", "2026-03-29 06:30 +05:30"},
  }));
  INFO(change.zone << " " << change.last_before);
  const TimeZone zone = zone_of(change.zone);
  CHECK(zone.local_text_with_offset(utc(change.last_before)) == change.shown_before);
  CHECK(zone.local_text_with_offset(utc(change.last_before) + seconds(1)) == change.shown_after);
}

// Outside check: zdump, of the system's C library (Debian package libc-bin), which reads tzdata with code of
// its own. It prints the second before and the second of each change, with the offset.
TEST_CASE("offsets are those zdump prints", "[reference][shifts]") {
  const std::string zone_name =
      GENERATE("Europe/Berlin", "Europe/London", "Europe/Istanbul", "Europe/Moscow", "America/Chicago",
               "America/Phoenix", "America/Sao_Paulo", "America/St_Johns", "Africa/Casablanca", "Asia/Tehran",
               "Asia/Shanghai", "Australia/Lord_Howe", "Australia/Sydney", "Pacific/Apia", "Pacific/Chatham",
               "America/Havana");
  const TimeZone zone = zone_of(zone_name.c_str());
  const std::string dump = output_of("zdump -V -c 1960,2037 " + zone_name);
  const std::regex line(R"(\w+ (\w{3}) +(\d+) ([\d:]+) (\d{4}) UT = .* gmtoff=(-?\d+)\n)");
  const std::string months = "JanFebMarAprMayJunJulAugSepOctNovDec";
  int lines = 0;
  for (std::sregex_iterator found(dump.begin(), dump.end(), line), end; found != end; ++found, ++lines) {
    const auto& part = *found;
    const std::string month = std::to_string(months.find(part[1].str()) / 3 + 1);
    const std::string moment = part[4].str() + "-" + month + "-" + part[2].str() + " " + part[3].str();
    INFO(zone_name << " " << moment << " UTC");
    CHECK(zone.offset(utc(moment)).count() == std::stol(part[5].str()));
  }
  INFO("zdump (Debian package libc-bin) printed:\n" << dump);
  CHECK(lines >= 4);
}

TEST_CASE("a time on the wall that comes never, once or twice is told apart", "[unit][shifts]") {
  const TimeZone berlin = zone_of("Europe/Berlin");
  const Occurrence noon = berlin.occurrence(wall("2026-03-02 12:00"));
  CHECK(noon.kind == Occurrence::once);
  CHECK(noon.first == utc("2026-03-02 11:00"));
  CHECK(noon.last == noon.first);

  const Occurrence skipped = berlin.occurrence(wall("2026-03-29 02:30"));
  CHECK(skipped.kind == Occurrence::skipped);
  CHECK(skipped.first == utc("2026-03-29 01:00"));
  CHECK(skipped.last == skipped.first);

  const Occurrence repeated = berlin.occurrence(wall("2026-10-25 02:30"));
  CHECK(repeated.kind == Occurrence::repeated);
  CHECK(repeated.first == utc("2026-10-25 00:30"));
  CHECK(repeated.last == utc("2026-10-25 01:30"));
}

TEST_CASE("every moment comes back from the clock on the wall", "[property][shifts]") {
  for (const char* name : {"Europe/Berlin", "America/Chicago", "Australia/Lord_Howe", "Asia/Kolkata"}) {
    const TimeZone zone = zone_of(name);
    for (UtcTime t = utc("2026-01-01 00:00"); t < utc("2027-01-01 00:00");
         t += std::chrono::milliseconds(997'003)) {
      const Occurrence back = zone.occurrence(zone.local(t));
      if (back.kind != Occurrence::skipped && (back.first == t || back.last == t)) continue;
      FAIL(name << " " << zone.local_text_with_offset(t));
    }
  }
}

TEST_CASE("an unknown zone is answered with the nearest", "[failure][shifts]") {
  const auto told = [](const char* name) {
    const auto zone = TimeZone::find(name, "zone");
    REQUIRE_FALSE(zone);
    return zone.problems().front().text();
  };
  CHECK(told("europe/berlin") ==
        "zone: the time zone 'europe/berlin' is not known; expected an IANA name, such as Europe/Berlin or "
        "America/Chicago. Did you mean Europe/Berlin?");
  CHECK(told("America/Chikago").find("Did you mean America/Chicago?") != std::string::npos);
  CHECK(told("").find("no time zone") != std::string::npos);
  CHECK(told("../../etc/passwd").find("is not known") != std::string::npos);
  CHECK(told("localtime").find("is not known") != std::string::npos);  // another zone on another machine
}
