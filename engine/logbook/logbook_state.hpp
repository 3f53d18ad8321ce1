// What an open log holds, and the reading that its functions share.
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <variant>
#include <vector>

#include "bathwright/logbook/logbook.hpp"
#include "database.hpp"
#include "roll.hpp"
#include "signing.hpp"

namespace bathwright::logbook {

/// The unlocked key of a person, as the log had the person then.
struct Signer {
  Person person;
  SigningKey key;
};

struct Keys {
  std::optional<Signer> by, witness;
};

struct Logbook::State {
  Database database;
  OpenMode mode;
  const Clock& clock;
  OpenSettings settings;

  using Value = std::variant<std::int64_t, std::string>;
  [[nodiscard]] Result<std::vector<Entry>> all_of(std::string_view clauses,
                                                  const std::vector<Value>& values) const;
  [[nodiscard]] Result<std::optional<Entry>> first_of(std::string_view clauses,
                                                      const std::vector<Value>& values) const;
  [[nodiscard]] Result<std::optional<Entry>> last() const;
  [[nodiscard]] Result<std::optional<Entry>> with_seq(std::int64_t seq) const;
  [[nodiscard]] Result<std::vector<Entry>> open_slips(const std::string& tank) const;
  [[nodiscard]] Result<Roll> roll() const;

  /// No entry before has a wall clock of `at` or later; none after has one earlier than `at`.
  [[nodiscard]] Result<std::int64_t> first_from(const std::string& at) const;
  [[nodiscard]] Result<std::int64_t> last_before(const std::string& at) const;

  /// The keys of those who sign, by their PINs. A wrong PIN is logged.
  [[nodiscard]] Result<Keys> check_pins(const NewEntry& entry, const Signatures& signatures);
  /// Fills in who signed and the signatures, where the roll lets them write this.
  [[nodiscard]] static Outcome sign(Entry& entry, const Keys& keys, const Roll& roll);

  /// That no slip is issued on an open one, and that what an entry answers is there to be answered.
  [[nodiscard]] Outcome check_slips(const NewEntry& entry) const;

  /// Refuses where the log is open for reading only.
  [[nodiscard]] Outcome writable() const;

  /// An entry as it would be written now, behind `last`: without signatures and hash.
  [[nodiscard]] Entry entry_of(const NewEntry& entry, const std::optional<Entry>& last) const;

  /// An entry that nobody signs, which only the log itself writes.
  [[nodiscard]] Outcome log_failed_pin(const std::string& name);
  [[nodiscard]] Result<int> failures_in_a_row(const Person& person,
                                              std::chrono::milliseconds& since_last) const;
  [[nodiscard]] Result<Signer> check_pin(const Person& person, const std::string& pin);
};

}  // namespace bathwright::logbook
