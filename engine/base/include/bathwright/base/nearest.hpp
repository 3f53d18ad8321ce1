// "Did you mean ...": the nearest of the valid words, for messages about an unknown key or name.
#pragma once

#include <optional>
#include <span>
#include <string>
#include <string_view>

namespace bathwright {

/// The candidate with the smallest edit distance to `word` (case ignored), or nothing when none is within
/// a third of the word's length plus one.
[[nodiscard]] std::optional<std::string> nearest(std::string_view word, std::span<const std::string> candidates);

}  // namespace bathwright
