#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/path_sheet.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/sheets/tank_parts.hpp>
#include <bathwright/units/show.hpp>

namespace bathwright::sheets {
namespace {

/// A watched solid's distance from saturation at the working or the idle temperature.
struct Room {
  std::string solid;
  bool idle = false;
  double log10_room = 0;  ///< below 0 it forms
};

/// Those the data cover, always in the same order.
std::vector<Room> rooms(const bath::TankView& view) {
  std::vector<Room> all;
  for (const auto& h : view.headroom) {
    if (h.covers_working) all.push_back({h.solid, false, h.working_log10});
    if (h.covers_idle) all.push_back({h.solid, true, h.idle_log10});
  }
  return all;
}

std::string temperature(const bath::Tank& tank, bool idle) {
  return units::show(idle ? tank.idle_temperature : tank.temperature, "degC", 3);
}

/// "after 1.2 L sulfuric acid".
std::string after(const PathPoint& point, const std::vector<PathAddition>& additions) {
  const PathAddition& addition = additions[*point.addition];
  return "after " + figure(point.added, 3) + " " + addition.unit + " " + addition.name;
}

void solids_that_form(std::vector<std::string>& found, const bath::Tank& tank,
                      const std::vector<PathAddition>& additions, const std::vector<PathPoint>& points) {
  constexpr double seen = 0.005;  // what moves less shows in no table
  const auto start = rooms(points.front().view);
  for (std::size_t i = 0; i < start.size(); ++i) {
    const auto worse = std::ranges::find_if(points, [&](const PathPoint& point) {
      const double room = rooms(point.view)[i].log10_room;
      return room < 0 && room < start[i].log10_room - seen;
    });
    if (worse == points.end()) continue;
    const std::string solid = pretty(start[i].solid);
    const std::string now = start[i].log10_room < 0 ? " forms, more than before, " : " forms ";
    found.push_back(
        solid + now + after(*worse, additions) +
        (start[i].idle ? " when the tank cools to " + temperature(tank, true) : ", in the working tank"));
  }
}

double out_of_window(const Judged& judged) {
  return std::max({judged.aim->low - judged.found, judged.found - judged.aim->high, 0.0});
}

void windows_left(std::vector<std::string>& found, const bath::Tank& tank, const bath::BathType& type,
                  const std::vector<PathAddition>& additions, const std::vector<PathPoint>& points) {
  const auto judged = [&](const PathPoint& p) {
    return judge(tank, type, p.view.quantity_g_per_L, p.view.pH);
  };
  const auto start = judged(points.front());
  for (std::size_t i = 0; i < start.size(); ++i) {
    const double seen = start[i].unit.empty() ? 0.005 : 0.05;  // half of the last figure shown
    const auto worse = std::ranges::find_if(points, [&](const PathPoint& point) {
      return out_of_window(judged(point)[i]) > out_of_window(start[i]) + seen;
    });
    if (worse == points.end()) continue;
    const int decimals = start[i].unit.empty() ? 2 : 1;
    const bool was_in = out_of_window(start[i]) == 0;
    found.push_back(start[i].label +
                    (was_in ? " leaves its window of " : " moves further from its window of ") +
                    fixed(start[i].aim->low, decimals) + " to " + fixed(start[i].aim->high, decimals) +
                    (start[i].unit.empty() ? " " : " " + start[i].unit + " ") + after(*worse, additions));
  }
}

Lines table_of(const bath::Tank& tank, const PathAddition& addition, std::size_t index,
               const std::vector<PathPoint>& points) {
  Table table({{"added " + addition.unit, Align::number},
               {"pH", Align::number},
               {"volume L", Align::number},
               {"room log10", Align::number},
               {"nearest solid"}});
  const auto row = [&](double added, const bath::TankView& view) {
    const auto all = rooms(view);
    const auto nearest = std::ranges::min_element(all, {}, &Room::log10_room);
    table.add({figure(added, 3), fixed(view.pH, 2), fixed(view.volume_L, 1),
               nearest == all.end() ? "" : fixed(nearest->log10_room, 2),
               nearest == all.end() ? "" : pretty(nearest->solid) + ", " + temperature(tank, nearest->idle)});
  };
  for (std::size_t i = 0; i < points.size(); ++i) {
    if (points[i].addition != index) continue;
    if (points[i - 1].addition != index) row(0, points[i - 1].view);
    row(points[i].added, points[i].view);
  }
  return table.lines();
}

}  // namespace

std::vector<std::string> path_findings(const bath::Tank& tank, const bath::BathType& type,
                                       const std::vector<PathAddition>& additions,
                                       const std::vector<PathPoint>& points) {
  std::vector<std::string> found;
  solids_that_form(found, tank, additions, points);
  windows_left(found, tank, type, additions, points);
  const double brim_L = tank.working_volume.v + tank.freeboard.v;
  const auto over =
      std::ranges::find_if(points, [&](const PathPoint& point) { return point.view.volume_L > brim_L; });
  if (over != points.end())
    found.push_back(
        "the tank overflows " + (over->addition ? after(*over, additions) : "before any addition") + ": " +
        fixed(over->view.volume_L, 0) + " L, and it holds " + fixed(brim_L, 0) + " L with its freeboard");
  return found;
}

Lines path_sheet(const bath::Tank& tank, const std::vector<PathAddition>& additions,
                 const std::vector<PathPoint>& points, const std::vector<std::string>& changed_since,
                 const std::vector<std::string>& findings) {
  Lines lines;
  tank_title(lines, tank, points.front().view.volume_L, tank.temperature);
  stops(lines, changed_since);
  for (std::size_t i = 0; i < additions.size(); ++i) {
    heading(lines, additions[i].asked + " " + additions[i].name);
    append(lines, table_of(tank, additions[i], i, points));
  }
  lines.emplace_back();
  say(lines, "Room is log10 of how far the solid nearest to forming is from saturation; below 0 it forms.");
  for (const std::string& finding : findings) say(lines, "Stop: " + finding + ".", 6);
  const auto start = rooms(points.front().view);
  const bool formed_before = std::ranges::any_of(start, [](const Room& r) { return r.log10_room < 0; });
  if (findings.empty())
    say(lines, formed_before ? "What is below 0 was so before, and the addition makes nothing worse."
                             : "Nothing forms on the way, and every level keeps to its window.");
  return lines;
}

}  // namespace bathwright::sheets
