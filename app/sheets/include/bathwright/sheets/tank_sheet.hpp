// The state of a tank on a page.
#pragma once

#include <bathwright/sheets/tank_parts.hpp>

namespace bathwright::sheets {

/// state_from: "readings of n-07-morning.toml", "as at its aims".
[[nodiscard]] Lines tank_sheet(const bath::Tank& tank, const bath::BathType& type, const bath::TankView& view,
                               std::string_view state_from);

}  // namespace bathwright::sheets
