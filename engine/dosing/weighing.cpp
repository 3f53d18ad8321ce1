#include "weighing.hpp"

#include <cmath>

namespace bathwright::dosing {

double weighable_kg(const matter::StockChemical& stock, double kg) {
  const double kg_per_unit = stock.liquid ? stock.kg_per_L : 1;
  const double amount = kg / kg_per_unit;
  const double steps_per_unit = amount < 0.1   ? 1e4
                                : amount < 1   ? 1e3
                                : amount < 50  ? 100
                                : amount < 500 ? 10
                                               : 1;
  return std::round(amount * steps_per_unit) / steps_per_unit * kg_per_unit;
}

}  // namespace bathwright::dosing
