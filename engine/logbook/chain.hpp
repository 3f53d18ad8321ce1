// The hash that chains each entry to the one before. The bytes are laid down in FORMAT.md, "Hash".
#pragma once

#include <string>

#include "bathwright/logbook/entry.hpp"

namespace bathwright::logbook {

/// `previous` of the first entry: 64 zeros.
[[nodiscard]] std::string first_previous();

/// What a signature is over: BLAKE2b-256 (RFC 7693, no key) of every field of `entry` but the signatures and
/// the hash; 32 bytes.
[[nodiscard]] std::string content_digest(const Entry& entry);

/// The hash of an entry of either form, as 64 lower-case hexadecimal digits: of form 2 over the content's
/// digest and the signatures, of form 1 over the fields that form knew.
[[nodiscard]] std::string chain_hash(const Entry& entry);

}  // namespace bathwright::logbook
