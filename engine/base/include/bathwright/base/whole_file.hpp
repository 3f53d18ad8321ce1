// A file that is there whole or not at all.
#pragma once

#include <bathwright/base/result.hpp>
#include <filesystem>
#include <string_view>

namespace bathwright {

/// Writes a neighbour and renames it; makes the folder. Fails (io).
Outcome write_whole(const std::filesystem::path& file, std::string_view contents);

}  // namespace bathwright
