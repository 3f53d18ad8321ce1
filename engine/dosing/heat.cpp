#include "heat.hpp"

#include <bathwright/data/tables.hpp>
#include <cmath>

namespace bathwright::dosing {
namespace {

struct Heat {
  std::string formula;
  double assay, kJ_per_kg;
};

const std::vector<Heat>& heats() {
  static const std::vector<Heat> read = [] {
    std::vector<Heat> rows;
    const auto table = data::built_in_table("dosing/heat_of_dilution.csv", {"assay", "kJ_per_kg"});
    for (std::size_t i = 0; i < table.size(); ++i)
      rows.push_back(
          {std::string(table[i]["formula"]), table[i].number("assay"), table[i].number("kJ_per_kg")});
    return rows;
  }();
  return read;
}

}  // namespace

double heat_kJ_per_kg(const matter::StockChemical& stock) {
  const double strength = stock.liquid ? stock.assay : 1;
  const Heat* nearest = nullptr;
  for (const Heat& one : heats())
    if (one.formula == stock.formula &&
        (!nearest || std::abs(one.assay - strength) < std::abs(nearest->assay - strength)))
      nearest = &one;
  return nearest ? nearest->kJ_per_kg * stock.assay : 0;
}

double warming_C(const matter::StockChemical& stock, double kg, const bath::TankState& state) {
  return heat_kJ_per_kg(stock) * kg / (water_kJ_per_kg_C * state.water_kg);
}

}  // namespace bathwright::dosing
