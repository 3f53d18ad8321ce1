// Entries as rows of the table `entry`.
#pragma once

#include <string>
#include <string_view>

#include "bathwright/base/result.hpp"
#include "bathwright/logbook/entry.hpp"
#include "database.hpp"

namespace bathwright::logbook {

/// The columns in the order of select_entries, counted from 0.
namespace column {
enum : int {
  form,
  seq,
  kind,
  tank,
  shift,
  at,
  happened,
  boot,
  uptime_ms,
  station,
  by,
  role,
  witness,
  body,
  about,
  program,
  bath_type,
  previous,
  signature,
  witness_signature,
  hash,
  latest_at  ///< kept by the table, not part of an entry
};
}

/// Where a column of the table stands; one that does not belong to it stands first.
[[nodiscard]] int column_of(std::string_view name);

/// "SELECT every column FROM entry " with `rest` behind it.
[[nodiscard]] std::string select_entries(std::string_view rest);

/// The entry in the row a select_entries statement stands on. A kind that is not ours is a problem.
[[nodiscard]] Result<Entry> read_entry(const Statement& row);

[[nodiscard]] Outcome insert_entry(const Database& database, const Entry& entry);

}  // namespace bathwright::logbook
