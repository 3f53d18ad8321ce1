#include "schema.hpp"

#include <fmt/format.h>

#include <cassert>
#include <map>

namespace bathwright::logbook {
namespace {

constexpr std::int64_t application_id = 0x4257'4C42;  // "BWLB"
constexpr std::int64_t schema_version = 1;

constexpr const char* schema_sql = R"sql(
CREATE TABLE entry (
  seq      INTEGER PRIMARY KEY CHECK (seq >= 1),
  kind     TEXT NOT NULL,
  tank     TEXT NOT NULL,
  shift    TEXT NOT NULL,
  at       TEXT NOT NULL,
  station  TEXT NOT NULL,
  "by"     TEXT NOT NULL,
  body     TEXT NOT NULL,
  corrects INTEGER REFERENCES entry (seq),
  program  TEXT NOT NULL,
  previous TEXT NOT NULL,
  hash     TEXT NOT NULL UNIQUE
) STRICT;
CREATE INDEX entry_by_tank ON entry (tank, kind, seq);
CREATE TRIGGER entry_no_update BEFORE UPDATE ON entry
  BEGIN SELECT RAISE(ABORT, 'log entries are never changed; add a correction'); END;
CREATE TRIGGER entry_no_delete BEFORE DELETE ON entry
  BEGIN SELECT RAISE(ABORT, 'log entries are never deleted; add a correction'); END;
-- INSERT OR REPLACE passes by the delete trigger, hence a trigger of its own
CREATE TRIGGER entry_no_replace BEFORE INSERT ON entry
  WHEN EXISTS (SELECT 1 FROM entry WHERE seq = NEW.seq OR hash = NEW.hash)
  BEGIN SELECT RAISE(ABORT, 'log entries are never replaced; add a correction'); END;
CREATE TRIGGER entry_in_order BEFORE INSERT ON entry
  WHEN NEW.seq IS NOT (SELECT coalesce(max(seq), 0) + 1 FROM entry)
  BEGIN SELECT RAISE(ABORT, 'log entries are numbered without gaps'); END;
)sql";

struct Identity {
  std::int64_t application = 0, version = 0, objects = 0;
  bool empty() const { return application == 0 && version == 0 && objects == 0; }
};

Result<Identity> identify(const Database& database) {
  Statement query = database.prepare(
      "SELECT application_id, user_version, (SELECT count(*) FROM sqlite_schema)"
      " FROM pragma_application_id, pragma_user_version");
  if (!query.step()) return database.problem();
  return Identity{query.integer(0), query.integer(1), query.integer(2)};
}

Outcome make_tables(const Database& database) {
  WriteTransaction transaction(database);
  if (auto begun = transaction.begin(); !begun) return begun;
  const auto identity = identify(database);
  if (!identity) return identity.problems();
  if (!identity->empty()) return Done{};  // another program was quicker
  const std::string stamp =
      fmt::format("PRAGMA application_id = {}; PRAGMA user_version = {}", application_id, schema_version);
  if (auto made = database.execute(schema_sql); !made) return made;
  if (auto stamped = database.execute(stamp.c_str()); !stamped) return stamped;
  return transaction.commit();
}

Outcome use_write_ahead_log(const Database& database) {
  Statement query = database.prepare("PRAGMA journal_mode = WAL");
  if (!query.step()) return database.problem();
  if (query.text(0) == "wal") return Done{};
  return Problem{Fault::io, database.name(), "this folder cannot hold a write-ahead log",
                 "a folder on a local disk",
                 "keep the logbook on a disk of this computer, not on a network drive"};
}

using SchemaObjects = std::map<std::string, std::string>;

Result<SchemaObjects> schema_objects(const Database& database) {
  SchemaObjects objects;
  Statement query = database.prepare("SELECT type || ' ' || name, coalesce(sql, '') FROM sqlite_schema");
  while (query.step()) objects[query.text(0)] = query.text(1);
  if (query.failed()) return database.problem();
  return objects;
}

/// What SQLite itself makes of our SQL, so that there is no second list to keep.
SchemaObjects expected_objects() {
  const Database reference = Database::in_memory();
  [[maybe_unused]] const auto made = reference.execute(schema_sql);
  assert(made);
  return schema_objects(reference).value();
}

}  // namespace

Outcome prepare_schema(const Database& database, OpenMode mode) {
  auto identity = identify(database);
  if (identity && identity->empty() && mode == OpenMode::create) {
    if (auto made = make_tables(database); !made) return made;
    identity = identify(database);
  }
  if (!identity) return identity.problems();
  if (identity->empty())
    return Problem{Fault::bad_input, database.name(), "the file is empty", "a logbook file",
                   "check the path, or start a new logbook there"};
  if (identity->application != application_id)
    return Problem{Fault::bad_input, database.name(), "this is a database of another program",
                   "a logbook file", "check the path"};
  if (identity->version != schema_version)
    return Problem{Fault::refused, database.name(),
                   fmt::format("the logbook has format version {}", identity->version),
                   fmt::format("version {}", schema_version),
                   identity->version > schema_version
                       ? "it was written by a newer program: update this one"
                       : "the file's heading is damaged: go on with the last good backup"};
  return mode == OpenMode::read_only ? Outcome(Done{}) : use_write_ahead_log(database);
}

void check_guards(const Database& database, std::vector<Finding>& findings) {
  const auto found = schema_objects(database);
  if (!found) {
    findings.push_back({FindingKind::unreadable, 0, found.problems().front().text()});
    return;
  }
  const auto expected = expected_objects();
  for (const auto& [object, sql] : expected) {
    const auto same = found->find(object);
    if (same == found->end())
      findings.push_back({FindingKind::guard, 0, "the " + object + " is missing"});
    else if (same->second != sql)
      findings.push_back({FindingKind::guard, 0, "the " + object + " was altered"});
  }
  for (const auto& [object, sql] : *found)
    if (!expected.contains(object))
      findings.push_back({FindingKind::guard, 0, "the " + object + " does not belong to a logbook"});
}

}  // namespace bathwright::logbook
