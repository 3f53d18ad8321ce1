// The shift log: append-only, in one SQLite file, each entry carrying the hash of the one before.
// Not for drafts and their undo: what stands here is never edited, only corrected by a later entry.
// Read next: engine/logbook/FORMAT.md (tables, hash bytes, what verify can and cannot see).
#pragma once

#include <chrono>
#include <cstdint>
#include <filesystem>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "bathwright/base/result.hpp"
#include "bathwright/logbook/clock.hpp"
#include "bathwright/logbook/entry.hpp"

namespace bathwright::logbook {

enum class OpenMode {
  create,      ///< read and append; the file is made when there is none (its folder must exist)
  read_write,  ///< read and append; the file must exist
  read_only    ///< read; append is refused and nothing is created
};

struct OpenSettings {
  std::string station = "local";           ///< written into each entry; the rules of NewEntry's texts hold
  std::chrono::milliseconds wait{10'000};  ///< how long to wait for another program that is writing
};

/// Which entries to list; what is left at its default does not restrict.
struct Filter {
  std::string tank{};               ///< exactly this tank
  std::optional<EntryKind> kind{};  ///< exactly this kind
  std::optional<UtcTime> from{};    ///< wall clock at or after
  std::optional<UtcTime> to{};      ///< wall clock before
  std::string text{};               ///< found in body, by or shift; case of A to Z ignored
  std::int64_t after_seq = 0;  ///< go on behind this entry, in the order of the list; 0 starts at its head
  std::size_t limit = 0;       ///< at most so many; 0 lists all
  bool newest_first = false;   ///< order by falling instead of rising sequence
};

enum class FindingKind {
  changed,     ///< the entry's content does not give its hash
  gap,         ///< entries are missing before this one
  reordered,   ///< the entry follows another than the one before it in the file
  link,        ///< the entry follows an entry that is not in the file
  guard,       ///< the tables, or the triggers that refuse changes, are not those of the format
  unreadable,  ///< the file is damaged here
  clock_back   ///< the wall clock stands before that of the entry before; no fault of the chain
};

struct Finding {
  FindingKind kind;
  std::int64_t seq = 0;  ///< the entry it was found at; 0 when it concerns the whole file
  std::string words;     ///< one sentence for a person
};

struct Verification {
  bool ok = true;                 ///< no problems
  std::int64_t entries = 0;       ///< entries walked
  std::string head;               ///< hash of the last entry: note it elsewhere, and a cut-off end shows too
  std::vector<Finding> problems;  ///< in order of sequence
  std::vector<Finding> clock_steps;  ///< where the clock was set back (kind clock_back); does not affect ok
};

/// An open log. Use each object from one thread at a time; any number of objects and processes may have the
/// same file open, and they append one after the other. Movable, not copyable.
class Logbook {
 public:
  /// Opens the log at `path`. `clock` must outlive the log. Problems name the cause: no folder, no file, not
  /// a logbook, made by a newer version, damaged, locked, not writable, disk full.
  [[nodiscard]] static Result<Logbook> open(const std::filesystem::path& path, OpenMode mode,
                                            const Clock& clock, const OpenSettings& settings = {});
  Logbook(Logbook&&) noexcept;
  Logbook& operator=(Logbook&&) noexcept;
  ~Logbook();

  /// Logs one entry. A value means it is on the disk and survives a crash or power cut; a problem means it is
  /// not logged. Bad input is answered with all its problems at once.
  [[nodiscard]] Result<Entry> append(const NewEntry& entry);

  [[nodiscard]] Result<std::vector<Entry>> list(const Filter& filter = {}) const;

  /// The entry of that sequence number; a problem (bad_input) when there is none.
  [[nodiscard]] Result<Entry> find(std::int64_t seq) const;

  /// The entry of highest sequence of that tank and kind, if there is one.
  [[nodiscard]] Result<std::optional<Entry>> latest(const std::string& tank, EntryKind kind) const;

  /// Walks the whole chain and reports everything that is not as it was logged.
  [[nodiscard]] Verification verify() const;

 private:
  struct State;
  explicit Logbook(std::unique_ptr<State> state);
  std::unique_ptr<State> state_;
};

}  // namespace bathwright::logbook
