// The hash by which an entry names a file: the program that wrote it, for one.
#pragma once

#include <filesystem>
#include <string>

#include "bathwright/base/result.hpp"

namespace bathwright::logbook {

/// "blake2b:" and the BLAKE2b-256 (RFC 7693, no key) of the file's bytes, 64 hexadecimal digits.
[[nodiscard]] Result<std::string> file_digest(const std::filesystem::path& file);

}  // namespace bathwright::logbook
