#include "attacks.hpp"

#include <fmt/format.h>
#include <sqlite3.h>
#include <stdlib.h>

#include <algorithm>
#include <cstdio>
#include <cstdlib>
#include <filesystem>
#include <functional>

#include "bathwright/logbook/logbook.hpp"
#include "chain.hpp"

namespace log_attacks {
namespace {

using namespace bathwright;
using namespace bathwright::logbook;

const Credential chemist{"A. Chemist", "271828"}, hand{"O. Hand", "314159"};

template <class T>
T must(Result<T> result) {
  if (result) return *std::move(result);
  std::fputs(text(result.problems()).c_str(), stderr);
  std::abort();
}

class Database {
 public:
  explicit Database(const std::filesystem::path& file) { sqlite3_open(file.c_str(), &handle_); }
  ~Database() { sqlite3_close(handle_); }
  Database(const Database&) = delete;
  Database& operator=(const Database&) = delete;

  bool run(const std::string& sql) const {
    return sqlite3_exec(handle_, sql.c_str(), nullptr, nullptr, nullptr) == SQLITE_OK;
  }
  std::string problem() const { return sqlite3_errmsg(handle_); }

 private:
  sqlite3* handle_ = nullptr;
};

struct Victim {
  std::filesystem::path folder, file;
  bool has_people;
  SystemClock clock;

  explicit Victim(bool with_people) : has_people(with_people) {
    std::string pattern = (std::filesystem::temp_directory_path() / "log-attack-XXXXXX").string();
    if (!mkdtemp(pattern.data())) std::abort();
    folder = pattern;
    file = folder / "shop.log";
    auto log =
        must(Logbook::open(file, OpenMode::create, clock, {.pin_cost = {.memory_KiB = 8, .passes = 1}}));
    if (with_people) {
      must(log.admit(chemist.name, Role::chemist, chemist.pin));
      must(log.admit(hand.name, Role::operator_, hand.pin, {chemist, {}}));
    }
    for (const char* text : {"first", "second", "third", "fourth"})
      must(log.append(note(text), signatures()));
  }
  ~Victim() { std::filesystem::remove_all(folder); }
  Victim(const Victim&) = delete;
  Victim& operator=(const Victim&) = delete;

  NewEntry note(const std::string& text) const {
    NewEntry entry;
    entry.tank = "nickel-1";
    entry.by = hand.name;
    entry.body = "{\"note\":\"" + text + "\"}";
    return entry;
  }
  Signatures signatures() const { return has_people ? Signatures{hand, {}} : Signatures{}; }
  std::vector<Entry> entries() const {
    return must(must(Logbook::open(file, OpenMode::read_only, clock)).list());
  }
};

constexpr const char* drop_guards =
    "PRAGMA foreign_keys = OFF; DROP TRIGGER entry_no_update; DROP TRIGGER entry_no_delete;"
    "DROP TRIGGER entry_no_replace; DROP TRIGGER entry_in_order;";

/// Puts the guards back as the format has them, so that only what was done to entries can tell.
std::string restored_guards(const std::filesystem::path& file) {
  sqlite3* handle = nullptr;
  sqlite3_open(file.c_str(), &handle);
  std::string sql;
  sqlite3_exec(
      handle, "SELECT sql FROM sqlite_schema WHERE type = 'trigger'",
      [](void* all, int, char** cells, char**) {
        *static_cast<std::string*>(all) += std::string(cells[0]) + ";";
        return 0;
      },
      &sql, nullptr);
  sqlite3_close(handle);
  return sql;
}

std::string quoted(const std::string& text) {
  std::string all = "'";
  for (const char c : text) all += c == '\'' ? std::string("''") : std::string(1, c);
  return all + "'";
}

std::string with_body(std::int64_t seq, const std::string& body) {
  return fmt::format("UPDATE entry SET body = {} WHERE seq = {};", quoted(body), seq);
}

/// The SQL that gives entries from `from` on the hashes that their contents ask for now.
std::string rehashed(std::vector<Entry> entries, std::int64_t from) {
  std::string sql;
  for (std::size_t i = 0; i < entries.size(); ++i) {
    if (entries[i].seq < from) continue;
    if (i > 0) entries[i].previous = entries[i - 1].hash;
    entries[i].hash = chain_hash(entries[i]);
    sql += fmt::format("UPDATE entry SET previous = '{}', hash = '{}' WHERE seq = {};", entries[i].previous,
                       entries[i].hash, entries[i].seq);
  }
  return sql;
}

/// Changes the body of entry `seq` and makes all hashes from there on anew.
std::string rewritten(const Victim& victim, std::int64_t seq) {
  auto entries = victim.entries();
  const std::string body = R"({"note":"nothing happened"})";
  entries[static_cast<std::size_t>(seq - 1)].body = body;
  return with_body(seq, body) + rehashed(entries, seq);
}

Attack attack(const std::string& what, const std::string& how, bool people, Outcome expected,
              const std::function<std::string(const Victim&)>& sql) {
  Attack done{what, how, expected, Outcome::not_found, ""};
  const Victim victim(people);
  const Anchor noted = *must(must(Logbook::open(victim.file, OpenMode::read_only, victim.clock)).head());
  const std::string guards = restored_guards(victim.file), change = sql(victim);
  {
    const Database database(victim.file);
    if (!database.run(change)) {
      done.got = Outcome::refused;
      done.words = database.problem();
      return done;
    }
    if (change.starts_with(drop_guards) && !database.run(guards)) std::abort();
  }
  const auto log = Logbook::open(victim.file, OpenMode::read_only, victim.clock);
  if (!log) {
    done.got = Outcome::found;
    done.words = log.problems().front().what;
    return done;
  }
  if (const Verification report = log->verify(); !report.ok) {
    done.got = Outcome::found;
    done.words = report.problems.front().words;
  } else if (const Verification anchored = log->verify({noted}); !anchored.ok) {
    done.got = Outcome::with_anchor;
    done.words = anchored.problems.front().words;
  }
  return done;
}

}  // namespace

std::vector<Attack> try_all() {
  using enum Outcome;
  const std::string guards = drop_guards;
  const auto plain = [](const std::string& sql) { return [sql](const Victim&) { return sql; }; };
  std::vector<Attack> all;
  const auto tried = [&](Attack one) { all.push_back(std::move(one)); };
  tried(attack("an entry changed", "UPDATE", false, refused, plain(with_body(2, "{}"))));
  tried(attack("an entry deleted", "DELETE", false, refused, plain("DELETE FROM entry WHERE seq = 2")));
  tried(attack("an entry replaced", "REPLACE", false, refused,
               plain("REPLACE INTO entry SELECT * FROM entry WHERE seq = 2")));
  tried(attack("an entry changed", "triggers taken off and put back", false, found,
               plain(guards + with_body(2, "{}"))));
  tried(attack("an entry deleted from the middle", "triggers taken off and put back", false, found,
               plain(guards + "DELETE FROM entry WHERE seq = 2")));
  tried(
      attack("two entries swapped", "numbers exchanged", false, found,
             plain(guards + "UPDATE entry SET seq = 99 WHERE seq = 2; UPDATE entry SET seq = 2 WHERE seq = 3;"
                            "UPDATE entry SET seq = 3 WHERE seq = 99")));
  tried(attack(
      "an entry put in twice", "copied to the end", false, found,
      plain(guards +
            "INSERT INTO entry SELECT seq + 3, kind, tank, shift, at, station, \"by\", body, about, program,"
            " previous, 'other', form, happened, boot, uptime_ms, role, witness, bath_type, signature,"
            " witness_signature, latest_at FROM entry WHERE seq = 2")));
  tried(attack("an entry changed", "its own hash made anew", false, found, [&](const Victim& victim) {
    auto entries = victim.entries();
    entries[1].body = "{}";
    entries[1].hash = chain_hash(entries[1]);
    return guards + with_body(2, "{}") +
           fmt::format("UPDATE entry SET hash = '{}' WHERE seq = 2", entries[1].hash);
  }));
  tried(attack("the last entry deleted", "triggers taken off and put back", false, with_anchor,
               plain(guards + "DELETE FROM entry WHERE seq = 4")));
  tried(attack("an entry changed", "all later hashes made anew; a log without people", false, with_anchor,
               [&](const Victim& victim) { return guards + rewritten(victim, 2); }));
  tried(attack("an entry changed", "all later hashes made anew; signed entries, without the PIN", true, found,
               [&](const Victim& victim) { return guards + rewritten(victim, 4); }));
  tried(attack("the last entry changed", "its hash made anew; signed, without the PIN", true, found,
               [&](const Victim& victim) { return guards + rewritten(victim, 6); }));
  tried(attack("the last entry deleted", "signed", true, with_anchor,
               plain(guards + "DELETE FROM entry WHERE seq = 6")));
  tried(attack("a signature moved", "from an entry of the same person; hashes made anew", true, found,
               [&](const Victim& victim) {
                 auto entries = victim.entries();
                 entries[4].signature = entries[3].signature;
                 return guards +
                        fmt::format("UPDATE entry SET signature = '{}' WHERE seq = 5;",
                                    entries[3].signature) +
                        rehashed(entries, 5);
               }));
  tried(attack(
      "a signature taken off", "the role too; hashes made anew", true, found, [&](const Victim& victim) {
        auto entries = victim.entries();
        entries[4].signature.clear();
        entries[4].role.clear();
        return guards + "UPDATE entry SET signature = '', role = '' WHERE seq = 5;" + rehashed(entries, 5);
      }));
  tried(attack(
      "a signed entry passed off as one of format version 1", "hashes made anew", true, found,
      [&](const Victim& victim) {
        auto entries = victim.entries();
        Entry& entry = entries[4];
        entry.form = 1;
        entry.uptime = {};
        entry.role.clear();
        entry.signature.clear();
        return guards +
               "UPDATE entry SET form = 1, boot = '', uptime_ms = 0, role = '', signature = '' WHERE seq = 5;" +
               rehashed(entries, 5);
      }));
  tried(attack("somebody made a chemist", "the role in the person's entry changed; hashes made anew", true,
               found, [&](const Victim& victim) {
                 auto entries = victim.entries();
                 std::string& body = entries[1].body;
                 body.replace(body.find("operator"), 8, "chemist");
                 return guards + with_body(2, body) + rehashed(entries, 2);
               }));
  tried(attack("somebody's key exchanged", "the key in the person's entry changed; hashes made anew", true,
               found, [&](const Victim& victim) {
                 auto entries = victim.entries();
                 std::string& body = entries[1].body;
                 const auto key = body.find("\"key\":\"") + 7;
                 body[key] = body[key] == '0' ? '1' : '0';
                 return guards + with_body(2, body) + rehashed(entries, 2);
               }));
  tried(attack("a whole new log put in its place", "with people and PINs of the attacker's own", true,
               with_anchor, [&](const Victim& victim) {
                 const Victim forged(true);
                 std::filesystem::copy_file(forged.file, victim.file,
                                            std::filesystem::copy_options::overwrite_existing);
                 return std::string("SELECT 1");
               }));
  tried(attack("a trigger weakened", "entry_no_delete does nothing any more", false, found,
               plain("DROP TRIGGER entry_no_delete;"
                     "CREATE TRIGGER entry_no_delete BEFORE DELETE ON entry BEGIN SELECT 1; END")));
  tried(attack("an entry hidden from lists by time", "the latest clock beside it changed", false, found,
               plain(guards + "UPDATE entry SET latest_at = '2099-01-01T00:00:00.000Z' WHERE seq = 2")));
  tried(attack("an entry hidden from a search by text", "taken out of the search index", false, not_found,
               plain("INSERT INTO entry_text (entry_text) VALUES ('delete-all')")));
  return all;
}

std::string words(Outcome outcome) {
  switch (outcome) {
    case Outcome::refused:
      return "refused";
    case Outcome::found:
      return "found";
    case Outcome::with_anchor:
      return "found with a hash noted elsewhere, not without";
    case Outcome::not_found:
      return "NOT found";
  }
  return "";
}

}  // namespace log_attacks
