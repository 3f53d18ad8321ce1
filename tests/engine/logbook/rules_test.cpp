#include "support.hpp"

using namespace bathwright;
using namespace bathwright::logbook;

namespace {

NewEntry with(std::string NewEntry::*field, std::string text, NewEntry entry = note()) {
  entry.*field = std::move(text);
  return entry;
}

NewEntry of_tank(const std::string& tank, NewEntry entry) {
  return with(&NewEntry::tank, tank, std::move(entry));
}

}  // namespace

TEST_CASE("entries that may not be logged are refused with the reason and leave no trace",
          "[failure][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  auto log = must(Logbook::open(folder / "shop.log", OpenMode::create, clock));
  must(log.append(note()));

  NewEntry note_that_corrects = note();
  note_that_corrects.about = 1;
  NewEntry correction_of_nothing = correction(1);
  correction_of_nothing.about.reset();

  struct Row {
    NewEntry entry;
    const char *where, *what;
  };
  const std::vector<Row> rows{
      {with(&NewEntry::tank, ""), "tank", "empty"},
      {with(&NewEntry::by, ""), "by", "empty"},
      {with(&NewEntry::tank, std::string(201, 'x')), "tank", "201 bytes"},
      {with(&NewEntry::shift, "night\n"), "shift", "control character U+000A at byte 5"},
      {with(&NewEntry::by, std::string("a\0b", 3)), "by", "control character U+0000 at byte 1"},
      {with(&NewEntry::by, "\x7F"), "by", "control character U+007F at byte 0"},
      {with(&NewEntry::by, "\xC2\x85"), "by", "control character U+0085 at byte 0"},
      {with(&NewEntry::by, "ab\xFF"), "by", "byte 2 is not UTF-8"},
      {with(&NewEntry::by, "\xC0\xAF"), "by", "byte 0 is not UTF-8"},          // overlong '/'
      {with(&NewEntry::by, "\xE0\x80\xAF"), "by", "byte 0 is not UTF-8"},      // overlong, three bytes
      {with(&NewEntry::by, "\xED\xA0\x80"), "by", "byte 0 is not UTF-8"},      // surrogate
      {with(&NewEntry::by, "\xF4\x90\x80\x80"), "by", "byte 0 is not UTF-8"},  // above U+10FFFF
      {with(&NewEntry::by, "\xE2\x82"), "by", "byte 0 is not UTF-8"},          // cut short
      {with(&NewEntry::bath_type, "\xFF"), "bath_type", "byte 0 is not UTF-8"},
      {with(&NewEntry::body, ""), "body", "not valid JSON"},
      {with(&NewEntry::body, "{\"Ah\":}"), "body", "not valid JSON"},
      {with(&NewEntry::body, "\"\xFF\""), "body", "not valid JSON"},
      {with(&NewEntry::body, std::string("{}\0x", 4)), "body", "not valid JSON"},
      {with(&NewEntry::body, '"' + std::string((1 << 20) - 1, 'x') + '"'), "body", "1048577 bytes"},
      {note_that_corrects, "about", "entry 1 named by an entry of kind note"},
      {correction_of_nothing, "about", "a correction that names no entry"},
      {correction(2), "about", "there is no entry 2"},
      {of_tank("zinc-2", correction(1)), "about", "entry 1 is of tank nickel-1"},
      {with(&NewEntry::body, "{}", correction(1)), "body", "a correction without a reason"},
      {with(&NewEntry::body, "[\"reason\"]", correction(1)), "body", "a correction without a reason"},
      {with(&NewEntry::body, "{\"reason\":\"\"}", correction(1)), "body", "a correction without a reason"},
  };
  for (const Row& row : rows) {
    const auto refused = log.append(row.entry);
    INFO(row.where << ": " << row.what);
    REQUIRE_FALSE(refused);
    REQUIRE(refused.problems().size() == 1);
    CHECK(refused.problems()[0].where == row.where);
    CHECK(refused.problems()[0].what == row.what);
    CHECK(refused.problems()[0].kind == Fault::bad_input);
  }
  CHECK(must(log.list()).size() == 1);
  CHECK(must(log.append(correction(1))).seq == 2);
}

TEST_CASE("the limits themselves may be logged", "[unit][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  auto log = must(Logbook::open(folder / "shop.log", OpenMode::create, clock));
  const std::string widest = "\xF4\x8F\xBF\xBF";  // U+10FFFF
  CHECK(must(log.append(with(&NewEntry::by, widest))).by == widest);
  CHECK(must(log.append(with(&NewEntry::tank, std::string(200, 'x')))).tank.size() == 200);
  CHECK(must(log.append(with(&NewEntry::body, '"' + std::string((1 << 20) - 2, 'x') + '"'))).body.size() ==
        1 << 20);
  CHECK(must(log.append(with(&NewEntry::shift, ""))).shift.empty());
  CHECK(log.verify().ok);
}

TEST_CASE("all that is wrong with an entry is said at once", "[failure][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  auto log = must(Logbook::open(folder / "shop.log", OpenMode::create, clock));
  const auto refused = log.append({.kind = EntryKind::correction, .shift = "\t", .body = "{"});
  REQUIRE_FALSE(refused);
  std::vector<std::string> where;
  for (const Problem& problem : refused.problems()) where.push_back(problem.where);
  CHECK(where == std::vector<std::string>{"tank", "shift", "by", "body", "about"});
}

TEST_CASE("a station needs a name", "[failure][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  const auto opened = Logbook::open(folder / "shop.log", OpenMode::create, clock, {.station = ""});
  REQUIRE_FALSE(opened);
  CHECK(opened.problems()[0].where == "station");
  CHECK(std::filesystem::is_empty(folder.path()));
}
