// Where bath types are looked for. Not for: opening them (registry.hpp).
#pragma once

#include <bathwright/base/result.hpp>
#include <filesystem>
#include <vector>

namespace bathwright::plugin_host {

inline constexpr const char* plugin_suffix = ".bathtype.so";
inline constexpr const char* data_suffix = ".bathtype.toml";  ///< a bath type that runs no code

/// How a folder came to be searched, in the order of search.
enum class Origin : std::uint8_t {
  program,  ///< beside the running program, or installed with it
  user,     ///< the user's data folder; need not be there
  named     ///< on the command line
};

struct SearchFolder {
  std::filesystem::path path;
  Origin origin = Origin::named;
};

/// The folders of the running program that exist: "plugins" beside it (a build tree) and
/// "../lib/bathwright/plugins" from there (an installed tree). Absolute paths.
[[nodiscard]] std::vector<SearchFolder> program_folders();

/// bathwright_probe: beside the running program, or "../libexec/bathwright" from there. Empty if neither is.
[[nodiscard]] std::filesystem::path probe_program();

struct FoundFile {
  std::filesystem::path path;
  Origin origin = Origin::named;
};

struct FoundFiles {
  std::vector<FoundFile> files;
  Problems problems;  ///< a folder that is not there or cannot be read
};

/// Files ending in .bathtype.so or .bathtype.toml in each folder (not in folders inside it), in the order of
/// the folders and by name within one. The working directory is searched only if it was named; an empty path
/// is refused.
[[nodiscard]] FoundFiles find_plugin_files(const std::vector<SearchFolder>& folders);

}  // namespace bathwright::plugin_host
