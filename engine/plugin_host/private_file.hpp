// Small files of the user's own, written whole or not at all.
#pragma once

#include <bathwright/base/result.hpp>
#include <filesystem>

namespace bathwright::plugin_host {

/// Replaces `file` (mode 0600) in one step. Its folder is made where it is not there.
Outcome write_private(const std::filesystem::path& file, const std::string& content);

/// The content of a file that only the user can change (file_trust.hpp), at most 1 MiB.
Result<std::string> read_private(const std::filesystem::path& file);

}  // namespace bathwright::plugin_host
