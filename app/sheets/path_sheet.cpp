#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/path_sheet.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/sheets/tank_parts.hpp>

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

std::string temperature(const bath::Tank& tank, bool idle, const Units& units) {
  return units.degrees(idle ? tank.idle_temperature : tank.temperature);
}

/// "after 1.2 L sulfuric acid".
std::string after(const PathPoint& point, const std::vector<PathAddition>& additions, const Units& units) {
  const PathAddition& addition = additions[*point.addition];
  const AmountUnit unit = units.amount_unit(addition.unit);
  return "after " + figure(point.added * unit.per_one, 3) + " " + unit.symbol + " " + addition.name;
}

void solids_that_form(std::vector<std::string>& found, const bath::Tank& tank,
                      const std::vector<PathAddition>& additions, const std::vector<PathPoint>& points,
                      const Units& units) {
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
    found.push_back(solid + now + after(*worse, additions, units) +
                    (start[i].idle ? " when the tank cools to " + temperature(tank, true, units)
                                   : ", in the working tank"));
  }
}

double out_of_window(const Judged& judged) {
  return std::max({judged.aim->low - judged.found, judged.found - judged.aim->high, 0.0});
}

void windows_left(std::vector<std::string>& found, const bath::Tank& tank, const bath::BathType& type,
                  const std::vector<PathAddition>& additions, const std::vector<PathPoint>& points,
                  const Units& units) {
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
    const LevelUnit unit = unit_of(start[i], type, units, units.medium_of(worse->view));
    const int decimals = start[i].unit.empty() ? 2 : unit.decimals(1);
    const bool was_in = out_of_window(start[i]) == 0;
    found.push_back(
        start[i].label + (was_in ? " leaves its window of " : " moves further from its window of ") +
        fixed(unit.of(start[i].aim->low), decimals) + " to " + fixed(unit.of(start[i].aim->high), decimals) +
        (unit.symbol.empty() ? " " : " " + unit.symbol + " ") + after(*worse, additions, units));
  }
}

Lines table_of(const bath::Tank& tank, const PathAddition& addition, std::size_t index,
               const std::vector<PathPoint>& points, const Units& units) {
  const AmountUnit unit = units.amount_unit(addition.unit);
  Table table({{"added " + unit.symbol, Align::number},
               {"pH", Align::number},
               {"volume " + units.volume_symbol(), Align::number},
               {"room log10", Align::number},
               {"nearest solid"}});
  const auto row = [&](double added, const bath::TankView& view) {
    const auto all = rooms(view);
    const auto nearest = std::ranges::min_element(all, {}, &Room::log10_room);
    table.add({figure(added * unit.per_one, 3), fixed(view.pH, 2), units.volume_figure(view.volume_L, 1),
               nearest == all.end() ? "" : fixed(nearest->log10_room, 2),
               nearest == all.end()
                   ? ""
                   : pretty(nearest->solid) + ", " + temperature(tank, nearest->idle, units)});
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
                                       const std::vector<PathPoint>& points, const Units& units) {
  std::vector<std::string> found;
  solids_that_form(found, tank, additions, points, units);
  windows_left(found, tank, type, additions, points, units);
  const double brim_L = tank.working_volume.v + tank.freeboard.v;
  const auto over =
      std::ranges::find_if(points, [&](const PathPoint& point) { return point.view.volume_L > brim_L; });
  if (over != points.end())
    found.push_back(
        "the tank overflows " + (over->addition ? after(*over, additions, units) : "before any addition") +
        ": " + units.volume_figure(over->view.volume_L) + " " + units.volume_symbol() + ", and it holds " +
        units.volume_figure(brim_L) + " " + units.volume_symbol() + " with its freeboard");
  return found;
}

Lines path_sheet(const bath::Tank& tank, const std::vector<PathAddition>& additions,
                 const std::vector<PathPoint>& points, const std::vector<std::string>& changed_since,
                 const std::vector<std::string>& findings, const Units& units) {
  Lines lines;
  tank_title(lines, tank, points.front().view.volume_L, tank.temperature, units);
  stops(lines, changed_since);
  for (std::size_t i = 0; i < additions.size(); ++i) {
    heading(lines, additions[i].asked + " " + additions[i].name);
    append(lines, table_of(tank, additions[i], i, points, units));
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
