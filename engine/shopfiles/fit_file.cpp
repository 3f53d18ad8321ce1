#include <bathwright/base/nearest.hpp>
#include <bathwright/shopfiles/fit_file.hpp>

#include "ranges.hpp"
#include "recipe_keys.hpp"

namespace bathwright::shopfiles {
namespace {

using regression::Parameter;
using regression::Quantity;

constexpr Range possible_log10_K{-120, 120}, possible_dH_kJ_per_mol{-1500, 1500},
    possible_dCp_J_per_molK{-5000, 5000}, any_value{-1e6, 1e6};

template <class Enum>
std::optional<Enum> named(Table& table, const Key& key, const std::string& written,
                          std::initializer_list<Enum> all) {
  std::vector<std::string> names;
  for (const Enum one : all) {
    names.emplace_back(name(one));
    if (names.back() == written) return one;
  }
  const auto meant = nearest(written, names);
  table.report(key.name, '"' + printable(written) + "\" is not known", std::string(key.example),
               meant ? "Did you mean " + *meant + '?' : "");
  return std::nullopt;
}

/// Parameters of the activity model for some solutes.
void read_interaction(Table& table, const speciation::Equilibria& built_in, regression::Task& task) {
  using enum activity::InteractionParameter;
  const Key key{"interaction", required, R"(["Cu^2+", "Na^+"])"},
      find{"find", required, R"(["beta0", "beta1", "cphi"], ["theta"] or ["epsilon"])"};
  activity::Interaction unknown;
  unknown.solutes = table.texts(key);
  unknown.where = table.where(key.name);
  for (std::string& solute : unknown.solutes) solute = printable(solute);
  for (const std::string& parameter : table.texts(find)) {
    const auto known =
        named(table, find, parameter, {beta0, beta1, beta2, cphi, theta, lambda, psi, zeta, mu, epsilon});
    if (!known) continue;
    unknown.parameter = *known;
    task.unknowns.push_back({unknown, unknown.where});
    if (const auto good = built_in.with_interactions({unknown}); !good)
      table.report(key.name, good.problems());
    else if (activity::model_with(*known) != task.model)
      table.report(find.name,
                   text(unknown) + " is not of the model " + std::string(activity::name(task.model)),
                   "a parameter of that model",
                   "Ask for model = \"" + std::string(activity::name(activity::model_with(*known))) + "\".");
  }
}

/// A constant of the tables, or one that the file states with its reaction.
void read_constant(Table& table, const speciation::Equilibria& built_in, regression::Task& task) {
  const std::string name = printable(table.text({"constant", required, R"("H3BO3")"}));
  const Key find{"find", required, R"(["log10_K", "dH_kJ_per_mol", "dCp_J_per_molK"])"};
  for (const std::string& parameter : table.texts(find))
    if (const auto known = named(table, find, parameter,
                                 {Parameter::log10_K, Parameter::dH_kJ_per_mol, Parameter::dCp_J_per_molK}))
      task.unknowns.push_back({regression::OfConstant{name, *known}, table.where("constant")});

  const bool new_one = table.has("reaction");
  const std::string reaction = table.text({"reaction", optional, R"("NaNO3(s) = Na^+ + NO3^-")"});
  const std::string formula = table.text({"formula", optional, R"("NaNO3")"});
  const auto log10_K = table.number({"log10_K", new_one ? required : optional, "1.0"}, possible_log10_K);
  const auto dH = table.number({"dH_kJ_per_mol", optional, "20.5"}, possible_dH_kJ_per_mol);
  const auto dCp = table.number({"dCp_J_per_molK", optional, "-120"}, possible_dCp_J_per_molK);
  const speciation::Constant* known = built_in.stated(name);
  if (!new_one && !known) {
    table.report("constant", "no species, solid or gas of the tables is called " + name,
                 "the name of a row, as \"H3BO3\"", "Or give its reaction and a log10_K to start from.");
    return;
  }
  speciation::Constant constant = known && !new_one ? *known : speciation::Constant{};
  constant.has_dH = (known && !new_one && known->has_dH) || dH;
  if (log10_K) constant.log10_K = *log10_K;
  if (dH) constant.dH_kJ_per_mol = *dH;
  if (dCp) {
    constant.dCp_J_per_molK = *dCp;
    constant.curve = {};
  }
  if (!new_one) {
    if (log10_K || dH || dCp)
      table.report(log10_K ? "log10_K"
                   : dH    ? "dH_kJ_per_mol"
                           : "dCp_J_per_molK",
                   "stands without a reaction", "a reaction beside it",
                   "Leave it out: a constant of the tables starts from its row.");
    return;
  }
  const std::string where = table.where("reaction");
  if (reaction.find("(s)") != std::string::npos)
    task.own_solids.push_back({name, formula, reaction, "this file", "", where, constant});
  else
    task.own_species.push_back({name, reaction, "this file", where, constant, 0});
}

regression::Measurement read_measurement(Table& table, std::string_view file) {
  regression::Measurement m;
  m.where = table.where("value");
  m.recipe = read_recipe(table, file);
  m.label = table.text({"label", optional, R"("Tuesday, lab 2")"});
  const Key quantity{
      "quantity", required,
      R"("solubility", "pH", "water_activity", "osmotic_coefficient", "mean_activity_coefficient", )"
      R"("molality" or "partial_pressure")"};
  const std::string written = table.text(quantity);
  if (!written.empty())
    m.quantity =
        named(table, quantity, written,
              {Quantity::solubility, Quantity::pH, Quantity::water_activity, Quantity::osmotic_coefficient,
               Quantity::mean_activity_coefficient, Quantity::molality, Quantity::partial_pressure})
            .value_or(Quantity::pH);
  m.of = table.text({"of", of_solution(m.quantity) ? optional : required, R"("H3BO3")"});
  m.value = table.number({"value", required, "0.94"}, any_value).value_or(0);
  m.uncertainty = table.number({"uncertainty", required, "0.01"}, any_value).value_or(1);
  if (!(m.uncertainty > 0))
    table.report("uncertainty", "is not above zero", "one standard uncertainty, in the unit of the value");
  m.held_out = table.text({"use", optional, R"("fit" or "test")"}) == "test";
  return m;
}

}  // namespace

Result<regression::Task> read_fit_text(std::string_view name, std::string_view text) {
  auto tree = parse_toml(name, text);
  if (!tree) return tree.problems();
  Document file(name, *std::move(tree));
  Table root = file.root();
  regression::Task task;
  task.source = root.text({"source", required, R"("CRC Handbook of Chemistry and Physics, 98th ed.")"});
  task.fitted_by = root.text({"fitted_by", optional, R"("Brindlewick Surface Works")"});
  task.model = read_model(root).value_or(activity::ModelKind::pitzer);
  const auto& built_in = speciation::Equilibria::built_in(activity::convention(task.model));
  for (Table& table : root.tables({"fit", required, R"({ constant = "H3BO3", find = ["dCp_J_per_molK"] })"}))
    table.has("interaction") ? read_interaction(table, built_in, task) : read_constant(table, built_in, task);
  for (Table& table : root.tables({"measurement", required, R"({ quantity = "pH", value = 4.2, ... })"}))
    task.measurements.push_back(read_measurement(table, name));
  auto equilibria = built_in.with(task.own_species, task.own_solids);
  if (equilibria)
    task.equilibria = *std::move(equilibria);
  else
    root.report("fit", equilibria.problems());
  return file.conclude(std::move(task));
}

Result<regression::Task> read_fit(const std::string& path) {
  const auto text = read_text_file(path);
  if (!text) return text.problems();
  return read_fit_text(path, *text);
}

}  // namespace bathwright::shopfiles
