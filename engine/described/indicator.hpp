// The value of an indicator as a TOML file declares it: one sum, perhaps over another. Private to described.
#pragma once

#include <bathwright/bath/bath_type.hpp>
#include <bathwright/toml_schema/schema.hpp>
#include <optional>
#include <set>

namespace bathwright::described {

/// What a term of a sum looks at.
enum class Of : std::uint8_t {
  quantity_g_per_L,
  quantity_mol_per_L,
  species_mol_per_L,
  species_mol_per_kg,
  species_activity,
  saturation,  ///< ion product over solubility product
  pH,
  ionic_strength,
  temperature
};

struct SumTerm {
  Of of;
  std::string id;  ///< of a quantity, species or solid; empty where there is only one
  double coefficient;
};

struct Sum {
  std::vector<SumTerm> terms;
  double factor = 1;  ///< g/mol, for a sum of mol/L that is shown as g/L of a substance
};

/// factor * (value / over), or factor * log10(value / over).
struct DeclaredValue {
  Sum value;
  std::optional<Sum> over;
  double factor = 1;
  bool log10 = false;
};

/// What an indicator may name.
struct Known {
  std::vector<std::string> quantities, species, solids;
};

/// The keys value, over, factor and log10 of an [[indicator]]. Names are looked up in `known`.
DeclaredValue read_value(toml_schema::Table& indicator, const Known& known);

/// `where` names the indicator in problems. `quantities` as the bath type has them.
std::function<Result<double>(const bath::IndicatorView&)> evaluator(
    std::string where, DeclaredValue declared, const std::vector<bath::Quantity>& quantities);

}  // namespace bathwright::described
