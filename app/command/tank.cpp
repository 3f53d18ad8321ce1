// bathwright tank TANK: the state of a tank.
#include <CLI/CLI.hpp>
#include <bathwright/bath/uncertainty.hpp>
#include <bathwright/sheets/tank_sheet.hpp>

#include "context.hpp"
#include "shared_options.hpp"
#include "work/documents.hpp"
#include "work/tank_state.hpp"

namespace bathwright::command {
namespace {

Json json_of(const Shop& shop, const bath::TankView& view, const sheets::StateRead& read) {
  std::vector<std::string> warnings = read.changed_since;
  warnings.insert(warnings.end(), view.warnings.begin(), view.warnings.end());
  Json doc = document(warnings);
  doc["tank"] = shop.tank.name;
  doc["bath_type"] = shop.tank.bath_type;
  doc["state_from"] = read.from;
  doc["read"] = {{"temperature_C", read.temperature.v}, {"pH", read.pH}};
  doc["temperature_C"] = shop.tank.temperature.v;
  doc["idle_temperature_C"] = shop.tank.idle_temperature.v;
  doc["volume_L"] = view.volume_L;
  doc["density_kg_per_L"] = view.density_kg_per_L;
  doc["pH"] = view.pH;
  doc["pH_standard_uncertainty"] = or_null(view.u_pH);
  doc["ionic_strength"] = view.ionic_strength;
  doc["water_activity"] = view.water_activity;
  doc["model"] = view.model;
  doc["valid"] = view.valid;
  doc["missing_interactions"] = view.missing;
  doc["concentrations"] = concentrations(shop.type(), view);
  doc["levels"] = level_list(sheets::judge(shop.tank, shop.type(), view.quantity_g_per_L, read.pH));
  doc["species"] = Json::array();
  for (const auto& s : view.species)
    doc["species"].push_back({{"name", s.name},
                              {"molality", s.molality},
                              {"gamma", s.gamma},
                              {"log10_activity", s.log10_activity},
                              {"log10_activity_standard_uncertainty", or_null(s.u_log10_activity)}});
  doc["headroom"] = Json::array();
  for (const auto& h : view.headroom)
    doc["headroom"].push_back({{"solid", h.solid},
                               {"slow", h.slow},
                               {"working_log10", h.covers_working ? Json(h.working_log10) : Json(nullptr)},
                               {"idle_log10", h.covers_idle ? Json(h.idle_log10) : Json(nullptr)},
                               {"working_log10_standard_uncertainty", or_null(h.u_working_log10)},
                               {"idle_log10_standard_uncertainty", or_null(h.u_idle_log10)},
                               {"working_kg", h.working_kg},
                               {"idle_kg", h.idle_kg},
                               {"working_kg_standard_uncertainty", or_null(h.u_working_kg)},
                               {"idle_kg_standard_uncertainty", or_null(h.u_idle_kg)},
                               {"forms_above_pH", h.forms_above_pH},
                               {"forms_above_pH_standard_uncertainty", or_null(h.u_forms_above_pH)}});
  doc["gases"] = Json::array();
  for (const auto& gas : view.gases)
    doc["gases"].push_back({{"name", gas.name}, {"partial_pressure_bar", gas.bar}});
  doc["indicators"] = Json::array();
  for (const auto& i : view.indicators)
    doc["indicators"].push_back(
        {{"id", i.id},
         {"value", i.value ? Json(*i.value) : Json(nullptr)},
         {"unit", i.unit},
         {"state", i.value ? sheets::words(sheets::standing(shop.type(), i.id, *i.value)) : ""},
         {"meaning", i.meaning},
         {"note", i.note}});
  doc["cautions"] = Json::array();
  for (const auto& caution : shop.type().cautions) doc["cautions"].push_back(caution.text);
  return doc;
}

int run(const Context& context, const std::string& tank_path, const std::string& readings_path) {
  const auto shop = open_shop(context, tank_path);
  if (!shop) return fail(context, shop.problems());
  const auto start = starting_state(context, *shop, readings_path);
  if (!start) return fail(context, start.problems());
  const auto view = bath::view_with_uncertainty(shop->chemistry, start->state);
  if (!view) return fail(context, view.problems());
  if (context.json)
    print(json_of(*shop, *view, start->read));
  else
    print(sheets::tank_sheet(shop->tank, shop->type(), *view, start->read, sheets::Units(context.units)));
  const bool in_window =
      all_in_window(sheets::judge(shop->tank, shop->type(), view->quantity_g_per_L, start->read.pH));
  return in_window && start->read.changed_since.empty() &&
                 sheets::crystallising(shop->tank, view->headroom).empty()
             ? Exit::all_well
             : Exit::finding;
}

}  // namespace

void add_tank(CLI::App& program, Context& context, Action& action) {
  auto* verb = program.add_subcommand("tank", "state of a tank: levels, free ions, headroom of each solid");
  verb->fallthrough();
  auto tank = std::make_shared<std::string>();
  auto readings = std::make_shared<std::string>();
  verb->add_option("TANK", *tank, "the tank, TOML")->required()->check(CLI::ExistingFile);
  verb->add_option("--readings", *readings, "today's readings; else the book in --log, else the tank's aims")
      ->check(CLI::ExistingFile);
  add_units(*verb, context);
  verb->footer("Example: bathwright tank baths/n-07.toml --readings baths/readings/n-07-morning.toml\n");
  verb->callback([&context, &action, tank, readings] {
    action = [&context, tank, readings] { return run(context, *tank, *readings); };
  });
}

}  // namespace bathwright::command
