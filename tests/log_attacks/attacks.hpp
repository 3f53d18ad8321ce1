// Attacks on a log, tried one after the other on fresh copies. Not for: accidents and damage; those are in
// tests/durability.
#pragma once

#include <string>
#include <vector>

namespace log_attacks {

/// What became of an attack.
enum class Outcome {
  refused,      ///< the file did not let itself be changed
  found,        ///< verify tells
  with_anchor,  ///< verify tells when it is given a hash noted elsewhere, and not otherwise
  not_found
};

struct Attack {
  std::string what, how;
  Outcome expected = Outcome::found;  ///< as FORMAT.md promises
  Outcome got = Outcome::not_found;
  std::string words;  ///< of verify, the first finding that is not about missing triggers
};

/// Tries all of them.
[[nodiscard]] std::vector<Attack> try_all();

[[nodiscard]] std::string words(Outcome outcome);

}  // namespace log_attacks
