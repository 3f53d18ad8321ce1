// What happens where a portion goes in, before it is stirred away.
#pragma once

#include <bathwright/dosing/plan.hpp>

#include "gases.hpp"

namespace bathwright::dosing {

/// The whole portion, as it is poured, meets only a share of the tank (DosingHabits::mixing_share). That mixture is
/// brought to equilibrium at the working temperature, and the checks say what it does there:
///   solids  to watch: what forms there dissolves again where the stirred tank is below its saturation, and
///   where it is
///           not, the tank's own check stops the step
///   pH      to watch, where it leaves the stop limits by more than a unit
///   gas     see gases.hpp
/// A mixture that cannot be solved is said to be unchecked. `before` is the tank before the portion,
/// `portion` what is poured, with the water it was dissolved in.
void check_dosing_point(const bath::Tank& tank, const bath::Chemistry& chemistry,
                        const bath::TankState& before, const bath::TankState& portion,
                        const speciation::Equilibrium& tank_before, const speciation::Equilibrium& tank_after,
                        const matter::StockChemical& stock, const GasRule& gases, std::vector<Check>& checks);

}  // namespace bathwright::dosing
