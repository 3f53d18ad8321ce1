// A solution as a person writes it down: formulae and how much of each. Values only. Read next: solution.hpp.
#pragma once

#include <bathwright/activity/model.hpp>
#include <bathwright/units/quantity.hpp>
#include <map>
#include <optional>
#include <string>
#include <vector>

namespace bathwright::solution {

struct Ingredient {
  std::string formula;  ///< neutral; a hydrate ("CuSO4.5H2O") brings its water
  double mol = 0;       ///< >= 0, per kg of water or per litre of solution, as the recipe says
  std::string where;    ///< file:line: key, for messages
};

enum class MayForm : std::uint8_t {
  all,    ///< every solid that covers the temperature, but those known to form too slowly
  none,   ///< saturation is reported only
  listed  ///< those in `allowed`, slow or not
};

struct Recipe {
  std::string file;  ///< for messages
  units::Celsius temperature{25};
  std::optional<activity::ModelKind> model;  ///< nothing: chosen by coverage and ionic strength
  std::optional<double> pH;                  ///< held with acid or alkali of the counter-ion
  std::string counter_ion;                   ///< "Cl^-", "Na^+"; needed with pH
  bool per_litre = false;                    ///< a litre of solution, else a kg of water
  std::vector<Ingredient> ingredients;
  MayForm may_form = MayForm::all;
  /// Solids by phase name ("NiSO4.6H2O (alpha)") or, where only one phase fits, by formula.
  std::vector<std::string> allowed;
  std::vector<std::string> excess;          ///< present without limit: dissolve until saturated
  std::map<std::string, double> gases_atm;  ///< held partial pressures, by formula
};

}  // namespace bathwright::solution
