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
#include "bathwright/logbook/clock.hpp"

namespace bathwright::logbook {

enum class EntryKind {
  analysis,
  plan,
  slip,
  addition,
  level,
  ampere_hours,
  dump,
  note,
  correction,
  slip_approved,  ///< a second person stands for a slip
  slip_closed,    ///< a slip was carried out or cancelled
  hand_over,      ///< one shift told the next
  person,         ///< who may sign, and with which key
  setting,        ///< a rule of the log: second signatures, shifts
  failed_pin      ///< somebody gave a wrong PIN
};

/// The name of a kind in files and on the command line, such as "ampere-hours".
[[nodiscard]] std::string_view name(EntryKind kind);

/// The kind of that name; an unknown name is answered with the nearest known one.
[[nodiscard]] Result<EntryKind> entry_kind(std::string_view name);

/// Every kind's name, in the order of the enumeration.
[[nodiscard]] const std::vector<std::string>& entry_kind_names();

/// An entry before it is logged. Texts are UTF-8 without control characters, at most 200 bytes.
struct NewEntry {
  EntryKind kind = EntryKind::note;
  std::string tank{};   ///< the tank's identifier; empty only where the entry is about no tank
  std::string shift{};  ///< the shift's name; may be empty
  std::string by{};     ///< who writes; may be left empty where somebody signs
  std::string body{};   ///< canonical JSON text, at most 1 MiB
  /// The entry it answers, of the same tank: what a correction corrects, the open slip that an addition or a
  /// dump carries out or that is closed.
  std::optional<std::int64_t> about{};
  std::optional<UtcTime> happened{};  ///< when it was done, where that is not now
  std::string bath_type{};            ///< the plugin it was computed with: name, version, hash
};

/// An entry as it stands in the log.
struct Entry {
  std::int64_t form = 2;  ///< the version of the format whose hash it bears
  std::int64_t seq = 0;   ///< 1, 2, 3 ... without gaps: the order of the log, whatever the clocks did
  EntryKind kind = EntryKind::note;
  std::string tank;
  std::string shift;
  std::string at;        ///< wall clock when logged, UTC, ISO 8601 with milliseconds (iso_utc)
  std::string happened;  ///< when it was done, written alike; empty: when it was logged
  Uptime uptime;         ///< the clock that cannot be set
  std::string station;   ///< the place it was logged from
  std::string by;
  std::string role;     ///< of `by` when it was signed; empty: not signed
  std::string witness;  ///< who signed second; may be empty
  std::string body;
  std::optional<std::int64_t> about;
  std::string program;            ///< name, version and hash of the program that made it
  std::string bath_type;          ///< as in NewEntry
  std::string previous;           ///< hash of the entry before, 64 hexadecimal digits; 64 zeros for the first
  std::string signature;          ///< of `by`, Ed25519, 128 hexadecimal digits; empty: not signed
  std::string witness_signature;  ///< of `witness`
  std::string hash;               ///< over all of the above (FORMAT.md), 64 hexadecimal digits

  bool operator==(const Entry&) const = default;
};

}  // namespace bathwright::logbook
