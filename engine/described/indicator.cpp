#include "indicator.hpp"

#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <bathwright/matter/formula.hpp>
#include <cmath>
#include <map>

namespace bathwright::described {
namespace {

using bath::IndicatorView;
using toml_schema::Key;
using toml_schema::Table;
using enum toml_schema::Need;

constexpr std::string_view moles_per_litre = "mol/L";

/// A key of a sum: a table of names with their coefficients, or, where there is nothing to name, a number.
struct Kind {
  const char* key;
  Of of;
  std::string_view unit;  ///< terms of one unit can be summed
  std::vector<std::string> Known::*names;
  const char* example;
};
const Kind kinds[] = {
    {"g_per_L", Of::quantity_g_per_L, "g/L", &Known::quantities, R"({ "Ni^2+" = 1 })"},
    {"mol_per_L", Of::quantity_mol_per_L, moles_per_litre, &Known::quantities, R"({ "Ni^2+" = 1 })"},
    {"species_mol_per_L", Of::species_mol_per_L, moles_per_litre, &Known::species, R"({ "NH3" = 1 })"},
    {"species_mol_per_kg", Of::species_mol_per_kg, "mol/kg", &Known::species, R"({ "NH3" = 1 })"},
    {"species_activity", Of::species_activity, "activity", &Known::species, R"({ "Cu^+" = 1 })"},
    {"saturation", Of::saturation, "saturation", &Known::solids, R"({ "H3BO3" = 1 })"},
    {"pH", Of::pH, "pH", nullptr, "1"},
    {"ionic_strength_mol_per_kg", Of::ionic_strength, "mol/kg", nullptr, "1"},
    {"temperature_C", Of::temperature, "degC", nullptr, "1"},
};

std::string what_of(const Kind& kind) {
  if (kind.names == &Known::quantities) return "a quantity";
  return kind.names == &Known::solids ? "a watched solid"
                                      : "a species that can form from the components in this convention";
}

void read_terms(Table& sum, const Kind& kind, const Known& known, Sum& into) {
  const Key key{kind.key, optional, kind.example};
  if (!kind.names) {
    if (const auto coefficient = sum.number(key)) into.terms.push_back({kind.of, "", *coefficient});
    return;
  }
  auto table = sum.table(key);
  if (!table) return;
  const std::vector<std::string>& names = known.*kind.names;
  for (const std::string& id : table->names()) {
    const auto coefficient = table->number({id, required, "1"});
    if (std::ranges::find(names, id) == names.end()) {
      const auto near = nearest(id, names);
      table->report(id, "is not " + what_of(kind), "", near ? "Did you mean '" + *near + "'?" : "");
    }
    if (coefficient) into.terms.push_back({kind.of, id, *coefficient});
  }
}

Sum read_sum(Table& sum, const Known& known) {
  Sum all;
  std::set<std::string_view> units;
  for (const Kind& kind : kinds) {
    read_terms(sum, kind, known, all);
    if (sum.has(kind.key)) units.insert(kind.unit);
  }
  if (units.empty()) sum.report("", "sums nothing", "terms, as g_per_L = { \"Ni^2+\" = 1 }");
  if (units.size() > 1)
    sum.report("", "adds " + std::string(*units.begin()) + " to " + std::string(*units.rbegin()),
               "terms of one unit");
  const std::string as = sum.text({"as", optional, R"("NaCN")"});
  if (as.empty()) return all;
  if (!units.contains(moles_per_litre))
    sum.report("as", "has no mol/L to turn into g/L", "mol_per_L or species_mol_per_L beside it");
  const auto formula = matter::Formula::parse(as, sum.where("as"));
  if (formula)
    all.factor = formula->molar_mass().v;
  else
    sum.report("as", formula.problems());
  return all;
}

// ---- Evaluation

Problem not_known(const std::string& where, const std::string& id) {
  return {Fault::bad_input, where, id + " is not known", "", ""};
}

Result<double> named(const std::string& where, const std::string& id, std::span<const std::string> names,
                     std::span<const double> values) {
  const auto at = static_cast<std::size_t>(std::ranges::find(names, id) - names.begin());
  if (at >= std::min(names.size(), values.size()) || std::isnan(values[at])) return not_known(where, id);
  return values[at];
}

class Evaluator {
 public:
  Evaluator(std::string where, DeclaredValue declared, const std::vector<bath::Quantity>& quantities)
      : where_(std::move(where)), declared_(std::move(declared)) {
    for (const bath::Quantity& quantity : quantities) {
      quantity_ids_.push_back(quantity.id);
      g_per_mol_[quantity.id] = quantity.formula.molar_mass().v;
    }
  }

  Result<double> operator()(const IndicatorView& state) const {
    auto value = sum(declared_.value, state);
    if (!value) return value;
    double result = *value;
    if (declared_.over) {
      const auto over = sum(*declared_.over, state);
      if (!over) return over;
      if (!(*over > 0)) return outside("what it is divided by is not above zero");
      result /= *over;
    }
    if (declared_.log10) {
      if (!(result > 0)) return outside("the logarithm of what is not above zero");
      result = std::log10(result);
    }
    result *= declared_.factor;
    if (!std::isfinite(result)) return outside("is beyond all numbers");
    return result;
  }

 private:
  Problem outside(std::string what) const { return {Fault::out_of_range, where_, std::move(what), "", ""}; }

  Result<double> sum(const Sum& sum, const IndicatorView& state) const {
    double total = 0;
    for (const SumTerm& term : sum.terms) {
      const auto value = value_of(term, state);
      if (!value) return value;
      total += term.coefficient * *value;
    }
    return total * sum.factor;
  }

  Result<double> value_of(const SumTerm& term, const IndicatorView& state) const {
    const auto quantity = [&] { return named(where_, term.id, quantity_ids_, state.quantity_g_per_L); };
    const auto species = [&](std::span<const double> values) {
      return named(where_, term.id, state.species_names, values);
    };
    switch (term.of) {
      case Of::quantity_g_per_L:
        return quantity();
      case Of::quantity_mol_per_L:
        return scaled(quantity(), 1 / g_per_mol_.at(term.id));
      case Of::species_mol_per_L:
        return scaled(species(state.species_molality), state.water_kg / state.volume_L);
      case Of::species_mol_per_kg:
        return species(state.species_molality);
      case Of::species_activity:
        return species(state.species_activity);
      case Of::saturation: {
        const auto index = named(where_, term.id, state.solid_names, state.saturation_index);
        return index ? Result<double>(std::pow(10, *index)) : index;
      }
      case Of::pH:
        return state.pH;
      case Of::ionic_strength:
        return state.ionic_strength;
      case Of::temperature:
        return state.temperature_C;
    }
    return not_known(where_, term.id);
  }
  static Result<double> scaled(Result<double> value, double factor) {
    return value ? Result<double>(*value * factor) : value;
  }

  std::string where_;
  DeclaredValue declared_;
  std::vector<std::string> quantity_ids_;
  std::map<std::string, double> g_per_mol_;
};

}  // namespace

DeclaredValue read_value(Table& indicator, const Known& known) {
  DeclaredValue declared;
  if (auto value = indicator.table({"value", required, R"({ g_per_L = { "Ni^2+" = 1 } })"}))
    declared.value = read_sum(*value, known);
  if (auto over = indicator.table({"over", optional, R"({ g_per_L = { "Ni^2+" = 1 } })"}))
    declared.over = read_sum(*over, known);
  declared.factor = indicator.number({"factor", optional, "1000"}).value_or(1);
  if (declared.factor == 0) indicator.report("factor", "is zero", "a number, as 1000");
  declared.log10 = indicator.truth({"log10", optional, "true"});
  return declared;
}

std::function<Result<double>(const IndicatorView&)> evaluator(std::string where, DeclaredValue declared,
                                                              const std::vector<bath::Quantity>& quantities) {
  return Evaluator(std::move(where), std::move(declared), quantities);
}

}  // namespace bathwright::described
