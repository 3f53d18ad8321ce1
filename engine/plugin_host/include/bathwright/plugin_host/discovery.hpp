// Where bath-type plugins are looked for. Not for: opening them (loader.hpp).
#pragma once

#include <bathwright/base/result.hpp>
#include <filesystem>
#include <vector>

namespace bathwright::plugin_host {

inline constexpr const char* plugin_suffix = ".bathtype.so";
inline constexpr const char* data_suffix = ".bathtype.toml";  ///< a bath type that runs no code

/// The folders of the running program that exist: "plugins" beside it (a build tree) and
/// "../lib/bathwright/plugins" from there (an installed tree). Absolute paths.
[[nodiscard]] std::vector<std::filesystem::path> built_in_folders();

struct FoundFiles {
  std::vector<std::filesystem::path> files;
  Problems problems;  ///< a folder that is not there or cannot be read
};

/// Files ending in .bathtype.so or .bathtype.toml in each folder (not in folders inside it), in the order of
/// the folders and by name within one. The working directory is searched only if it was named; an empty path
/// is refused.
[[nodiscard]] FoundFiles find_plugin_files(const std::vector<std::filesystem::path>& folders);

}  // namespace bathwright::plugin_host
