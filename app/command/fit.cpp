// bathwright fit FILE: constants from measurements.
#include <CLI/CLI.hpp>
#include <bathwright/sheets/fit_sheet.hpp>
#include <bathwright/shopfiles/fit_file.hpp>

#include "context.hpp"

namespace bathwright::command {
namespace {

Json json_of(const regression::Task& task, const regression::Fit& fit) {
  Json doc = document({});
  doc["provenance"] = regression::provenance(task);
  doc["model"] = activity::name(task.model);
  doc["found"] = Json::array();
  for (const auto& found : fit.found) {
    const auto* interaction = std::get_if<activity::Interaction>(&found.unknown.what);
    doc["found"].push_back({{interaction ? "interaction" : "constant", regression::owner(found.unknown)},
                            {"parameter", regression::parameter_name(found.unknown)},
                            {"before", found.before},
                            {"value", found.value},
                            {"standard_error", found.standard_error},
                            {"row", sheets::table_row(task, fit, found.unknown)}});
  }
  const std::size_t n = fit.found.size();
  doc["covariance"] = Json::array();
  for (std::size_t i = 0; i < n; ++i)
    doc["covariance"].push_back(
        std::vector<double>(fit.covariance.begin() + static_cast<std::ptrdiff_t>(i * n),
                            fit.covariance.begin() + static_cast<std::ptrdiff_t>((i + 1) * n)));
  doc["degrees_of_freedom"] = fit.degrees_of_freedom;
  doc["reduced_chi2"] = fit.reduced_chi2;
  doc["fit_error"] = fit.fit_error;
  const auto known = [](const std::optional<double>& value) { return value ? Json(*value) : Json(nullptr); };
  doc["test_error"] = known(fit.test_error);
  doc["test_error_before"] = known(fit.test_error_before);
  doc["measurements"] = Json::array();
  for (const auto& row : fit.measurements)
    doc["measurements"].push_back({{"label", row.label},
                                   {"measured", row.measured},
                                   {"uncertainty", row.uncertainty},
                                   {"before", known(row.before)},
                                   {"computed", known(row.computed)},
                                   {"held_out", row.held_out}});
  return doc;
}

int run(const Context& context, const std::string& path) {
  const auto task = shopfiles::read_fit(path);
  if (!task) return fail(context, task.problems());
  const auto fit = regression::fit(*task);
  if (!fit) return fail(context, fit.problems());
  if (context.json)
    print(json_of(*task, *fit));
  else
    print(sheets::fit_sheet(*task, *fit, path));
  return Exit::all_well;
}

}  // namespace

void add_fit(CLI::App& program, Context& context, Action& action) {
  auto* verb =
      program.add_subcommand("fit", "constants and interaction parameters from your own measurements")
          ->fallthrough();
  auto path = std::make_shared<std::string>();
  verb->add_option("FILE", *path, "measurements and what to find, TOML")
      ->required()
      ->check(CLI::ExistingFile);
  verb->footer(
      "Example. boric-acid.toml:\n"
      "  source = \"shift samples, week 40\"\n"
      "  fitted_by = \"Brindlewick Surface Works\"\n"
      "  [[fit]]\n"
      "  constant = \"H3BO3\"\n"
      "  find = [\"log10_K\"]\n"
      "  [[measurement]]\n"
      "  temperature = \"18 degC\"\n"
      "  per_kg_water = { \"NiSO4\" = 1.1 }\n"
      "  solids = { excess = [\"H3BO3\"] }\n"
      "  quantity = \"solubility\"\n"
      "  of = \"H3BO3\"\n"
      "  value = 0.62\n"
      "  uncertainty = 0.02\n"
      "\n"
      "  bathwright fit boric-acid.toml\n"
      "\n"
      "An interaction parameter instead of a constant: interaction = [\"Cu^2+\", \"Na^+\"], find = [\"theta\"].\n");
  verb->callback([&context, &action, path] { action = [&context, path] { return run(context, *path); }; });
}

}  // namespace bathwright::command
