#include "promises.hpp"

#include <algorithm>

namespace fuzz {

BrokenPromise in_words(const bathwright::Problems& problems, std::string_view where, std::string_view input) {
  if (problems.empty()) return "refused without a problem";
  const auto is_control = [](char c) { return (c >= 0 && c < 0x20) || c == 0x7f; };
  for (const bathwright::Problem& problem : problems) {
    const std::string message = problem.text();
    if (problem.what.empty()) return "a problem that does not say what was found";
    if (!problem.where.starts_with(where)) return "a problem without its place: " + message;
    if (message.size() > 2000) return "a message of " + std::to_string(message.size()) + " bytes";
    if (std::ranges::any_of(message, is_control) && std::ranges::none_of(input, is_control))
      return "a control character in: " + message;
    if (is_utf8(input) && !is_utf8(message)) return "a letter cut in two in: " + message;
  }
  return {};
}

// Whole sequences only; overlong and surrogate forms are not told apart, since no reader makes letters.
bool is_utf8(std::string_view text) {
  std::size_t following = 0;
  for (const char letter : text) {
    const auto byte = static_cast<unsigned char>(letter);
    const bool continues = (byte & 0xC0) == 0x80;
    if (continues != (following > 0)) return false;
    if (continues) {
      --following;
    } else if (byte >= 0xC0) {
      following = byte < 0xE0 ? 1 : byte < 0xF0 ? 2 : 3;
    }
  }
  return following == 0;
}

}  // namespace fuzz
