#include <bathwright/base/nearest.hpp>
#include <bathwright/matter/concentration.hpp>
#include <bathwright/matter/formula.hpp>
#include <bathwright/shopfiles/solution_file.hpp>
#include <bathwright/units/read.hpp>

#include "ranges.hpp"
#include "recipe_keys.hpp"

namespace bathwright::shopfiles {
namespace {

using solution::MayForm;

}  // namespace

std::optional<activity::ModelKind> read_model(Table& root) {
  constexpr std::string_view automatic = "auto",
                             expected = R"("auto", "davies", "debye-huckel", "sit" or "pitzer")";
  const std::string model = root.text({"model", optional, R"("auto")"});
  if (model.empty() || model == automatic) return std::nullopt;
  std::vector<std::string> names{std::string(automatic)};
  for (const auto kind : {activity::ModelKind::davies, activity::ModelKind::debye_huckel,
                          activity::ModelKind::sit, activity::ModelKind::pitzer}) {
    names.emplace_back(activity::name(kind));
    if (model == names.back()) return kind;
  }
  const auto meant = nearest(model, names);
  root.report("model", '"' + printable(model) + "\" is not a model", std::string(expected),
              meant ? "Did you mean " + *meant + '?' : "");
  return std::nullopt;
}

namespace {

/// A held pH and the ion that balances its charge: both or neither.
void read_held_pH(Table& root, solution::Recipe& recipe) {
  recipe.pH = root.number({"pH", optional, "4.0"}, possible_pH);
  recipe.counter_ion = root.text({"counter_ion", root.has("pH") ? required : optional, R"("Cl^-")"});
  if (recipe.counter_ion.empty()) return;
  if (!root.has("pH")) {
    root.report("counter_ion", "balances nothing without a pH", "a pH beside it",
                "Add pH, or remove counter_ion.");
  }
  const auto ion = matter::Formula::parse(recipe.counter_ion, root.where("counter_ion"));
  if (!ion) {
    root.report("counter_ion", ion.problems());
  } else if (ion->charge() == 0) {
    root.report("counter_ion", recipe.counter_ion + " carries no charge", R"(an ion, as "Cl^-" or "Na^+")");
  } else if (recipe.counter_ion == "H^+" || recipe.counter_ion == "OH^-") {
    root.report("counter_ion", recipe.counter_ion + " is already set by the pH",
                R"(an ion, as "Cl^-" or "Na^+")");
  }
}

/// The formula that stands as a key, where it is one of a neutral substance.
std::optional<matter::Formula> neutral_key(Table& table, const std::string& key) {
  const auto formula = matter::Formula::parse(key, table.where(key));
  if (!formula) {
    table.report(key, formula.problems());
  } else if (formula->charge() != 0) {
    table.report(key, "carries a charge", R"(a neutral substance, as "NiSO4")",
                 "Write the salt it came in with.");
  } else {
    return *formula;
  }
  return std::nullopt;
}

void read_per_kg_water(Table& table, solution::Recipe& recipe) {
  for (const std::string& key : table.names()) {
    const auto formula = neutral_key(table, key);
    const auto molality = table.number({key, required, "1.0"}, possible_molality);
    if (formula && molality) recipe.ingredients.push_back({key, *molality, table.where(key)});
  }
}

void read_per_litre(Table& table, solution::Recipe& recipe) {
  recipe.per_litre = true;
  for (const std::string& key : table.names()) {
    const auto formula = neutral_key(table, key);
    const auto written = table.quantity({key, required, R"("270 g/L")"}, units::read_concentration);
    if (!formula || !written) continue;
    const auto molarity =
        matter::moles_per_litre(*written, {.molar_mass = formula->molar_mass()}, table.where(key));
    if (molarity) {
      recipe.ingredients.push_back({key, molarity->v, table.where(key)});
    } else {
      table.report(key, molarity.problems());
    }
  }
}

void read_ingredients(Table& root, solution::Recipe& recipe) {
  auto per_kg_water = root.table({"per_kg_water", optional, R"({ "NiSO4" = 1.0 })"});
  auto per_litre = root.table({"per_litre", optional, R"({ "NiSO4.6H2O" = "270 g/L" })"});
  if (per_kg_water) read_per_kg_water(*per_kg_water, recipe);
  if (per_litre) read_per_litre(*per_litre, recipe);
  if (per_kg_water && per_litre) {
    root.report("per_litre", "stands beside per_kg_water", "one of the two",
                "Write all ingredients the same way.");
  }
}

void read_solids(Table& root, solution::Recipe& recipe) {
  auto solids = root.table({"solids", optional, R"({ allow = "all" })"});
  if (!solids) return;
  constexpr std::string_view example = R"("all", "none" or a list as ["H3BO3", "CaSO4.2H2O"])";
  const Node* allow = solids->any({"allow", optional, example});
  if (allow && allow->kind == Node::Kind::list) {
    recipe.may_form = MayForm::listed;
    recipe.allowed = solids->texts({"allow", optional, example});
  } else if (allow && allow->text == "none") {
    recipe.may_form = MayForm::none;
  } else if (allow && allow->text != "all") {
    solids->report("allow", "is not an answer to which solids may precipitate", std::string(example));
  }
  recipe.excess = solids->texts({"excess", optional, R"(["CaSO4.2H2O"])"});
}

void read_gases(Table& root, solution::Recipe& recipe) {
  auto gases = root.table({"gases", optional, R"({ "CO2" = 4.2e-4 })"});
  if (!gases) return;
  for (const std::string& key : gases->names()) {
    const auto formula = neutral_key(*gases, key);
    const auto pressure = gases->number({key, required, "4.2e-4"}, possible_pressure_atm);
    if (formula && pressure) recipe.gases_atm.emplace(key, *pressure);
  }
}

}  // namespace

solution::Recipe read_recipe(Table& root, std::string_view file) {
  solution::Recipe recipe;
  recipe.file = file;
  recipe.temperature = root.quantity({"temperature", required, R"("25 degC")"}, units::read_temperature)
                           .value_or(units::Celsius{});
  read_held_pH(root, recipe);
  read_ingredients(root, recipe);
  read_solids(root, recipe);
  read_gases(root, recipe);
  return recipe;
}

Result<solution::Recipe> read_solution_text(std::string_view name, std::string_view text) {
  auto tree = parse_toml(name, text);
  if (!tree) return tree.problems();
  Document file(name, *std::move(tree));
  Table root = file.root();
  solution::Recipe recipe = read_recipe(root, name);
  recipe.model = read_model(root);
  return file.conclude(std::move(recipe));
}

Result<solution::Recipe> read_solution(const std::string& path) {
  const auto text = read_text_file(path);
  if (!text) return text.problems();
  return read_solution_text(path, *text);
}

}  // namespace bathwright::shopfiles
