#include "units.hpp"

#include <algorithm>
#include <bathwright/units/read.hpp>
#include <bathwright/units/show.hpp>

namespace bathwright::desktop {
namespace {

std::string one_of(const std::vector<std::string>& choices, const std::string& wanted) {
  return std::ranges::find(choices, wanted) == choices.end() ? choices.front() : wanted;
}

}  // namespace

const std::vector<std::string>& Units::concentrations() {
  static const std::vector<std::string> all{"g/L", "oz/gal", "mg/L"};
  return all;
}

const std::vector<std::string>& Units::volumes() {
  static const std::vector<std::string> all{"L", "US gal", "imp gal", "m3"};
  return all;
}

const std::vector<std::string>& Units::temperatures() {
  static const std::vector<std::string> all{"°C", "°F"};
  return all;
}

Units::Units(const Settings& settings)
    : concentration_(one_of(concentrations(), settings.concentration)),
      volume_(one_of(volumes(), settings.volume)),
      temperature_(one_of(temperatures(), settings.temperature)) {
  // The factors are the reader's, so that what is shown here means what is typed there.
  constexpr double g_per_L_per_oz_per_gal =
      28.349523125 / 3.785411784;  // avoirdupois ounce, US gallon: exact
  if (concentration_ == "oz/gal") per_g_per_L_ = 1 / g_per_L_per_oz_per_gal;
  if (concentration_ == "mg/L") per_g_per_L_ = 1000;
  const auto one = units::read_volume("1 " + volume_, "");
  per_litre_ = one ? 1 / one->v : 1;
}

std::string Units::volume(double litres) const {
  return units::significant(litres * per_litre_) + " " + (volume_ == "m3" ? "m³" : volume_);
}

std::string Units::temperature(double celsius) const {
  constexpr int digits = 3;
  return units::significant(temperature_ == "°F" ? celsius * 9 / 5 + 32 : celsius, digits) + " " +
         temperature_;
}

}  // namespace bathwright::desktop
