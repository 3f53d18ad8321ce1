// bathwright solution FILE: any solution written as formulae, speciated.
#include <CLI/CLI.hpp>
#include <bathwright/sheets/solution_sheet.hpp>
#include <bathwright/shopfiles/solution_file.hpp>
#include <bathwright/solution/solution.hpp>

#include "context.hpp"

namespace bathwright::command {
namespace {

Json json_of(const solution::Solution& s) {
  Json doc = document(s.warnings);
  doc["temperature_C"] = s.temperature.v;
  doc["model"] = activity::name(s.model);
  doc["model_reason"] = s.model_reason;
  doc["pH"] = s.pH;
  doc["pH_standard_uncertainty"] = or_null(s.u_pH);
  doc["ionic_strength"] = s.ionic_strength;
  doc["water_activity"] = s.water_activity;
  doc["osmotic_coefficient"] = s.osmotic_coefficient;
  doc["density_kg_per_L"] = s.density_kg_per_L;
  doc["charge_residual"] = s.charge_residual;
  doc["iterations"] = s.iterations;
  doc["converged"] = true;  // solve() fails otherwise
  doc["valid"] = s.valid;
  doc["missing_interactions"] = s.missing_interactions;
  doc["species"] = Json::array();
  for (const auto& line : s.species)
    doc["species"].push_back({{"name", line.name},
                              {"molality", line.molality},
                              {"molarity", line.molarity},
                              {"gamma", line.gamma},
                              {"log10_activity", line.log10_activity},
                              {"log10_activity_standard_uncertainty", or_null(line.u_log10_activity)}});
  doc["mean_activity"] = Json::object();
  for (const auto& [formula, gamma] : s.mean_activity) doc["mean_activity"][formula] = gamma;
  doc["solids"] = Json::array();
  for (const auto& solid : s.solids)
    doc["solids"].push_back({{"name", solid.name},
                             {"formula", solid.formula},
                             {"saturation_index", solid.saturation_index},
                             {"saturation_index_standard_uncertainty", or_null(solid.u_saturation_index)},
                             {"precipitated_mol", solid.precipitated_mol},
                             {"dissolved_mol", solid.dissolved_mol},
                             {"dissolved_mol_standard_uncertainty", or_null(solid.u_dissolved_mol)},
                             {"slow", solid.slow},
                             {"covers_temperature", solid.covers_temperature}});
  doc["gases"] = Json::array();
  for (const auto& gas : s.gases)
    doc["gases"].push_back({{"name", gas.name}, {"partial_pressure_atm", gas.partial_pressure_atm}});
  doc["totals"] = Json::object();
  for (const auto& [component, molality] : s.totals) doc["totals"][component] = molality;
  if (s.pH_held_with)
    doc["pH_held_with"] = {{"counter_ion", s.pH_held_with->counter_ion},
                           {"proton_mol", s.pH_held_with->proton_mol}};
  return doc;
}

int run(const Context& context, const std::string& path) {
  const auto recipe = shopfiles::read_solution(path);
  if (!recipe) return fail(context, recipe.problems());
  const auto solved = solution::solve(*recipe);
  if (!solved) return fail(context, solved.problems());
  if (context.json)
    print(json_of(*solved));
  else
    print(sheets::solution_sheet(*solved, path));
  return Exit::all_well;
}

}  // namespace

void add_solution(CLI::App& program, Context& context, Action& action) {
  auto* verb = program.add_subcommand("solution", "speciate any solution written as formulae")->fallthrough();
  auto path = std::make_shared<std::string>();
  verb->add_option("FILE", *path, "the solution, TOML")->required()->check(CLI::ExistingFile);
  verb->footer(
      "Example. gypsum.toml:\n"
      "  temperature = \"25 degC\"\n"
      "  [per_kg_water]\n"
      "  \"NaCl\" = 1.0\n"
      "  [solids]\n"
      "  excess = [\"CaSO4.2H2O\"]\n"
      "\n"
      "  bathwright solution gypsum.toml\n");
  verb->callback([&context, &action, path] { action = [&context, path] { return run(context, *path); }; });
}

}  // namespace bathwright::command
