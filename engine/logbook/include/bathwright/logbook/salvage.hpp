// What a damaged log still holds. Not for reading a sound log, and not for writing: the file stays as it is.
// Read next: logbook.hpp; engine/logbook/FORMAT.md, "A damaged file".
#pragma once

#include <filesystem>
#include <vector>

#include "bathwright/base/result.hpp"
#include "bathwright/logbook/entry.hpp"

namespace bathwright::logbook {

/// Every entry that stands whole on some page of the log at `path` or of its write-ahead log, by sequence.
/// Each proves itself by its hash; that none was left out or replaced, only a sound log can prove. Needs no
/// page but those that hold the entry. Problems: the file cannot be read (io).
[[nodiscard]] Result<std::vector<Entry>> salvage(const std::filesystem::path& path);

}  // namespace bathwright::logbook
