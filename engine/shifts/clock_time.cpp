#include "clock_time.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>

namespace bathwright::shifts {

std::optional<std::chrono::minutes> clock_time(std::string_view text) {
  const auto digit = [&](std::size_t at) { return text[at] >= '0' && text[at] <= '9'; };
  if (text.size() != 5 || text[2] != ':' || !digit(0) || !digit(1) || !digit(3) || !digit(4)) return {};
  const int hour = (text[0] - '0') * 10 + (text[1] - '0'), minute = (text[3] - '0') * 10 + (text[4] - '0');
  if (hour > 23 || minute > 59) return {};
  return std::chrono::minutes(hour * 60 + minute);
}

std::string clock_text(std::chrono::minutes after_midnight) {
  return fmt::format("{:02}:{:02}", after_midnight.count() / 60, after_midnight.count() % 60);
}

std::span<const std::string> day_names() {
  static const std::array<std::string, 7> names = {"Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun"};
  return names;
}

std::optional<int> day_number(std::string_view name) {
  const auto names = day_names();
  const auto found = std::ranges::find(names, name);
  if (found == names.end()) return {};
  return static_cast<int>(found - names.begin());
}

}  // namespace bathwright::shifts
