#include "model/settings.hpp"

#include <unistd.h>

#include <catch2/catch.hpp>
#include <fstream>

using namespace bathwright;
using namespace bathwright::desktop;

TEST_CASE("settings of before are read, unknown units become the usual ones", "[unit][desktop]") {
  const auto file =
      std::filesystem::temp_directory_path() / ("desktop-" + std::to_string(::getpid()) + ".json");
  std::ofstream(file) << R"({"shop": "/shop", "scale": 1.5, "concentration": "oz/gal", "volume": "barrel"})";
  const Settings settings = kept_settings(file);
  CHECK(settings.units.concentration == "oz/US gal");
  CHECK(settings.units.mass == "kg");
  CHECK(sheets::Units(settings.units).volume(2340) == "2340 L");
  Settings changed = settings;
  changed.units.mass = "lb", changed.units.liquid = "fl oz", changed.units.density = "°Tw";
  REQUIRE(keep(file, changed));
  const Settings again = kept_settings(file);
  CHECK(again.units.mass == "lb");
  CHECK(again.units.liquid == "fl oz");
  CHECK(again.units.density == "°Tw");
  std::filesystem::remove(file);
}
