// The demonstration shop: an invented one, to learn the program on.
#pragma once

#include <bathwright/base/result.hpp>
#include <filesystem>

namespace bathwright::work {

/// A copy of it that the user may work in, in the user's data folder; made where there is none yet. Fails
/// (io) where the shop is not beside the program or the copy cannot be made.
Result<std::filesystem::path> demonstration_shop();

}  // namespace bathwright::work
