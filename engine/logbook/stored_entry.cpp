#include "stored_entry.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>

namespace bathwright::logbook {
namespace {

// In the order of namespace column.
constexpr std::array<std::string_view, 22> names{"form",      "seq",      "kind",      "tank",
                                                 "shift",     "at",       "happened",  "boot",
                                                 "uptime_ms", "station",  "by",        "role",
                                                 "witness",   "body",     "about",     "program",
                                                 "bath_type", "previous", "signature", "witness_signature",
                                                 "hash",      "latest_at"};

/// The names with `before` in front of each; quoted, as "by" is a word of SQL.
std::string listed(std::string_view before) {
  std::string all;
  for (const std::string_view name : names)
    all += fmt::format("{}{}\"{}\"", all.empty() ? "" : ", ", before, name);
  return all;
}

}  // namespace

int column_of(std::string_view name) {
  const auto found = std::ranges::find(names, name);
  return found == names.end() ? 0 : static_cast<int>(found - names.begin());
}

std::string select_entries(std::string_view rest) {
  // The search index has columns of the same names.
  static const std::string columns = listed("entry.");
  return fmt::format("SELECT {} FROM entry {}", columns, rest);
}

Result<Entry> read_entry(const Statement& row) {
  const auto kind = entry_kind(row.text(column::kind));
  if (!kind)
    return Problem{Fault::inconsistent_data, fmt::format("log entry {}", row.integer(column::seq)),
                   fmt::format("its kind \"{}\" is unknown", row.text(column::kind)), "",
                   "verify the logbook"};
  return Entry{.form = row.integer(column::form),
               .seq = row.integer(column::seq),
               .kind = *kind,
               .tank = row.text(column::tank),
               .shift = row.text(column::shift),
               .at = row.text(column::at),
               .happened = row.text(column::happened),
               .uptime = {row.text(column::boot), std::chrono::milliseconds(row.integer(column::uptime_ms))},
               .station = row.text(column::station),
               .by = row.text(column::by),
               .role = row.text(column::role),
               .witness = row.text(column::witness),
               .body = row.text(column::body),
               .about = row.optional_integer(column::about),
               .program = row.text(column::program),
               .bath_type = row.text(column::bath_type),
               .previous = row.text(column::previous),
               .signature = row.text(column::signature),
               .witness_signature = row.text(column::witness_signature),
               .hash = row.text(column::hash)};
}

Outcome insert_entry(const Database& database, const Entry& entry) {
  Statement insert = database.prepare(fmt::format(
      "INSERT INTO entry ({}) VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?,"
      " max(?{}, coalesce((SELECT latest_at FROM entry WHERE seq = ?{} - 1), '')))",
      listed(""), 1 + column::at, 1 + column::seq));
  insert.bind(1 + column::form, entry.form)
      .bind(1 + column::seq, entry.seq)
      .bind(1 + column::kind, name(entry.kind))
      .bind(1 + column::tank, entry.tank)
      .bind(1 + column::shift, entry.shift)
      .bind(1 + column::at, entry.at)
      .bind(1 + column::happened, entry.happened)
      .bind(1 + column::boot, entry.uptime.boot)
      .bind(1 + column::uptime_ms, entry.uptime.since.count())
      .bind(1 + column::station, entry.station)
      .bind(1 + column::by, entry.by)
      .bind(1 + column::role, entry.role)
      .bind(1 + column::witness, entry.witness)
      .bind(1 + column::body, entry.body)
      .bind(1 + column::about, entry.about)
      .bind(1 + column::program, entry.program)
      .bind(1 + column::bath_type, entry.bath_type)
      .bind(1 + column::previous, entry.previous)
      .bind(1 + column::signature, entry.signature)
      .bind(1 + column::witness_signature, entry.witness_signature)
      .bind(1 + column::hash, entry.hash);
  insert.step();
  if (insert.failed()) return database.problem();
  Statement index =
      database.prepare(R"(INSERT INTO entry_text (rowid, body, "by", shift) VALUES (?, ?, ?, ?))");
  index.bind(1, entry.seq).bind(2, entry.body).bind(3, entry.by).bind(4, entry.shift);
  index.step();
  if (index.failed()) return database.problem();
  return Done{};
}

}  // namespace bathwright::logbook
