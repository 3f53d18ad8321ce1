// The bytes of a plugin where nobody can change them: what was hashed is what is probed and what runs.
#pragma once

#include <string>

#include "file_trust.hpp"

namespace bathwright::plugin_host {

struct SealedCopy {
  std::filesystem::path file;  ///< where the bytes came from
  Descriptor memory;           ///< read-only for everybody, us included
  std::string sha256;          ///< of `memory`, in hexadecimal
};

/// Copies a trusted file (file_trust.hpp) into sealed memory and hashes the copy.
Result<SealedCopy> sealed_copy(const std::filesystem::path& file, Above above);

/// What dlopen() and posix_spawn() call an open descriptor.
[[nodiscard]] std::string path_of(const Descriptor& descriptor);

}  // namespace bathwright::plugin_host
