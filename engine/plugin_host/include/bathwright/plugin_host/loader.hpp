// One plugin file opened: its bath types, checked and copied. Not for: many files (registry.hpp).
#pragma once

#include <bathwright/bath/bath_type.hpp>
#include <filesystem>

namespace bathwright::plugin_host {

struct LoadedPlugin {
  std::filesystem::path file;
  std::vector<bath::BathType> types;  ///< at least one
  std::vector<std::string> notes;     ///< what the plugin had to say while loading
};

/// Opens a shared object and reads every bath type in it; the library stays open until the process ends. This
/// runs the plugin's code with the rights of the user. Fails, without running any, when the file is not a
/// regular file or it or its folder belongs to somebody else or can be written by group or others; and when
/// it is no plugin of this interface, refuses, or has a bath type that read_bath_type() refuses.
Result<LoadedPlugin> load(const std::filesystem::path& file);

}  // namespace bathwright::plugin_host
