// What the window keeps from day to day: the shop's folder, the look, the units.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/sheets/shown_units.hpp>
#include <filesystem>
#include <string>

namespace bathwright::desktop {

struct Settings {
  std::filesystem::path shop;  ///< empty: the first start
  float scale = 0;             ///< of letters and spaces, 1 to 2; 0: as the display asks
  bool dark = false;
  std::string print_command = "lp";
  bool letter = false;  ///< slips and hand-overs are printed on Letter, else on A4
  sheets::UnitNames units;
};

/// As kept by the last run; the defaults where nothing was kept or it cannot be read.
[[nodiscard]] Settings kept_settings(const std::filesystem::path& file);

/// Whole or not at all. Fails (io) where it cannot be written.
Outcome keep(const std::filesystem::path& file, const Settings& settings);

}  // namespace bathwright::desktop
