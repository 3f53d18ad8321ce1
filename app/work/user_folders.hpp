// The user's own folders, by the XDG Base Directory Specification.
#pragma once

#include <filesystem>

namespace bathwright::work {

/// For what must be kept: the log, the user's bath types and which are allowed. $XDG_DATA_HOME/bathwright,
/// else
/// ~/.local/share/bathwright.
[[nodiscard]] std::filesystem::path data_folder();

/// For what one run leaves for the next. $XDG_STATE_HOME/bathwright, else ~/.local/state/bathwright.
[[nodiscard]] std::filesystem::path state_folder();

/// For what can be made again: $XDG_CACHE_HOME/bathwright, else ~/.cache/bathwright.
[[nodiscard]] std::filesystem::path cache_folder();

}  // namespace bathwright::work
