// The interlocks case by case, on the demonstration tanks.
#pragma once

#include <bathwright/dosing/check_plan.hpp>
#include <string>
#include <vector>

namespace interlock_table {

struct Case {
  std::string rule, tank, expect, by;
  std::vector<std::pair<std::string, double>> levels;     ///< id, g/L, where not at the aims
  std::vector<std::pair<std::string, double>> additions;  ///< id, kg
};
[[nodiscard]] std::vector<Case> read_cases();

struct Outcome {
  std::string got;   ///< "refused", "stopped", "pass"
  std::string said;  ///< the refusal, or the check that stops
  bool as_expected = false;
};
[[nodiscard]] Outcome try_case(const Case& one);

/// What an interlock says of a portion of each chemical on the shelf of a demonstration tank at its aims.
struct OwnAddition {
  std::string tank, chemical;
  double kg = 0;
  std::string stopped_by;  ///< empty: by nothing
};
[[nodiscard]] std::vector<std::string> demonstration_tanks();  ///< "n-07"
[[nodiscard]] std::vector<OwnAddition> own_additions(const std::string& tank);

/// The gases over a tank at its aims, against their levels.
struct NormalGas {
  std::string tank, gas;
  double ppm = 0, caution_ppm = 0, never_ppm = 0;
};
[[nodiscard]] std::vector<NormalGas> normal_gases(const std::string& tank);

}  // namespace interlock_table
