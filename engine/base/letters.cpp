#include <bathwright/base/letters.hpp>
#include <cstdint>

namespace bathwright {

std::size_t letter_length(std::string_view text) {
  const auto byte = [&](std::size_t i) { return i < text.size() ? static_cast<std::uint8_t>(text[i]) : 0u; };
  const auto continues = [&](std::size_t i) { return (byte(i) & 0xC0u) == 0x80u; };
  if (text.empty()) return 0;
  const std::uint32_t lead = byte(0), second = byte(1);
  if (lead < 0x80) return 1;
  if (lead >= 0xC2 && lead <= 0xDF) return continues(1) ? 2 : 0;
  if (lead >= 0xE0 && lead <= 0xEF) {
    const bool overlong = lead == 0xE0 && second < 0xA0, surrogate = lead == 0xED && second > 0x9F;
    return continues(1) && continues(2) && !overlong && !surrogate ? 3 : 0;
  }
  if (lead >= 0xF0 && lead <= 0xF4) {
    const bool overlong = lead == 0xF0 && second < 0x90, too_large = lead == 0xF4 && second > 0x8F;
    return continues(1) && continues(2) && continues(3) && !overlong && !too_large ? 4 : 0;
  }
  return 0;
}

}  // namespace bathwright
