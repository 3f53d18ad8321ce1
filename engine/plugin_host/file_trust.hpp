// Whether nobody but the user (and root) can change a file.
#pragma once

#include <bathwright/base/result.hpp>
#include <filesystem>

#include "descriptor.hpp"

namespace bathwright::plugin_host {

/// Which folders count beside the one a file stands in.
enum class Above {
  to_the_root,  ///< every one, up to /
  not_looked_at
};

inline constexpr std::size_t largest_plugin_bytes = 16 << 20;

/// Opens a file to read. Fails with every reason: it is a symbolic link, no regular file or larger than
/// `largest_bytes`; it, its folder or a folder above belongs to somebody else or can be written by group or
/// others. A folder above that others can write is let pass with the sticky bit (/tmp): they can rename or
/// remove only what is theirs there, and the next folder down is not. The folder of the file itself is not
/// let pass, for there they could put a file beside it.
Result<Descriptor> open_trusted(const std::filesystem::path& file, std::size_t largest_bytes, Above above);

/// Makes the folder, for this user alone, where it is not there; fails where others could change it.
Outcome own_folder(const std::filesystem::path& folder);

}  // namespace bathwright::plugin_host
