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
#include "bathwright/logbook/people.hpp"

namespace bathwright::logbook {

enum class OpenMode {
  create,      ///< read and append; the file is made when there is none (its folder must exist)
  read_write,  ///< read and append; the file must exist
  read_only    ///< read; append is refused and nothing is created
};

struct OpenSettings {
  std::string station = "local";           ///< written into each entry; the rules of NewEntry's texts hold
  std::string program{};                   ///< likewise: name, version and hash of the program
  PinCost pin_cost{};                      ///< of the PINs given while the log is open
  std::chrono::milliseconds wait{10'000};  ///< how long to wait for another program that is writing
};

/// Which entries to list; what is left at its default does not restrict.
struct Filter {
  std::string tank{};                   ///< exactly this tank
  std::optional<EntryKind> kind{};      ///< exactly this kind
  std::string by{};                     ///< exactly this writer
  std::string shift{};                  ///< exactly this shift
  std::optional<std::int64_t> about{};  ///< answers exactly this entry
  std::optional<UtcTime> from{};        ///< wall clock at or after
  std::optional<UtcTime> to{};          ///< wall clock before
  std::string text{};                   ///< found in body, by or shift; case of A to Z ignored
  std::int64_t after_seq = 0;  ///< go on behind this entry, in the order of the list; 0 starts at its head
  std::size_t limit = 0;       ///< at most so many; 0 lists all
  bool newest_first = false;   ///< order by falling instead of rising sequence
};

/// What was noted of a log elsewhere, on a hand-over sheet or another disk.
struct Anchor {
  std::int64_t seq = 0;  ///< 0: not noted
  std::string hash;

  bool operator==(const Anchor&) const = default;
};

enum class FindingKind {
  changed,     ///< the entry's content does not give its hash
  gap,         ///< entries are missing before this one
  reordered,   ///< the entry follows another than the one before it in the file
  link,        ///< the entry follows an entry that is not in the file
  guard,       ///< the tables, or the triggers that refuse changes, are not those of the format
  unreadable,  ///< the file is damaged here
  signature,   ///< not signed by whom it names, or not by one who may
  cut,         ///< an entry noted elsewhere is not in the log, or another stands in its place
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
  /// not logged. Bad input is answered with all its problems at once. Where the log has people, one of them
  /// signs, and only what the role may; a wrong PIN is logged, and five of them in a row shut that name out
  /// for a quarter of an hour. A second slip for a tank whose last is open is refused.
  [[nodiscard]] Result<Entry> append(const NewEntry& entry, const Signatures& signatures = {});

  /// Several at once, in this order: all of them are logged or none.
  [[nodiscard]] Result<std::vector<Entry>> append_all(const std::vector<NewEntry>& entries,
                                                      const Signatures& signatures = {});

  /// Entries of another copy of this log, as they are: those it has already are passed over, the others must
  /// carry the chain on. Returns how many were new; where one does not fit, none is taken.
  [[nodiscard]] Result<std::int64_t> take_over(const std::vector<Entry>& entries);

  [[nodiscard]] Result<std::vector<Person>> people() const;

  /// Makes someone one of the log's people, or gives one who is a new role or PIN. The first is a chemist and
  /// signs with the own PIN; from then on every entry is signed.
  [[nodiscard]] Result<Entry> admit(const std::string& name, Role role, const std::string& pin,
                                    const Signatures& signatures = {});
  [[nodiscard]] Result<Entry> change_pin(const Credential& person, const std::string& new_pin);
  /// Who left signs nothing any more; the entries stay.
  [[nodiscard]] Result<Entry> retire(const std::string& name, const Signatures& signatures);
  /// Ends a shutting out at once.
  [[nodiscard]] Result<Entry> unlock(const std::string& name, const Signatures& signatures);
  /// From now on; no kinds end it.
  [[nodiscard]] Result<Entry> ask_second_signature(const SecondSignature& rule, const Signatures& signatures);

  [[nodiscard]] Result<std::vector<Entry>> list(const Filter& filter = {}) const;

  /// The entry of that sequence number; a problem (bad_input) when there is none.
  [[nodiscard]] Result<Entry> find(std::int64_t seq) const;

  /// The entry of highest sequence of that tank and kind, if there is one.
  [[nodiscard]] Result<std::optional<Entry>> latest(const std::string& tank, EntryKind kind) const;

  /// Whether a later entry corrects that one.
  [[nodiscard]] Result<bool> is_corrected(std::int64_t seq) const;

  /// Slips not closed yet, of one tank or of all, oldest first.
  [[nodiscard]] Result<std::vector<Entry>> open_slips(const std::string& tank = {}) const;

  /// Every tank the log has entries of, in the order of their names.
  [[nodiscard]] Result<std::vector<std::string>> tanks() const;

  /// The shifts as a setting last told them, JSON; empty where none did.
  [[nodiscard]] Result<std::string> shift_pattern() const;

  /// The last entry's number and hash, to be noted elsewhere; nothing in an empty log.
  [[nodiscard]] Result<std::optional<Anchor>> head() const;

  /// Walks the whole chain and reports everything that is not as it was logged, and each anchor the log no
  /// longer holds.
  [[nodiscard]] Verification verify(const std::vector<Anchor>& anchors = {}) const;

 private:
  struct State;  // logbook_state.hpp
  Result<Entry> append_person(Person person, const Signatures& signatures);
  explicit Logbook(std::unique_ptr<State> state);
  std::unique_ptr<State> state_;
};

}  // namespace bathwright::logbook
