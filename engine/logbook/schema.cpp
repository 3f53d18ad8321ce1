#include "schema.hpp"

#include <fmt/format.h>

#include <cassert>
#include <map>
#include <utility>

#include "migrations.hpp"

namespace bathwright::logbook {
namespace {

constexpr std::int64_t application_id = 0x4257'4C42;  // "BWLB"
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

/// Runs the steps from `version` on.
Outcome take_steps_from(const Database& database, std::int64_t version) {
  for (auto step = static_cast<std::size_t>(version); step < migrations.size(); ++step)
    if (auto taken = database.execute(migrations[step]); !taken) return taken;
  return Done{};
}

/// Makes or brings up the tables in one transaction: a program that dies half-way leaves them as they were.
Outcome bring_up_to_date(const Database& database) {
  WriteTransaction transaction(database);
  if (auto begun = transaction.begin(); !begun) return begun;
  const auto identity = identify(database);  // another program may have been quicker
  if (!identity) return identity.problems();
  if (auto taken = take_steps_from(database, identity->version); !taken) return taken;
  const std::string stamp =
      fmt::format("PRAGMA application_id = {}; PRAGMA user_version = {}", application_id, schema_version);
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
const SchemaObjects& expected_objects() {
  static const SchemaObjects expected = schema_objects(tables_in_memory()).value();
  return expected;
}

}  // namespace

Database tables_in_memory() {
  Database reference = Database::in_memory();
  [[maybe_unused]] const auto made = take_steps_from(reference, 0);
  assert(made);
  return reference;
}

Outcome prepare_schema(Database& database, OpenMode mode) {
  const auto identity = identify(database);
  if (!identity) return identity.problems();
  if (identity->empty() && mode != OpenMode::create)
    return Problem{Fault::bad_input, database.name(), "the file is empty", "a logbook file",
                   "check the path, or start a new logbook there"};
  if (!identity->empty() && identity->application != application_id)
    return Problem{Fault::bad_input, database.name(), "this is a database of another program",
                   "a logbook file", "check the path"};
  const bool ours = identity->empty() || identity->version >= 1;
  if (!ours || identity->version > schema_version)
    return Problem{Fault::refused, database.name(),
                   fmt::format("the logbook has format version {}", identity->version),
                   fmt::format("version 1 to {}", schema_version),
                   ours ? "it was written by a newer program: update this one"
                        : "the file's heading is damaged: go on with the last good backup"};
  if (mode == OpenMode::read_only) {
    if (identity->version == schema_version) return Done{};
    // The file stays as it is; a copy of it is brought up to date and read.
    auto copy = database.copied_to_memory();
    if (!copy) return copy.problems();
    database = *std::move(copy);
    return bring_up_to_date(database);
  }
  if (identity->version < schema_version)
    if (auto brought = bring_up_to_date(database); !brought) return brought;
  return use_write_ahead_log(database);
}

void check_guards(const Database& database, std::vector<Finding>& findings) {
  const auto found = schema_objects(database);
  if (!found) {
    findings.push_back({FindingKind::unreadable, 0, found.problems().front().text()});
    return;
  }
  const SchemaObjects& expected = expected_objects();
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
