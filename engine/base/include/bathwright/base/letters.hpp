// Letters in UTF-8: whether they are, and a text shortened for a message without cutting one in two: half a
// letter is not UTF-8, and no JSON holds it.
#pragma once

#include <cstddef>
#include <string_view>

namespace bathwright {

/// The start of `text`, UTF-8, in at most `most_bytes`, ending with a whole letter.
[[nodiscard]] constexpr std::string_view whole_letters(std::string_view text, std::size_t most_bytes) {
  if (text.size() <= most_bytes) return text;
  while (most_bytes > 0 && (static_cast<unsigned char>(text[most_bytes]) & 0xC0) == 0x80) --most_bytes;
  return text.substr(0, most_bytes);
}

/// Bytes of the letter at the start of `text`; 0 where that is not well-formed UTF-8 (The Unicode Standard,
/// table 3-7), or nothing.
[[nodiscard]] std::size_t letter_length(std::string_view text);

}  // namespace bathwright
