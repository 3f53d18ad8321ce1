// Where a level stands against its window, in the words of the sheets.
#pragma once

#include <bathwright/bath/tank.hpp>
#include <string_view>

namespace bathwright::sheets {

enum class Standing : std::uint8_t { not_controlled, in_window, low, high, stop };

/// "in window", "below window", "above window", "stop"; "" where nothing is controlled.
[[nodiscard]] std::string_view words(Standing standing);

/// A level against the tank's window and the bath type's stop limits.
[[nodiscard]] Standing standing(const bath::Tank& tank, const bath::BathType& type, std::string_view quantity,
                                double value);

/// A figure that the tank does not aim at, an indicator say, against the bath type's window.
[[nodiscard]] Standing standing(const bath::BathType& type, std::string_view subject, double value);

/// Every controlled quantity and pH, in the order of the tank's aims; a chemical of the shelf by its name
/// there.
struct Judged {
  const bath::Aim* aim;
  std::string label, unit;
  double found = 0;
  Standing standing = Standing::not_controlled;
};
[[nodiscard]] std::vector<Judged> judge(const bath::Tank& tank, const bath::BathType& type,
                                        const std::vector<double>& quantity_g_per_L, double pH);

}  // namespace bathwright::sheets
