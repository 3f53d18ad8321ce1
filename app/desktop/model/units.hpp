// Figures in the units a person chose.
#pragma once

#include <string>
#include <vector>

#include "settings.hpp"

namespace bathwright::desktop {

class Units {
 public:
  explicit Units(const Settings& settings = {});

  /// The choices, as the settings page lists them; the first is the usual one.
  [[nodiscard]] static const std::vector<std::string>& concentrations();
  [[nodiscard]] static const std::vector<std::string>& volumes();
  [[nodiscard]] static const std::vector<std::string>& temperatures();

  [[nodiscard]] const std::string& concentration() const { return concentration_; }
  [[nodiscard]] double level(double g_per_L) const { return g_per_L * per_g_per_L_; }
  [[nodiscard]] std::string volume(double litres) const;        ///< "2340 L"
  [[nodiscard]] std::string temperature(double celsius) const;  ///< "54 °C"

 private:
  std::string concentration_, volume_, temperature_;
  double per_g_per_L_ = 1, per_litre_ = 1;
};

}  // namespace bathwright::desktop
