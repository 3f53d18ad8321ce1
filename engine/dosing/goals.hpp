// What a plan is measured by: how far from each aim it may end, and what every step away counts. Not for: the
// search (settle.hpp).
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <cmath>
#include <set>

#include "solubility.hpp"

namespace bathwright::dosing {

/// A stretch of deviations from a goal, and what each unit of it counts.
struct Stretch {
  double width;   ///< in units of the goal; HUGE_VAL for the last
  double weight;  ///< rises from stretch to stretch
};

/// Something a plan should end at: the level of a quantity, the pH, the saturation of a solid, the volume.
struct Goal {
  enum class Of : std::uint8_t { level, pH, solid, volume } of = Of::level;
  const bath::Quantity* quantity = nullptr;  ///< of a level
  double value = 0;                          ///< g/L, pH, log10 of saturation, or L
  double unit = 1;                           ///< what counts as 1: the aim in g/L, a pH unit, the mark in L
  std::vector<Stretch> below, above;         ///< outward from `value`
  double low = 0, high = 0;                  ///< what must hold; +-HUGE_VAL where nothing must
  std::size_t solid = 0;                     ///< of a saturation: in the system
  bool idle = false;                         ///< at the idle temperature
  std::string dissolved;                     ///< of a saturation: "H3BO3 dissolved at 18 degC"
};

/// What a deviation (in units) counts.
[[nodiscard]] double penalty(const Goal& goal, double deviation);

/// Weights, for a deviation of 100 % or one pH unit, each well above the next: what it costs comes last.
namespace weight {
inline constexpr double spilled = 1e4;        ///< over the brim
inline constexpr double hard_limit = 1e3;     ///< beyond a limit of the bath type, or farther than today
inline constexpr double outside = 100;        ///< beyond a window
inline constexpr double crystallises = 100;   ///< when the tank cools, per log10; hot it is a hard limit
inline constexpr double off_aim = 1;          ///< inside the window, off the aim
inline constexpr double over_mark = 0.1;      ///< standing above the mark, under the brim
inline constexpr double decant = 0.2;         ///< a tankful thrown away
inline constexpr double stays_strong = 0.02;  ///< above its aim because it is so today
inline constexpr double under_mark = 0.01;
inline constexpr double stays_weak = 0.003;  ///< below its aim, and nothing on the shelf brings it
inline constexpr double price = 1e-3;  ///< all aims raised from nothing by the cheapest that raises each
}  // namespace weight

/// Share of the freeboard that a plan may fill: the last litres are for the rounding.
inline constexpr double filled_freeboard = 0.98;

/// How a plan is to differ from others.
struct GoalRules {
  std::vector<bath::Aim> aims;              ///< what to go for
  std::map<std::string, double> dead_band;  ///< by aim: within this of it nothing is corrected; g/L or pH
  std::set<std::string> without_source;     ///< aims at what nothing on the shelf brings
  double pH_today = 0;
  double target_L = 0;       ///< where the tank should stand
  bool to_the_mark = false;  ///< rather take bath out than stand above target_L
  bool bring_down = false;   ///< what is above its aim today is to come down to it too
};

/// One goal for each aim, one for each hard limit of the bath type that the additions could cross, one for
/// each solid within reach at each temperature, and the volume. A level or limit that is beyond its window
/// today is asked to stay where it is at most.
[[nodiscard]] std::vector<Goal> goals_of(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                         const bath::TankState& now, const std::vector<SolidLimit>& solids,
                                         const GoalRules& rules);

}  // namespace bathwright::dosing
