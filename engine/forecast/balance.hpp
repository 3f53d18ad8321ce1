// What a policy does to the amounts in a tank, hour by hour: rates compiled once, then exact steps.
#pragma once

#include <bathwright/forecast/compiled.hpp>
#include <bathwright/forecast/forecast.hpp>

namespace bathwright::forecast {

/// Rates over a stretch of hours in which nothing changes but the amounts.
struct Rates {
  double loss_per_h = 0;                             ///< k: share of the tank that leaves in an hour
  Amounts in_per_h;                                  ///< p
  double drag_out_L = 0, bleed_L = 0, top_up_L = 0;  ///< per hour
  double cost = 0, deposited_mol = 0;                ///< per hour
};

Rates rates(const bath::Tank& tank, const Compiled& compiled, const Policy& policy, const Draw& draw,
            bool works);

/// What a stretch did, for the balance of the whole run.
struct Moved {
  std::vector<double> in_mol, out_mol;
};

/// The exact step over `hours`, then water to the mark. Fails when the salts leave no room for water.
Outcome advance(bath::TankState& state, const Rates& rates, double hours, double volume_L,
                const bath::Chemistry& chemistry, Moved& moved);

/// Water until the tank stands at `volume_L`.
Outcome fill(bath::TankState& state, double volume_L, const bath::Chemistry& chemistry);

}  // namespace bathwright::forecast
