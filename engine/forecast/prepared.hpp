// What a forecast holds: the tank, its chemistry and its policy, made ready to run.
#pragma once

#include <bathwright/forecast/forecast.hpp>

#include "balance.hpp"
#include "flow.hpp"

namespace bathwright::forecast {

struct Prepared {
  bath::Tank tank;
  bath::Chemistry chemistry;
  Policy policy;
  Compiled compiled;                 ///< points into the three above
  Vessels vessels;                   ///< of the policy
  std::vector<std::size_t> watched;  ///< positions in the system's solids
  /// Deposited metals: position in the quantities and mol of it in the tank at its aim.
  struct Metal {
    std::size_t quantity;
    double at_aim_mol;  ///< 0: no aim
  };
  std::vector<Metal> metals;
  /// What the levels at the start are drawn of: positions of the quantities that are no salt views, and what
  /// a change of each of them by a mol is in component mol (least squares; columns are quantities).
  std::vector<std::size_t> levels;
  Eigen::MatrixXd mol_per_level_mol;
  double most_ionic_strength = 0;                       ///< mol/kg; beyond it nothing is judged
  std::vector<std::string> species_names, solid_names;  ///< of the system, for `rate`
};

/// As Forecast::prepare. Its bleed and the amounts of its work may be changed afterwards: what is compiled
/// does not hold them.
[[nodiscard]] Result<std::shared_ptr<Prepared>> prepare(const bath::Tank& tank,
                                                        const bath::Chemistry& chemistry,
                                                        const Policy& policy);

/// The first metal that has an aim: turnovers are counted in it. nullptr: none.
[[nodiscard]] const Prepared::Metal* counted_metal(const Prepared& prepared);

}  // namespace bathwright::forecast
