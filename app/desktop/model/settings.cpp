#include "settings.hpp"

#include <algorithm>
#include <bathwright/base/whole_file.hpp>
#include <fstream>
#include <iterator>
#include <nlohmann/json.hpp>

namespace bathwright::desktop {

using Json = nlohmann::json;

Settings kept_settings(const std::filesystem::path& file) {
  Settings settings;
  std::ifstream in(file, std::ios::binary);
  const Json kept = Json::parse(std::string(std::istreambuf_iterator<char>(in), {}), nullptr, false);
  if (!kept.is_object()) return settings;
  const auto text = [&](const char* key, std::string otherwise) {
    return kept.contains(key) && kept[key].is_string() ? kept[key].get<std::string>() : otherwise;
  };
  settings.shop = text("shop", "");
  settings.units.concentration = text("concentration", settings.units.concentration);
  settings.units.volume = text("volume", settings.units.volume);
  settings.units.temperature = text("temperature", settings.units.temperature);
  settings.print_command = text("print_command", settings.print_command);
  settings.units.mass = text("mass", settings.units.mass);
  settings.units.liquid = text("liquid", settings.units.liquid);
  settings.units.density = text("density", settings.units.density);
  if (settings.units.concentration == "oz/gal")
    settings.units.concentration = "oz/US gal";  // as it was called before
  if (kept.contains("scale") && kept["scale"].is_number())
    settings.scale = std::clamp(kept["scale"].get<float>(), 0.0F, 2.0F);
  settings.dark = kept.contains("dark") && kept["dark"] == true;
  settings.letter = kept.contains("letter") && kept["letter"] == true;
  return settings;
}

Outcome keep(const std::filesystem::path& file, const Settings& settings) {
  const Json kept = {{"shop", settings.shop.string()},
                     {"scale", settings.scale},
                     {"dark", settings.dark},
                     {"letter", settings.letter},
                     {"print_command", settings.print_command},
                     {"concentration", settings.units.concentration},
                     {"volume", settings.units.volume},
                     {"temperature", settings.units.temperature},
                     {"mass", settings.units.mass},
                     {"liquid", settings.units.liquid},
                     {"density", settings.units.density}};
  return write_whole(file, kept.dump(1, ' ', false, Json::error_handler_t::replace));
}

}  // namespace bathwright::desktop
