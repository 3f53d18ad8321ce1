// bathwright analyse TANK READINGS: readings to concentrations with their uncertainty.
#include <CLI/CLI.hpp>
#include <bathwright/sheets/analysis_sheet.hpp>

#include "context.hpp"
#include "shared_options.hpp"
#include "work/documents.hpp"
#include "work/tank_state.hpp"

namespace bathwright::command {
namespace {

int run(const Context& context, const std::string& tank_path, const std::string& readings_path) {
  const auto shop = open_shop(context, tank_path);
  if (!shop) return fail(context, shop.problems());
  const auto analysed = analyse(context, *shop, readings_path);
  if (!analysed) return fail(context, analysed.problems());
  const analysis::Analysis& analysis = analysed->analysis;
  Json doc = analysis_document(shop->tank, shop->chemistry, analysis);
  const sheets::Units units(context.units);
  std::optional<double> water_kg_per_L;
  if (units.needs_water())
    if (const auto view = shop->chemistry.quick_view(analysis.state))
      water_kg_per_L = sheets::water_kg_per_L(*view);
  sheets::Lines lines = sheets::analysis_sheet(shop->tank, shop->type(), analysis, units, water_kg_per_L);
  if (!context.log_file.empty()) {
    const auto entry = entry_computed(*shop, readings_path, logbook::EntryKind::analysis, doc);
    if (!entry) return fail(context, entry.problems());
    const auto logged = append_to_log(context, *entry);
    if (!logged) return fail(context, logged.problems());
    doc["logged_as"] = logged->entry.seq;
    sheets::say(lines, words(*logged));
  }
  if (context.json)
    print(doc);
  else
    print(lines);
  const bool in_window = all_in_window(sheets::judge(shop->tank, shop->type(), analysis));
  return in_window && analysis.suspects.empty() ? Exit::all_well : Exit::finding;
}

}  // namespace

void add_analyse(CLI::App& program, Context& context, Action& action) {
  auto* verb =
      program.add_subcommand("analyse", "readings to concentrations with their uncertainty")->fallthrough();
  add_tank_and_readings(*verb, context, action, run);
  add_signature(*verb, context);
  add_units(*verb, context);
  verb->footer(
      "Example: bathwright analyse baths/n-07.toml baths/readings/n-07-morning.toml --log shift-log.sqlite\n"
      "With --log the analysis is logged.\n");
}

}  // namespace bathwright::command
