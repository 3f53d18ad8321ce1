// The demonstration tanks, each pushed away from its aims and planned back.
#pragma once

#include <optional>
#include <string>
#include <vector>

namespace disturbed {

/// In rising distance from what was asked.
enum class Outcome {
  met,         ///< every aim within 0.5 %, pH within 0.02
  thinner,     ///< met, but for by-products and contaminants that stand lower still
  no_source,   ///< inside every window; nothing on the shelf brings what ends below its aim
  too_strong,  ///< inside every window, but something stands above its aim that only taking bath out lowers
  off,         ///< inside every window, but farther from an aim than that
  infeasible,  ///< a window is missed or a check stops a step; `why` says which
  refused      ///< no state or no plan; `why` says what was answered
};

/// Where one plan ends.
struct Ended {
  Outcome outcome = Outcome::refused;
  std::string kind;           ///< of the plan
  std::string worst;          ///< the aim that ends farthest off
  double worst_per_cent = 0;  ///< of the aim
  std::optional<double> pH_error;
  int steps = 0;
  double decant_L = 0;
  double against_own_prediction = 0;  ///< largest relative difference to the levels the plan itself foresees
  double element_defect = 0;
  std::string why;
};

/// One tank, one push.
struct Case {
  std::string tank;  ///< "baths/n-07.toml"
  std::string push;  ///< "Ni^2+ -15 %", "all +15 %"
  Ended best;        ///< of the plan that is offered first
  Ended nearest;     ///< of that which comes nearest to the aims, taking bath out if it must
  int plans = 0;
  double milliseconds = 0;  ///< of processor time, the whole sheet with all its plans
};

[[nodiscard]] const char* words(Outcome outcome);

/// Every push of every tank whose file name is in `only` (empty: all of them).
[[nodiscard]] std::vector<Case> push_all(const std::vector<std::string>& only = {});

[[nodiscard]] std::string report(const std::vector<Case>& cases);

}  // namespace disturbed
