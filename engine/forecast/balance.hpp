// What a policy does to the amounts in a tank over a stretch of hours. Read next: flow.hpp, which steps with
// it.
#pragma once

#include <bathwright/forecast/compiled.hpp>
#include <bathwright/forecast/forecast.hpp>

namespace bathwright::forecast {

/// g per unit of each effect of each use that asks for the state; empty for the others.
using EffectsNow = std::vector<std::vector<double>>;

/// Rates over a stretch of hours in which nothing changes but the amounts; per hour where nothing is said.
struct Rates {
  double drag_out_L = 0, bleed_L = 0, drag_in_L = 0;
  bool works = false;
  Amounts in;         ///< of all that does not go with the water that fills up; evaporation taken off
  Amounts water;      ///< per litre of water: what its ions are
  Amounts with_fill;  ///< per litre of water that fills the tank up: the feeds that go with it
  double cost = 0, cost_per_fill_L = 0;
  std::vector<double> feed_kg, feed_kg_per_fill_L;  ///< per feed
  std::vector<double> deposited_mol;                ///< per use
  std::vector<Amounts> by_use;                      ///< of `in`
  double carbon_dioxide_g = 0;
};

Rates rates(const bath::Tank& tank, const Compiled& compiled, const Policy& policy, const Draw& draw,
            bool works, std::size_t water, const EffectsNow& effects);

}  // namespace bathwright::forecast
