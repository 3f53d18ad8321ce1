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

namespace {

double u_dCp(const Reaction& reaction) {
  double squares = 0;
  for (const auto* side : {&reaction.left, &reaction.right})
    for (const Term& term : *side)
      if (term.name != "H2O" && term.name != "H^+" && !term.name.ends_with("(s)"))
        squares += std::pow(term.coefficient * doubt::dCp_of_one, 2);
  return std::sqrt(squares);
}

}  // namespace

void TemperatureData::complete(Constant& constant, const std::string& row, const std::string& set,
                               bool states_dCp, bool rough_dH, const Reaction& reaction) const {
  const auto function = functions_.find({row, set});
  if (function != functions_.end()) {
    constant.dH_kJ_per_mol = function->second.dH_kJ_per_mol;
    constant.dCp_J_per_molK = function->second.dCp_J_per_molK;
    constant.curve = function->second.curve;
    constant.has_dH = true;
    rough_dH = false;
  }
  const bool knows_dCp = function != functions_.end() || states_dCp ||
                         (constant.has_dH && add_heat_capacities(constant, reaction));
  constant.u_dH_kJ_per_mol = !constant.has_dH ? doubt::dH_unknown
                             : rough_dH       ? doubt::dH_rough
                             : knows_dCp      ? doubt::dH_with_dCp
                                              : doubt::dH_alone;
  constant.u_dCp_J_per_molK = knows_dCp ? u_dCp(reaction) : doubt::dCp_unknown;
}

bool TemperatureData::add_heat_capacities(Constant& constant, const Reaction& reaction) const {
  HeatCapacity sum;
  const auto add = [&](const Term& term, double sign) {
    const auto known = heat_capacity_.find(term.name);
    if (known == heat_capacity_.end()) return false;
    sum.constant += sign * term.coefficient * known->second.constant;
    sum.curve.add(known->second.curve, sign * term.coefficient);
    return true;
  };
  for (const Term& term : reaction.left)
    if (!add(term, -1)) return false;
  for (const Term& term : reaction.right)
    if (!add(term, 1)) return false;
  constant.dCp_J_per_molK = sum.constant;
  constant.curve = sum.curve;
  return true;
}

}  // namespace bathwright::speciation
