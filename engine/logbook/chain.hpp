// The hash that chains each entry to the one before. The bytes are laid down in FORMAT.md, "Hash".
#pragma once

#include <string>

#include "bathwright/logbook/entry.hpp"

namespace bathwright::logbook {

/// `previous` of the first entry: 64 zeros.
[[nodiscard]] std::string first_previous();

/// BLAKE2b-256 (RFC 7693, no key) over every field of `entry` but `hash`, as 64 lower-case hexadecimal
/// digits.
[[nodiscard]] std::string chain_hash(const Entry& entry);

}  // namespace bathwright::logbook
