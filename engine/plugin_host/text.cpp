#include "text.hpp"

#include <algorithm>
#include <cstdint>

namespace bathwright::plugin_host {
namespace {

bool is_digit(char c) { return c >= '0' && c <= '9'; }
bool is_lower(char c) { return c >= 'a' && c <= 'z'; }

/// Length of the UTF-8 sequence at the start of `text`, 0 where it is none (The Unicode Standard, table 3-7).
std::size_t utf8_length(std::string_view text) {
  const auto byte = [&](std::size_t i) { return i < text.size() ? static_cast<std::uint8_t>(text[i]) : 0u; };
  const auto continues = [&](std::size_t i) { return (byte(i) & 0xC0u) == 0x80u; };
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

}  // namespace

std::string fault_of_text(std::string_view text) {
  while (!text.empty()) {
    const std::size_t length = utf8_length(text);
    if (length == 0) return "is not UTF-8";
    const auto c = static_cast<std::uint8_t>(text[0]);
    if (c < 0x20 || c == 0x7F) return "holds a control character";
    text.remove_prefix(length);
  }
  return {};
}

bool is_id(std::string_view text) {
  return !text.empty() && is_lower(text[0]) &&
         std::ranges::all_of(text, [](char c) { return is_lower(c) || is_digit(c) || c == '-'; });
}

bool is_dotted_version(std::string_view text) {
  bool after_digit = false;
  for (const char c : text) {
    if (!is_digit(c) && !(c == '.' && after_digit)) return false;
    after_digit = is_digit(c);
  }
  return after_digit;
}

}  // namespace bathwright::plugin_host
