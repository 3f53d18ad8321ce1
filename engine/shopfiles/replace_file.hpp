// Puts a file in place of another, whole. Private to shopfiles.
#pragma once

#include <bathwright/base/result.hpp>
#include <string>
#include <string_view>

namespace bathwright::shopfiles {

/// Writes a temporary file beside `path`, flushes it, renames it and flushes the folder. Whatever happens,
/// the old or the new file stands there whole; success means the new one is on the disk.
Outcome replace_file(const std::string& path, std::string_view content);

}  // namespace bathwright::shopfiles
