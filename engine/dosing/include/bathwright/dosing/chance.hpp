// How sure it is that an addition plan ends where it says: its end sampled from what is not known exactly
// about the tank, the lots and the weighing. Not for: making plans (plan.hpp); what work does to a tank over
// days (forecast/).
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <cstdint>
#include <functional>

namespace bathwright::dosing {

struct Plan;

/// One standard uncertainty of everything a plan rests on.
struct Spread {
  /// Covariance of the component amounts, in the order of Chemistry::components, and last of the volume, mol
  /// and L: row after row. What is found by charge balances the charges, and H^+ that is found by pH follows
  /// from it: their rows are not looked at. Empty: exact.
  std::vector<double> covariance = {};
  double u_pH = 0.03;  ///< of a reading after a two-point calibration (common practice)
  /// Of the assay of a lot whose certificate states none, relative (common practice: certificates give
  /// "99 % min." or half a percent either way).
  double u_assay_rel = 0.005;
  double u_weighed_rel = 0.005;  ///< of solids, on a platform scale (common practice)
  double u_measured_rel = 0.01;  ///< of liquids and of bath taken out, by jug or drum gauge (common practice)
  bool with_constants = true;    ///< those of equilibrium constants and interactions count too, first order
};

/// Spread::covariance where levels and volume were found independently of each other: the level stays what it
/// is, whatever the volume.
///   u_g_per_L  one standard uncertainty by quantity; of levels that follow from others only the first is
///              looked at, plain quantities before salt views
[[nodiscard]] std::vector<double> covariance_of(const bath::Chemistry& chemistry, const bath::TankState& now,
                                                const std::map<std::string, double>& u_g_per_L,
                                                double u_volume_L = 0);

struct Sampling {
  int samples = 2000;
  std::uint64_t seed = 1;
  unsigned threads = 1;  ///< the figures do not depend on them
};

/// 5, 50 and 95 % of the samples lie below.
struct Percentiles {
  double p05 = 0, p50 = 0, p95 = 0;
};

/// A controlled quantity, or the pH, at the end of a plan.
struct LevelChance {
  std::string quantity;  ///< as in the tank's aims
  double inside = 0;     ///< share of the samples inside the window
  Percentiles level;     ///< g/L, or pH
};

/// A watched solid at the end of a plan; slow ones are left out.
struct SolidChance {
  std::string solid;
  std::optional<double> working, idle;    ///< share of the samples in which it stays dissolved; nothing
                                          ///< where its constant does not cover the temperature
  Percentiles working_log10, idle_log10;  ///< headroom, log10
};

struct Chances {
  double in_every_window = 0;       ///< every level and the pH, together
  double all = 0;                   ///< that, and every solid dissolved at the working temperature
  std::vector<LevelChance> levels;  ///< in the order of the tank's aims
  std::vector<SolidChance> solids;
  int samples = 0;
  int unsolved = 0;  ///< samples whose equilibrium was not found; they count as outside
};

/// Below this a plan is no promise, and something should be analysed again.
inline constexpr double promised = 0.95;

/// What one more analysis of one thing would make of the chance.
struct SecondLook {
  std::string at;  ///< a component, "pH" or "volume"
  double in_every_window = 0;
};

/// Draws the tank (levels, volume, pH reading; an impossible one is drawn again), the assay and the amount of
/// each addition, carries the plan's additions out and solves every end. What additions cannot mend counts as
/// it is. Constants and interactions move pH and saturation to first order (speciation/sensitivity.hpp): with
/// the acid that the measured pH stands for moved along, they shift a pH by hundredths and a saturation index
/// in proportion, so that a solve of each draw would show nothing else.
///   plan       additions by stock id of the tank's shelf, and what is decanted before them
///   progress   is told the share done, on any thread, one at a time; false stops (Fault::refused)
/// The same seed gives the same bits. Fails where the tank or the end of the plan cannot be solved, and where
/// hardly any drawn tank is possible.
Result<Chances> chance_of(const bath::Tank& tank, const bath::Chemistry& chemistry,
                          const bath::TankState& now, const Plan& plan, const Spread& spread,
                          const Sampling& sampling, const std::function<bool(double)>& progress = {});

/// Of each thing that was measured and could be measured again: the chance with half its variance. The best
/// first. Fails as chance_of.
Result<std::vector<SecondLook>> second_looks(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                             const bath::TankState& now, const Plan& plan,
                                             const Spread& spread, const Sampling& sampling,
                                             const std::function<bool(double)>& progress = {});

}  // namespace bathwright::dosing
