// Whether a file may be run as a plugin: nobody but the user and root can have changed it.
#pragma once

#include <bathwright/base/result.hpp>
#include <filesystem>

namespace bathwright::plugin_host {

/// Fails for anything but a regular file of at most 16 MiB (a symbolic link as well), and when the file or
/// the folder it is in belongs to another user or can be written by group or others.
Outcome may_be_run(const std::filesystem::path& file);

}  // namespace bathwright::plugin_host
