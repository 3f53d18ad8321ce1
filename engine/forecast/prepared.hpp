// What a forecast holds: the tank, its chemistry and its policy, made ready to run.
#pragma once

#include <bathwright/forecast/forecast.hpp>

#include "balance.hpp"

namespace bathwright::forecast {

struct Prepared {
  bath::Tank tank;
  bath::Chemistry chemistry;
  Policy policy;
  Compiled compiled;                 ///< points into the three above
  std::vector<std::size_t> watched;  ///< positions in the system's solids
  double metal_at_aim_mol = 0;       ///< of the deposited metal, in the tank at its aim
};

}  // namespace bathwright::forecast
