// What happens along an addition, as a table.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <bathwright/sheets/text.hpp>

namespace bathwright::sheets {

/// The tank after so much of the present chemical was stirred in.
struct PathPoint {
  std::string chemical;  ///< stock id; empty: before the first
  double added_kg = 0;   ///< of this chemical
  double total_kg = 0;   ///< of all so far
  bath::TankView view;
};

[[nodiscard]] Lines path_sheet(const bath::Tank& tank, const std::vector<PathPoint>& points);

/// The watched solid nearest to saturation, or furthest above it, at the working or idle temperature.
struct Nearest {
  std::string solid;
  bool idle = false;
  double log10_room = 0;
};
[[nodiscard]] std::optional<Nearest> nearest_solid(const bath::TankView& view);

}  // namespace bathwright::sheets
