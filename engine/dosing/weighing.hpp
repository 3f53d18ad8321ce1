// What a shop's scales and jugs can tell apart.
#pragma once

#include <bathwright/matter/stock.hpp>

namespace bathwright::dosing {

/// The amount nearest to `kg` that can be weighed (solids) or measured (liquids) out: to 0.1 g or mL below
/// 0.1 kg or L, to 1 g below 1 kg, 10 g below 50 kg, 0.1 kg below 500 kg, 1 kg above. Common practice.
[[nodiscard]] double weighable_kg(const matter::StockChemical& stock, double kg);

}  // namespace bathwright::dosing
