// Who may write into a log: people, their roles, and what each role may do. They are entries of the log
// themselves, so that a change of them is chained, signed and seen.
// Not for proving who someone is; that is signing.hpp. Read next: logbook.hpp.
#pragma once

#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

#include "bathwright/base/result.hpp"
#include "bathwright/logbook/entry.hpp"

namespace bathwright::logbook {

enum class Role {
  operator_,  ///< analyses, additions, levels: a shift's work
  chemist,    ///< also slips, dumps, people and the log's rules
  auditor     ///< reads only
};

[[nodiscard]] std::string_view name(Role role);
[[nodiscard]] Result<Role> role_of(std::string_view name);

struct Person {
  std::string name;
  Role role = Role::operator_;
  bool active = true;    ///< false: left, signs nothing any more
  std::int64_t seq = 0;  ///< the entry that last said so
  /// What a PIN is proved by: it gives, with the salt, the private half of this key.
  std::string key, salt;  ///< hexadecimal
  std::int64_t memory_KiB = 0, passes = 0;

  bool operator==(const Person&) const = default;
};

/// What it costs to try a PIN, kept with each person. RFC 9106 recommends these where memory is short
/// (section 4, second choice), as on a shop's computer: some 0.1 s.
struct PinCost {
  std::int64_t memory_KiB = 64 * 1024, passes = 3;
};

/// A name and the PIN that proves it.
struct Credential {
  std::string name, pin;
};

/// Who signs an entry, and who signs second where the log's rules ask for it.
struct Signatures {
  std::optional<Credential> by{}, witness{};
};

/// That an entry of this kind of one tank takes two signatures.
struct SecondSignature {
  std::string tank;
  std::vector<EntryKind> kinds;
};

}  // namespace bathwright::logbook
