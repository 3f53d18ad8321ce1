#include "temperature_data.hpp"

#include <bathwright/data/tables.hpp>
#include <cmath>

namespace bathwright::speciation {

TemperatureData::TemperatureData(activity::Convention convention) {
  const bool interaction = convention == activity::Convention::interaction;
  const data::CsvTable functions =
      data::built_in_table("equilibria/temperature_functions.csv", {"A", "B", "C", "D", "E", "F"});
  const auto coefficient = [](const data::CsvRow& row, std::string_view column) {
    const double value = row.number(column);
    return std::isnan(value) ? 0 : value;
  };
  for (std::size_t i = 0; i < functions.size(); ++i) {
    const data::CsvRow row = functions[i];
    if (row["convention"] != "both" && (row["convention"] == "interaction") != interaction) continue;
    functions_.emplace(
        std::pair(std::string(row["of"]), std::string(row["set"])),
        ReactionAt25C::of({coefficient(row, "A"), coefficient(row, "B"), coefficient(row, "C"),
                           coefficient(row, "D"), coefficient(row, "E"), coefficient(row, "F")}));
  }
  const data::CsvTable substances =
      data::built_in_table("equilibria/heat_capacity.csv", {"constant_J_molK", "pole_JK_mol", "born_J_mol"});
  for (std::size_t i = 0; i < substances.size(); ++i) {
    const data::CsvRow row = substances[i];
    HeatCapacity& substance = heat_capacity_[std::string(row["substance"])];
    substance.constant = row.number("constant_J_molK");
    substance.curve.pole = row.number("pole_JK_mol");
    substance.curve.born = row.number("born_J_mol");
  }
}

void TemperatureData::complete(Constant& constant, const std::string& row, const std::string& set,
                               bool states_dCp, const Reaction& reaction) const {
  if (const auto function = functions_.find({row, set}); function != functions_.end()) {
    constant.dH_kJ_per_mol = function->second.dH_kJ_per_mol;
    constant.dCp_J_per_molK = function->second.dCp_J_per_molK;
    constant.curve = function->second.curve;
    constant.has_dH = true;
    return;
  }
  if (states_dCp || !constant.has_dH) return;
  HeatCapacity sum;
  const auto add = [&](const Term& term, double sign) {
    const auto known = heat_capacity_.find(term.name);
    if (known == heat_capacity_.end()) return false;
    sum.constant += sign * term.coefficient * known->second.constant;
    sum.curve.add(known->second.curve, sign * term.coefficient);
    return true;
  };
  for (const Term& term : reaction.left)
    if (!add(term, -1)) return;
  for (const Term& term : reaction.right)
    if (!add(term, 1)) return;
  constant.dCp_J_per_molK = sum.constant;
  constant.curve = sum.curve;
}

}  // namespace bathwright::speciation
