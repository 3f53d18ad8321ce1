#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/path_sheet.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/sheets/tank_parts.hpp>
#include <bathwright/units/show.hpp>

namespace bathwright::sheets {

std::optional<Nearest> nearest_solid(const bath::TankView& view) {
  std::optional<Nearest> nearest;
  const auto consider = [&](const std::string& solid, bool idle, bool covers, double log10_room) {
    if (covers && (!nearest || log10_room < nearest->log10_room)) nearest = Nearest{solid, idle, log10_room};
  };
  for (const auto& h : view.headroom) {
    consider(h.solid, false, h.covers_working, h.working_log10);
    consider(h.solid, true, h.covers_idle, h.idle_log10);
  }
  return nearest;
}

Lines path_sheet(const bath::Tank& tank, const std::vector<PathPoint>& points) {
  Lines lines;
  tank_title(lines, tank, points.front().view.volume_L, tank.temperature);
  lines.emplace_back();
  Table table({{"chemical"},
               {"added kg", Align::number},
               {"pH", Align::number},
               {"volume L", Align::number},
               {"room log10", Align::number},
               {"nearest solid"}});
  const auto temperature = [&](bool idle) {
    return units::show(idle ? tank.idle_temperature : tank.temperature, "degC", 3);
  };
  std::optional<Nearest> first_over;
  for (const PathPoint& point : points) {
    const auto nearest = nearest_solid(point.view);
    if (!first_over && nearest && nearest->log10_room < 0) first_over = nearest;
    table.add({point.chemical.empty() ? "before" : point.chemical, fixed(point.added_kg, 2),
               fixed(point.view.pH, 2), fixed(point.view.volume_L, 1),
               nearest ? fixed(nearest->log10_room, 2) : "",
               nearest ? pretty(nearest->solid) + ", " + temperature(nearest->idle) : ""});
  }
  append(lines, table.lines());
  lines.emplace_back();
  say(lines, "Room is log10 of how far the solid nearest to forming is from saturation; below 0 it forms.");
  if (!first_over)
    say(lines, "Nothing forms on the way.");
  else if (first_over->idle)
    say(lines, pretty(first_over->solid) + " crystallises when the tank cools to " + temperature(true) +
                   ": add less, or keep it warm.");
  else
    say(lines, "Stop: " + pretty(first_over->solid) + " forms in the working tank.");
  return lines;
}

}  // namespace bathwright::sheets
