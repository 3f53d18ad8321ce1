// How much a portion warms the tank.
#pragma once

#include <bathwright/bath/tank.hpp>

namespace bathwright::dosing {

/// Heat given off by a kg of a product when it meets much water, kJ; 0 where the table
/// (dosing/heat_of_dilution.csv) has no row, negative where it cools. Neutralisation is not in it.
[[nodiscard]] double heat_kJ_per_kg(const matter::StockChemical& stock);

/// Rise of the whole tank, degC, by so much of a product: all of its heat stays, and only the water takes it
/// up.
[[nodiscard]] double warming_C(const matter::StockChemical& stock, double kg, const bath::TankState& state);

inline constexpr double water_kJ_per_kg_C = 4.18;

}  // namespace bathwright::dosing
