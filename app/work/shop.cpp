#include "shop.hpp"

#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <bathwright/bath/quantity_meant.hpp>
#include <bathwright/described/bath_type_file.hpp>
#include <bathwright/shopfiles/readings_file.hpp>
#include <bathwright/shopfiles/tank_file.hpp>

#include "user_folders.hpp"

namespace bathwright::work {
namespace {

std::string joined(const std::vector<std::string>& words) {
  std::string text;
  for (const std::string& word : words) text += (text.empty() ? "" : ", ") + word;
  return text;
}

Problem unknown_bath_type(const bath::Tank& tank, const plugin_host::BathTypes& types) {
  std::vector<std::string> ids;
  for (const auto& type : types.ready()) ids.push_back(type.id);
  const auto close = nearest(tank.bath_type, ids);
  return {
      Fault::bad_input, tank.file + ": bath_type", "no bath type \"" + tank.bath_type + "\" is at hand",
      ids.empty() ? "a bath type; none was found" : "one of " + joined(ids),
      close ? "Did you mean " + *close + "?" : "See bathwright plugins list for what was found and refused."};
}

Problems unknown_aims(const bath::Tank& tank, const bath::BathType& type) {
  std::vector<std::string> known;
  if (type.acid_by_pH()) known.emplace_back("pH");
  for (const auto& quantity : type.quantities) known.push_back(quantity.id);
  Problems problems;
  for (const bath::Aim& aim : tank.aims) {
    if (aim.quantity == "pH" && !type.acid_by_pH()) {
      problems.push_back({Fault::bad_input, tank.file + ": target: pH", "cannot be held in " + type.name,
                          "an aim for its acid or alkali, which is analysed", ""});
      continue;
    }
    if (aim.quantity == "pH" || type.quantity(aim.quantity)) continue;
    const auto close = bath::quantity_meant(type, aim.quantity);
    problems.push_back({Fault::bad_input, tank.file + ": target: " + aim.quantity,
                        "is not a quantity of " + type.name, "one of " + joined(known),
                        close ? "Did you mean " + *close + "?" : ""});
  }
  return problems;
}

}  // namespace

plugin_host::Places plugin_places(const Session& session) {
  plugin_host::Places places = plugin_host::built_in_places();
  places.folders.push_back({data_folder() / "plugins", plugin_host::Origin::user});
  for (const std::string& folder : session.plugin_folders)
    places.folders.push_back({folder, plugin_host::Origin::named});
  places.data = data_folder();
  places.state = state_folder();
  places.cache = cache_folder() / "probes";
  places.read_data_file = described::read_bath_type_file;
  return places;
}

plugin_host::BathTypes known_bath_types(const Session& session) {
  return plugin_host::BathTypes::discover(plugin_places(session));
}

Result<Shop> open_shop(const Session& session, const std::string& tank_path) {
  auto tank = shopfiles::read_tank(tank_path, matter::StockCatalogue::built_in());
  if (!tank) {
    if (shopfiles::read_readings(tank_path))
      return Problem{Fault::bad_input, tank_path, "is a file of readings", "a tank file",
                     "Give the tank first, then its readings."};
    return tank.problems();
  }
  return shop_of(session, *std::move(tank));
}

Result<Shop> shop_of(const Session& session, bath::Tank tank) {
  const plugin_host::BathTypes types = known_bath_types(session);
  const bath::BathType* type = types.find(tank.bath_type);
  if (!type) return unknown_bath_type(tank, types);
  if (Problems problems = unknown_aims(tank, *type); !problems.empty()) return problems;
  auto chemistry = bath::Chemistry::prepare(*type, tank.temperature, tank.idle_temperature);
  if (!chemistry) return chemistry.problems();
  const auto listed = std::ranges::find_if(types.list(), [&](const plugin_host::Listed& one) {
    return one.state == plugin_host::State::ready && one.id == type->id;
  });
  const std::string hash = listed == types.list().end() ? "" : " sha256:" + listed->sha256;
  return Shop{std::move(tank), *std::move(chemistry), type->id + " " + type->version + hash};
}

}  // namespace bathwright::work
