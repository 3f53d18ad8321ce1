#include "stored_entry.hpp"

#include <fmt/format.h>

namespace bathwright::logbook {
namespace {

// In the order of namespace column.
constexpr std::string_view columns =
    R"(seq, kind, tank, shift, at, station, "by", body, corrects, program, previous, hash)";

}  // namespace

std::string select_entries(std::string_view rest) {
  return fmt::format("SELECT {} FROM entry {}", columns, rest);
}

Result<Entry> read_entry(const Statement& row) {
  const auto kind = entry_kind(row.text(column::kind));
  if (!kind)
    return Problem{Fault::inconsistent_data, fmt::format("log entry {}", row.integer(column::seq)),
                   fmt::format("its kind \"{}\" is unknown", row.text(column::kind)), "",
                   "verify the logbook"};
  return Entry{.seq = row.integer(column::seq),
               .kind = *kind,
               .tank = row.text(column::tank),
               .shift = row.text(column::shift),
               .at = row.text(column::at),
               .station = row.text(column::station),
               .by = row.text(column::by),
               .body = row.text(column::body),
               .corrects = row.optional_integer(column::corrects),
               .program = row.text(column::program),
               .previous = row.text(column::previous),
               .hash = row.text(column::hash)};
}

Outcome insert_entry(const Database& database, const Entry& entry) {
  Statement insert = database.prepare(
      fmt::format("INSERT INTO entry ({}) VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)", columns));
  insert.bind(1 + column::seq, entry.seq)
      .bind(1 + column::kind, name(entry.kind))
      .bind(1 + column::tank, entry.tank)
      .bind(1 + column::shift, entry.shift)
      .bind(1 + column::at, entry.at)
      .bind(1 + column::station, entry.station)
      .bind(1 + column::by, entry.by)
      .bind(1 + column::body, entry.body)
      .bind(1 + column::corrects, entry.corrects)
      .bind(1 + column::program, entry.program)
      .bind(1 + column::previous, entry.previous)
      .bind(1 + column::hash, entry.hash);
  insert.step();
  if (insert.failed()) return database.problem();
  return Done{};
}

}  // namespace bathwright::logbook
