// What is written into the shift log (NewEntry) and what comes back out of it (Entry).
// Not for: what the body says. The body is the caller's JSON; the log keeps it to the letter.
// Read next: logbook.hpp, and engine/logbook/FORMAT.md for the bytes on disk.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "bathwright/base/result.hpp"

namespace bathwright::logbook {

enum class EntryKind { analysis, plan, slip, addition, level, ampere_hours, dump, note, correction };

/// The name of a kind in files and on the command line, such as "ampere-hours".
[[nodiscard]] std::string_view name(EntryKind kind);

/// The kind of that name; an unknown name is answered with the nearest known one.
[[nodiscard]] Result<EntryKind> entry_kind(std::string_view name);

/// Every kind's name, in the order of the enumeration.
[[nodiscard]] const std::vector<std::string>& entry_kind_names();

/// An entry before it is logged. Texts are UTF-8 without control characters, at most 200 bytes.
struct NewEntry {
  EntryKind kind = EntryKind::note;
  std::string tank{};   ///< the tank's identifier; not empty
  std::string shift{};  ///< the shift's name; may be empty
  std::string by{};     ///< who signs; not empty
  std::string body{};   ///< canonical JSON text, at most 1 MiB; a correction gives "reason"
  std::optional<std::int64_t> corrects{};  ///< corrections only: an entry of the same tank
  std::string program{};                   ///< name and version of the program that made the entry
};

/// An entry as it stands in the log.
struct Entry {
  std::int64_t seq = 0;  ///< 1, 2, 3 ... without gaps: the order of the log, whatever the wall clock did
  EntryKind kind = EntryKind::note;
  std::string tank;
  std::string shift;
  std::string at;       ///< wall clock when logged, UTC, ISO 8601 with milliseconds (iso_utc)
  std::string station;  ///< the place it was logged from
  std::string by;
  std::string body;
  std::optional<std::int64_t> corrects;
  std::string program;
  std::string previous;  ///< hash of the entry before, 64 hexadecimal digits; 64 zeros for the first
  std::string hash;      ///< BLAKE2b-256 over all fields above, 64 hexadecimal digits

  bool operator==(const Entry&) const = default;
};

}  // namespace bathwright::logbook
