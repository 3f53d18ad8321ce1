// "06:00" and "Mon" as numbers. Private to shifts.
#pragma once

#include <chrono>
#include <optional>
#include <span>
#include <string>
#include <string_view>

namespace bathwright::shifts {

/// Minutes after midnight of a time from "00:00" to "23:59", two digits each.
[[nodiscard]] std::optional<std::chrono::minutes> clock_time(std::string_view text);

[[nodiscard]] std::string clock_text(std::chrono::minutes after_midnight);

/// "Mon" to "Sun", in that order.
[[nodiscard]] std::span<const std::string> day_names();

/// The place in day_names().
[[nodiscard]] std::optional<int> day_number(std::string_view name);

}  // namespace bathwright::shifts
