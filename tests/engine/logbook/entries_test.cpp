#include "support.hpp"

using namespace bathwright;
using namespace bathwright::logbook;

namespace {

/// Six entries, an hour apart, two tanks.
Logbook filled(const std::filesystem::path& path, HeldClock& clock) {
  auto log = must(Logbook::open(path, OpenMode::create, clock, {.station = "line-a"}));
  struct Row {
    EntryKind kind;
    const char *tank, *shift, *by, *body;
  };
  for (const Row& row :
       {Row{EntryKind::analysis, "nickel-1", "night", "M. Okafor", R"({"Ni^2+":"74 g/L"})"},
        Row{EntryKind::level, "zinc-2", "night", "M. Okafor", R"({"volume":"2340 L"})"},
        Row{EntryKind::note, "nickel-1", "day", "J. Lindqvist", R"({"text":"100% of anodes turned"})"},
        Row{EntryKind::analysis, "nickel-1", "day", "J. Lindqvist", R"({"Ni^2+":"71 g/L"})"},
        Row{EntryKind::note, "zinc-2", "day", "J. Lindqvist", R"({"text":"1000 parts"})"},
        Row{EntryKind::ampere_hours, "zinc-2", "late", "S. Brandt", R"({"Ah":1250})"}}) {
    must(log.append({row.kind, row.tank, row.shift, row.by, row.body}));
    clock.now += std::chrono::hours(1);
  }
  return log;
}

std::vector<std::int64_t> numbers(const std::vector<Entry>& entries) {
  std::vector<std::int64_t> seqs;
  for (const Entry& entry : entries) seqs.push_back(entry.seq);
  return seqs;
}

}  // namespace

TEST_CASE("an entry comes back as it was logged, also after the file was closed", "[unit][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  NewEntry entry = note(
      "Bad \xC3\xBC"
      "berpr\xC3\xBC"
      "ft");
  entry.kind = EntryKind::ampere_hours;
  Entry logged;
  {
    auto log = must(Logbook::open(folder / "shop.log", OpenMode::create, clock, {.station = "line-a"}));
    logged = must(log.append(entry));
  }
  CHECK(logged.seq == 1);
  CHECK(logged.kind == EntryKind::ampere_hours);
  CHECK(logged.tank == entry.tank);
  CHECK(logged.shift == entry.shift);
  CHECK(logged.at == "2026-03-02T05:40:00.000Z");
  CHECK(logged.station == "line-a");
  CHECK(logged.by == entry.by);
  CHECK(logged.body == entry.body);
  CHECK_FALSE(logged.about);
  CHECK(logged.previous == std::string(64, '0'));

  auto log = must(Logbook::open(folder / "shop.log", OpenMode::read_write, clock));
  CHECK(must(log.find(1)) == logged);
  const Entry next = must(log.append(correction(1)));
  CHECK(next.seq == 2);
  CHECK(next.previous == logged.hash);
  CHECK(next.about == 1);
  CHECK(must(log.find(2)) == next);
}

TEST_CASE("lists are filtered", "[unit][logbook]") {
  const TempFolder folder;
  HeldClock clock;
  const UtcTime start = clock.now;
  const auto log = filled(folder / "shop.log", clock);
  const auto after = [&](int hours) { return start + std::chrono::hours(hours); };

  struct Row {
    const char* what;
    Filter filter;
    std::vector<std::int64_t> expected;
  };
  const std::vector<Row> rows{
      {"everything", {}, {1, 2, 3, 4, 5, 6}},
      {"a tank", {.tank = "zinc-2"}, {2, 5, 6}},
      {"a kind", {.kind = EntryKind::analysis}, {1, 4}},
      {"from a time on", {.from = after(4)}, {5, 6}},
      {"up to a time, itself left out", {.to = after(2)}, {1, 2}},
      {"a text in the body", {.text = "anodes"}, {3}},
      {"a text in the name, in any case", {.text = "okaFOR"}, {1, 2}},
      {"a text in the shift", {.text = "late"}, {6}},
      {"a percent sign is no wildcard", {.text = "100%"}, {3}},
      {"an underline is no wildcard", {.text = "Ni_2"}, {}},
      {"an exclamation mark is no escape", {.text = "!"}, {}},
      {"behind an entry", {.after_seq = 4}, {5, 6}},
      {"newest first", {.newest_first = true}, {6, 5, 4, 3, 2, 1}},
      {"a page of the newest", {.after_seq = 5, .limit = 2, .newest_first = true}, {4, 3}},
      {"all at once", {.tank = "nickel-1", .kind = EntryKind::analysis, .from = after(1), .text = "71"}, {4}},
      {"a tank that is not there", {.tank = "x' OR 1 --"}, {}},
  };
  for (const Row& row : rows) {
    INFO(row.what);
    CHECK(numbers(must(log.list(row.filter))) == row.expected);
  }
}

TEST_CASE("find and latest", "[unit][logbook]") {
  const TempFolder folder;
  HeldClock clock;
  const auto log = filled(folder / "shop.log", clock);
  CHECK(must(log.find(3)).body == R"({"text":"100% of anodes turned"})");
  REQUIRE_FALSE(log.find(7));
  CHECK(log.find(7).problems()[0].what == "there is no entry 7");
  CHECK(must(log.latest("nickel-1", EntryKind::analysis))->seq == 4);
  CHECK_FALSE(must(log.latest("nickel-1", EntryKind::dump)));
}

TEST_CASE("kinds have names, and a mistyped one is answered with the nearest", "[unit][logbook]") {
  CHECK(entry_kind_names().size() == 15);
  for (const std::string& known : entry_kind_names()) CHECK(name(must(entry_kind(known))) == known);
  CHECK(name(EntryKind::ampere_hours) == "ampere-hours");
  CHECK(name(EntryKind::correction) == "correction");
  REQUIRE_FALSE(entry_kind("anlysis"));
  CHECK(entry_kind("anlysis").problems()[0].try_this == "did you mean \"analysis\"?");
}
