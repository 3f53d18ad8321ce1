// Whatever is done to the file behind the log's back must be refused by its triggers or found by verify.
#include <fmt/format.h>

#include <algorithm>
#include <fstream>
#include <random>

#include "support.hpp"

using namespace bathwright;
using namespace bathwright::logbook;

namespace {

constexpr const char* drop_guards =
    "PRAGMA foreign_keys = OFF; DROP TRIGGER entry_no_update; DROP TRIGGER entry_no_delete;"
    "DROP TRIGGER entry_no_replace; DROP TRIGGER entry_in_order;";

/// Six entries; the third is a correction, so that none of its columns is empty.
void fill(const std::filesystem::path& path, const std::string& fourth = "fourth") {
  const HeldClock clock;
  auto log = must(Logbook::open(path, OpenMode::create, clock));
  must(log.append(note("first")));
  must(log.append(note("second")));
  must(log.append(correction(1)));
  must(log.append(note(fourth)));
  must(log.append(note("fifth")));
  must(log.append(note("sixth")));
}

using Found = std::vector<std::pair<FindingKind, std::int64_t>>;

/// What verify finds apart from the missing guards.
Found found_in_entries(const Logbook& log) {
  Found found;
  for (const Finding& finding : log.verify().problems)
    if (finding.kind != FindingKind::guard) found.emplace_back(finding.kind, finding.seq);
  return found;
}

}  // namespace

namespace Catch {
template <>
struct StringMaker<std::pair<FindingKind, std::int64_t>> {
  static std::string convert(const std::pair<FindingKind, std::int64_t>& found) {
    return fmt::format("(kind {}, seq {})", static_cast<int>(found.first), found.second);
  }
};
}  // namespace Catch

TEST_CASE("triggers refuse every change of a logged entry", "[failure][logbook]") {
  const TempFolder folder;
  fill(folder / "shop.log");
  RawDatabase raw(folder / "shop.log");
  const std::string insert_like =
      "INTO entry (seq, kind, tank, shift, at, station, \"by\", body, about, program, previous, hash) "
      "SELECT {}, kind, tank, shift, at, station, \"by\", body, about, program, previous, {} "
      "FROM entry WHERE seq = 2";
  for (const std::string& sql : std::vector<std::string>{
           "UPDATE entry SET body = '{}' WHERE seq = 2",
           "UPDATE OR REPLACE entry SET seq = 3 WHERE seq = 2",
           "DELETE FROM entry WHERE seq = 6",
           "DELETE FROM entry",
           "REPLACE " + fmt::format(fmt::runtime(insert_like), 2, "'new'"),
           "REPLACE " + fmt::format(fmt::runtime(insert_like), 7, "hash"),
           "INSERT " + fmt::format(fmt::runtime(insert_like), 8, "'gap'"),
           "INSERT " + fmt::format(fmt::runtime(insert_like), "NULL", "'unnumbered'"),
           "INSERT " + fmt::format(fmt::runtime(insert_like), 2, "'new'") +
               " ON CONFLICT DO UPDATE SET body = '{}'",
       }) {
    INFO(sql);
    CHECK(raw.attempt(sql) == SQLITE_CONSTRAINT_TRIGGER);
  }
  const HeldClock clock;
  const Verification report = must(Logbook::open(folder / "shop.log", OpenMode::read_only, clock)).verify();
  CHECK(report.ok);
  CHECK(report.entries == 6);
}

TEST_CASE("a single flipped bit in any column of any entry is found at that entry", "[property][logbook]") {
  const TempFolder folder;
  const HeldClock clock;
  {
    auto log = must(Logbook::open(folder / "shop.log", OpenMode::create, clock,
                                  {.program = "bathwright 0.1.0", .pin_cost = cheap}));
    must(log.append(note("before there were people")));
    const Credential chemist{"A. Chemist", "271828"}, hand{"O. Hand", "314159"};
    must(log.admit(chemist.name, Role::chemist, chemist.pin));
    must(log.admit(hand.name, Role::operator_, hand.pin, {chemist, {}}));
    NewEntry entry = correction(1);
    entry.by = hand.name;
    entry.happened = clock.now;
    entry.bath_type = "watts-nickel 1.0.0";
    must(log.append(entry, {hand, chemist}));
    CHECK_FALSE(log.append(entry, {Credential{hand.name, "000000"}, {}}));  // logged as a failed PIN
  }
  const auto log = must(Logbook::open(folder / "shop.log", OpenMode::read_only, clock));
  REQUIRE(log.verify().ok);
  const std::int64_t last = must(log.head())->seq;
  REQUIRE(last == 5);
  RawDatabase raw(folder / "shop.log");
  raw.execute(std::string(drop_guards) + "PRAGMA ignore_check_constraints = ON; PRAGMA synchronous = OFF");

  const auto found_at = [&](std::int64_t seq) {
    const Found found = found_in_entries(log);
    return std::ranges::any_of(found, [&](const auto& one) { return one.second == seq; });
  };
  const auto store = [&](std::int64_t seq, const std::string& column, const std::string& bytes) {
    std::string digits;
    for (const char c : bytes) digits += fmt::format("{:02X}", static_cast<unsigned char>(c));
    raw.execute(fmt::format("UPDATE entry SET {} = CAST(x'{}' AS TEXT) WHERE seq = {}", column, digits, seq));
  };
  for (std::int64_t seq = 1; seq <= last; ++seq) {
    const Entry whole = must(log.find(seq));
    const std::vector<std::pair<std::string, std::string>> texts{
        {"kind", std::string(name(whole.kind))},
        {"tank", whole.tank},
        {"shift", whole.shift},
        {"at", whole.at},
        {"happened", whole.happened},
        {"boot", whole.uptime.boot},
        {"station", whole.station},
        {"\"by\"", whole.by},
        {"role", whole.role},
        {"witness", whole.witness},
        {"body", whole.body},
        {"program", whole.program},
        {"bath_type", whole.bath_type},
        {"previous", whole.previous},
        {"signature", whole.signature},
        {"witness_signature", whole.witness_signature},
        {"hash", whole.hash}};
    for (const auto& [column, text] : texts) {
      if (text.empty()) {
        INFO("entry " << seq << ", something put into the empty " << column);
        store(seq, column, "x");
        CHECK(found_at(seq));
      } else {
        for (const std::size_t position : {std::size_t{0}, text.size() - 1})
          for (int bit = 0; bit < 8; ++bit) {
            INFO("entry " << seq << ", " << column << " byte " << position << " bit " << bit);
            std::string flipped = text;
            flipped[position] = static_cast<char>(flipped[position] ^ (1 << bit));
            store(seq, column, flipped);
            CHECK(found_at(seq));
          }
      }
      store(seq, column, text);
    }
    const std::vector<std::pair<std::string, std::optional<std::int64_t>>> numbers{
        {"form", whole.form}, {"uptime_ms", whole.uptime.since.count()}, {"about", whole.about}};
    for (const auto& [column, number] : numbers) {
      for (int bit = 0; bit < 63; ++bit) {
        INFO("entry " << seq << ", " << column << " bit " << bit);
        raw.execute(fmt::format("UPDATE entry SET {} = {} WHERE seq = {}", column,
                                number.value_or(0) ^ (std::int64_t{1} << bit), seq));
        CHECK(found_at(seq));
      }
      raw.execute(fmt::format("UPDATE entry SET {} = {} WHERE seq = {}", column,
                              number ? std::to_string(*number) : "NULL", seq));
    }
    for (int bit = 3; bit < 63; ++bit) {  // lower bits lead to numbers that are taken
      const std::int64_t flipped = seq ^ (std::int64_t{1} << bit);
      INFO("entry " << seq << " numbered " << flipped);
      raw.execute(fmt::format("UPDATE entry SET seq = {} WHERE seq = {}", flipped, seq));
      CHECK(found_at(flipped));
      raw.execute(fmt::format("UPDATE entry SET seq = {} WHERE seq = {}", seq, flipped));
    }
  }
  CHECK(found_in_entries(log).empty());
}

TEST_CASE("removed, moved and added entries are found", "[failure][logbook]") {
  constexpr auto changed = FindingKind::changed, gap = FindingKind::gap, reordered = FindingKind::reordered,
                 link = FindingKind::link;
  const std::string forge =
      "INSERT INTO entry (seq, kind, tank, shift, at, station, \"by\", body, about, program, form, latest_at, previous, hash) ";
  const std::string forged = "kind, tank, shift, at, station, \"by\", '{}', NULL, program, form, latest_at, ";
  struct Row {
    const char* what;
    std::string sql;
    Found expected;
  };
  const std::vector<Row> rows{
      {"nothing done", "", {}},
      {"a middle entry removed", "DELETE FROM entry WHERE seq = 4", {{gap, 5}}},
      {"two middle entries removed", "DELETE FROM entry WHERE seq IN (4, 5)", {{gap, 6}}},
      {"the first entry removed", "DELETE FROM entry WHERE seq = 1", {{gap, 2}}},
      {"the last entry removed: not to be seen without a noted head", "DELETE FROM entry WHERE seq = 6", {}},
      {"a middle entry removed and the rest moved up",
       "DELETE FROM entry WHERE seq = 4; UPDATE entry SET seq = seq - 1 WHERE seq > 4",
       {{changed, 4}, {link, 4}, {changed, 5}}},
      {"two neighbours swapped",
       "UPDATE entry SET seq = 99 WHERE seq = 4; UPDATE entry SET seq = 4 WHERE seq = 5;"
       "UPDATE entry SET seq = 5 WHERE seq = 99",
       {{changed, 4}, {reordered, 4}, {changed, 5}, {reordered, 5}, {reordered, 6}}},
      {"an entry put in the middle",
       "UPDATE entry SET seq = 7 WHERE seq = 6; UPDATE entry SET seq = 6 WHERE seq = 5;" + forge +
           "SELECT 5, " + forged + "hash, 'forged' FROM entry WHERE seq = 4",
       {{changed, 5}, {changed, 6}, {reordered, 6}, {changed, 7}}},
      {"an entry put at the end",
       forge + "SELECT 7, " + forged + "hash, 'forged' FROM entry WHERE seq = 6",
       {{changed, 7}}},
      {"an entry numbered below 1",
       "PRAGMA ignore_check_constraints = ON; " + forge + "SELECT -5, " + forged +
           "previous, 'forged' FROM entry WHERE seq = 1",
       {{reordered, -5}, {changed, -5}, {FindingKind::unreadable, 0}}},
      {"a kind that does not exist", "UPDATE entry SET kind = 'gossip' WHERE seq = 4", {{changed, 4}}},
  };
  const HeldClock clock;
  for (const Row& row : rows) {
    INFO(row.what);
    const TempFolder folder;
    fill(folder / "shop.log");
    RawDatabase raw(folder / "shop.log");
    raw.execute(drop_guards + row.sql);
    CHECK(found_in_entries(must(Logbook::open(folder / "shop.log", OpenMode::read_only, clock))) ==
          row.expected);
  }
}

TEST_CASE("an entry replaced together with its hash breaks the link behind it", "[failure][logbook]") {
  const TempFolder folder;
  fill(folder / "shop.log");
  fill(folder / "forged.log", "nothing happened");
  const HeldClock clock;
  const Entry forged = must(must(Logbook::open(folder / "forged.log", OpenMode::read_only, clock)).find(4));
  RawDatabase raw(folder / "shop.log");
  raw.execute(drop_guards + fmt::format("UPDATE entry SET body = '{}', hash = '{}' WHERE seq = 4",
                                        forged.body, forged.hash));
  CHECK(found_in_entries(must(Logbook::open(folder / "shop.log", OpenMode::read_only, clock))) ==
        Found{{FindingKind::link, 5}});
}

TEST_CASE("an end that was cut off shows against a noted head", "[failure][logbook]") {
  const TempFolder folder;
  fill(folder / "shop.log");
  const HeldClock clock;
  const auto log = must(Logbook::open(folder / "shop.log", OpenMode::read_only, clock));
  const Anchor noted = must(log.head()).value();
  CHECK(noted == Anchor{6, must(log.find(6)).hash});
  CHECK(log.verify({noted}).ok);
  RawDatabase(folder / "shop.log").execute(std::string(drop_guards) + "DELETE FROM entry WHERE seq = 6");
  CHECK(found_in_entries(log).empty());
  const auto cut = [&](const Anchor& anchor) {
    const auto problems = log.verify({anchor}).problems;
    return std::ranges::count(problems, FindingKind::cut, &Finding::kind);
  };
  CHECK(cut(noted) == 1);
  CHECK(cut({0, noted.hash}) == 1);
  CHECK(cut({3, must(log.find(3)).hash}) == 0);
  CHECK(cut({4, must(log.find(3)).hash}) == 1);  // noted of another entry
}

TEST_CASE("missing and altered guards are reported", "[failure][logbook]") {
  const std::vector<std::pair<std::string, std::vector<std::string>>> rows{
      {"DROP TRIGGER entry_no_update", {"the trigger entry_no_update is missing"}},
      {"DROP INDEX entry_by_tank", {"the index entry_by_tank is missing"}},
      {"DROP TRIGGER entry_no_delete; CREATE TRIGGER entry_no_delete BEFORE DELETE ON entry BEGIN SELECT 1; "
       "END",
       {"the trigger entry_no_delete was altered"}},
      {"CREATE TABLE scratch (x)", {"the table scratch does not belong to a logbook"}},
  };
  const HeldClock clock;
  for (const auto& [sql, expected] : rows) {
    INFO(sql);
    const TempFolder folder;
    fill(folder / "shop.log");
    RawDatabase(folder / "shop.log").execute(sql);
    const Verification report = must(Logbook::open(folder / "shop.log", OpenMode::read_only, clock)).verify();
    std::vector<std::string> words;
    for (const Finding& finding : report.problems) words.push_back(finding.words);
    CHECK(words == expected);
    CHECK_FALSE(report.ok);
  }
}

TEST_CASE("a bit flipped anywhere in the file is found or changes no entry", "[property][failure][logbook]") {
  INFO("seed " << Catch::rngSeed());
  std::mt19937 random(Catch::rngSeed());
  const TempFolder folder;
  const HeldClock clock;
  fill(folder / "shop.log");
  const auto whole = must(must(Logbook::open(folder / "shop.log", OpenMode::read_only, clock)).list());
  const auto size = std::filesystem::file_size(folder / "shop.log");

  int found = 0;
  for (int run = 0; run < 400; ++run) {
    std::filesystem::copy_file(folder / "shop.log", folder / "flipped.log",
                               std::filesystem::copy_options::overwrite_existing);
    const auto position = static_cast<std::streamoff>(random() % size);
    const int bit = static_cast<int>(random() % 8);
    INFO("byte " << position << " bit " << bit);
    {
      std::fstream file(folder / "flipped.log", std::ios::in | std::ios::out | std::ios::binary);
      file.seekg(position);
      const int byte = file.get();
      file.seekp(position);
      file.put(static_cast<char>(byte ^ (1 << bit)));
    }
    const auto log = Logbook::open(folder / "flipped.log", OpenMode::read_only, clock);
    if (log && log->verify().ok)
      CHECK(must(log->list()) == whole);
    else
      ++found;
  }
  CHECK(found > 0);
}
