// The state of a tank on a page.
#pragma once

#include <bathwright/sheets/tank_parts.hpp>

namespace bathwright::sheets {

/// Where a state comes from, and what was read there: the view is that of the working temperature.
struct StateRead {
  std::string from;  ///< "readings of n-07-morning.toml", "as at its aims"
  units::Celsius temperature;
  double pH = 0;
  std::vector<std::string> changed_since;  ///< what the log has of later changes, a sentence each
};

[[nodiscard]] Lines tank_sheet(const bath::Tank& tank, const bath::BathType& type, const bath::TankView& view,
                               const StateRead& read, const Units& units = {});

}  // namespace bathwright::sheets
