// What is uncertain in a forecast: each input by name, with its uncertainty and its place in a draw.
#pragma once

#include <functional>

#include "prepared.hpp"

namespace bathwright::forecast {

struct Input {
  std::string name;
  double u_rel;
  std::function<double&(Draw&)> in;
};

/// Only those with an uncertainty above 0.
[[nodiscard]] std::vector<Input> uncertain_inputs(const Prepared& prepared, double u_level_rel);

/// A draw of ones, with a place for every input.
[[nodiscard]] Draw as_it_stands(const Prepared& prepared);

}  // namespace bathwright::forecast
