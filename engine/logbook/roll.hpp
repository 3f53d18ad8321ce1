// The people of a log and its rules, as its entries of kind person and setting made them, and what they let
// each write. Append asks it before an entry is written, verify after: there is no second list of rights.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "bathwright/logbook/people.hpp"

namespace bathwright::logbook {

class Roll {
 public:
  /// Learns from an entry of kind person or setting; others change nothing. A problem where its body does not
  /// say what such an entry must.
  Outcome take(const Entry& entry);

  [[nodiscard]] const std::vector<Person>& people() const { return people_; }
  [[nodiscard]] const Person* person(const std::string& name) const;
  [[nodiscard]] bool asks_second(const std::string& tank, EntryKind kind) const;

  /// The body of the setting that last told the shifts, JSON; empty where none did.
  [[nodiscard]] const std::string& shifts() const { return shifts_; }

  /// What keeps `entry` from being written by whom it names (by, role, witness); nothing where it may. Does
  /// not look at the signatures themselves.
  [[nodiscard]] std::optional<Problem> refusal(const Entry& entry) const;

  bool operator==(const Roll&) const = default;

 private:
  struct Asks {
    std::string tank;
    std::vector<EntryKind> kinds;
    bool operator==(const Asks&) const = default;
  };
  std::vector<Person> people_;
  std::vector<Asks> asks_;
  std::string shifts_;
};

/// The body of the entry that says this of a person, and of the rule of a tank.
[[nodiscard]] std::string body_of(const Person& person);
[[nodiscard]] std::string body_of(const SecondSignature& rule);

/// The person an entry of kind person tells of.
[[nodiscard]] Result<Person> person_in(const Entry& entry);

}  // namespace bathwright::logbook
