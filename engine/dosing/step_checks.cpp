#include "step_checks.hpp"

#include <algorithm>
#include <bathwright/units/show.hpp>
#include <cmath>

namespace bathwright::dosing {
namespace {

using bath::BathType;
using bath::Chemistry;
using bath::Headroom;
using bath::Tank;
using bath::TankView;
using units::significant;

std::string degrees(units::Celsius t) { return significant(t.v, 3) + " degC"; }

std::string check_name(const std::string& solid, units::Celsius t) { return solid + " at " + degrees(t); }

constexpr double no_worse = 0.02;  // log units, 5 % of saturation: less than any constant is known to

/// One check per watched solid and temperature. What is beyond saturation but within its limit was so before,
/// or is so at the aims.
void check_solids(const Chemistry& chemistry, const std::vector<SolidLimit>& limits, const TankView& view,
                  std::vector<Check>& checks) {
  for (const SolidLimit& limit : limits) {
    const auto room = std::ranges::find(view.headroom, limit.solid, &Headroom::solid);
    if (room == view.headroom.end()) continue;
    const auto judge = [&](double log10_room, double farthest, bool covered, units::Celsius t, bool stops) {
      if (!covered) return;
      const bool ok = log10_room >= 0, farther = -log10_room > farthest + no_worse;
      std::string detail = significant(100 * std::pow(10, -log10_room), 3) + " % of saturation";
      if (!ok && !farther) detail += ", no more than before the additions or at the aims";
      if (!ok && !room->sign_in_tank.empty()) detail += ": " + room->sign_in_tank;
      checks.push_back({check_name(limit.solid, t), ok, stops && farther, std::move(detail)});
    };
    judge(room->working_log10, limit.working, room->covers_working, chemistry.working_temperature(), true);
    judge(room->idle_log10, limit.idle, room->covers_idle, chemistry.idle_temperature(), false);
  }
}

void check_volume(const Tank& tank, const TankView& view, std::vector<Check>& checks) {
  const double brim = tank.working_volume.v + tank.freeboard.v;
  checks.push_back({"freeboard", view.volume_L <= brim, true,
                    significant(view.volume_L, 5) + " L of " + significant(brim, 5) + " L to the brim"});
}

/// The bath type's hard limits on what it holds, sodium and calcium among them; a step may not cross one, or
/// go farther beyond it than the tank already is.
void check_limits(const BathType& type, const TankView& before, const TankView& view,
                  std::vector<Check>& checks) {
  for (std::size_t q = 0; q < type.quantities.size(); ++q)
    for (const bath::Window& window : type.windows) {
      if (window.subject != type.quantities[q].id) continue;
      const double level = view.quantity_g_per_L[q], was = before.quantity_g_per_L[q];
      const bool over = level > window.stop_high && level > was,
                 under = level < window.stop_low && level < was;
      if (over || under)
        checks.push_back({type.quantities[q].label, false, true,
                          significant(level, 3) + " g/L, stop " + (over ? "above " : "below ") +
                              significant(over ? window.stop_high : window.stop_low, 3)});
    }
}

/// A tank that starts outside may stay there until its pH is trimmed, but no step may take it farther out.
void check_pH(const Tank& tank, const BathType& type, double pH_at_start, const TankView& view,
              std::vector<Check>& checks) {
  double low = -HUGE_VAL, high = HUGE_VAL;
  if (const bath::Aim* aim = tank.aim("pH")) low = aim->low, high = aim->high;
  for (const bath::Window& window : type.windows)
    if (window.subject == "pH") {
      low = std::isnan(window.stop_low) ? std::min(low, window.low) : window.stop_low;
      high = std::isnan(window.stop_high) ? std::max(high, window.high) : window.stop_high;
    }
  constexpr double margin = 0.1;  // salts move the pH a little without adding acid
  const bool ok =
      !(view.pH < std::min(low, pH_at_start - margin)) && !(view.pH > std::max(high, pH_at_start + margin));
  std::string detail = "pH " + significant(view.pH, 3);
  if (std::isfinite(low)) detail += ", stop below " + significant(low, 3);
  if (std::isfinite(high))
    detail += (std::isfinite(low) ? " and above " : ", stop above ") + significant(high, 3);
  checks.push_back({std::string(pH_on_the_way), ok, true, std::move(detail)});
}

}  // namespace

void check_tank(const Tank& tank, const Chemistry& chemistry, const TankView& start,
                const std::vector<SolidLimit>& limits, const TankView& after, std::vector<Check>& checks) {
  check_volume(tank, after, checks);
  check_pH(tank, chemistry.type(), start.pH, after, checks);
  check_limits(chemistry.type(), start, after, checks);
  check_solids(chemistry, limits, after, checks);
}

void check_idle_end(const Chemistry& chemistry, const std::vector<SolidLimit>& limits,
                    std::vector<Check>& checks, const TankView& end) {
  for (const SolidLimit& limit : limits) {
    const auto room = std::ranges::find(end.headroom, limit.solid, &Headroom::solid);
    if (room == end.headroom.end() || !room->covers_idle || -room->idle_log10 <= limit.idle + no_worse)
      continue;
    const auto check =
        std::ranges::find(checks, check_name(limit.solid, chemistry.idle_temperature()), &Check::name);
    if (check != checks.end()) check->stops = !check->ok;
  }
}

void check_warming(const Tank& tank, double warms_C, std::vector<Check>& checks) {
  constexpr double told = 0.1;
  if (warms_C < told) return;
  checks.push_back({"warming", warms_C <= tank.dosing.largest_warming_C * (1 + 1e-9), true,
                    "the tank warms by " + significant(warms_C, 2) + " degC, at most " +
                        significant(tank.dosing.largest_warming_C, 2) + " degC at a time"});
}

}  // namespace bathwright::dosing
