// Promises that every reader makes (base/result.hpp), for the targets to hold it to.
#pragma once

#include <bathwright/base/result.hpp>
#include <string_view>

#include "targets.hpp"

namespace fuzz {

/// Each problem says what was found, at `where`, on one line of bounded length, in UTF-8 where the input is
/// UTF-8.
BrokenPromise in_words(const bathwright::Problems& problems, std::string_view where, std::string_view input);

[[nodiscard]] bool is_utf8(std::string_view text);

}  // namespace fuzz
