#include "text.hpp"

#include <algorithm>
#include <bathwright/base/letters.hpp>
#include <cstdint>

namespace bathwright::plugin_host {
namespace {

bool is_digit(char c) { return c >= '0' && c <= '9'; }
bool is_lower(char c) { return c >= 'a' && c <= 'z'; }

}  // namespace

std::string fault_of_text(std::string_view text) {
  while (!text.empty()) {
    const std::size_t length = letter_length(text);
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
