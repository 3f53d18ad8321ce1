// Figures in the units a person chose. Every factor is the engine's (units, matter/concentration.hpp); what
// cannot be told in the chosen unit stays in the engine's own, and says so.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <string>
#include <vector>

namespace bathwright::sheets {

/// The unit chosen for each kind of figure, one of unit_choices().
struct UnitNames {
  std::string concentration = "g/L", volume = "L", temperature = "°C", mass = "kg", liquid = "L",
              density = "kg/L";
};

/// What may be chosen for one kind of figure; the first is the usual one.
struct UnitChoice {
  std::string what;  ///< "concentrations"
  std::vector<std::string> all;
  std::string UnitNames::*kept;
};
[[nodiscard]] const std::vector<UnitChoice>& unit_choices();

/// How one g/L of a quantity is told in one solution.
struct LevelUnit {
  std::string symbol = "g/L";
  double per_g_per_L = 1;
  [[nodiscard]] double of(double g_per_L) const { return g_per_L * per_g_per_L; }
};

/// Likewise one kg of a solid or one L of a liquid.
struct AmountUnit {
  std::string symbol = "kg";
  double per_one = 1;
};

class Units {
 public:
  explicit Units(const UnitNames& chosen = {});

  /// A level of a quantity. `in`: the solution it is in, for the units that need its density or its water;
  /// nullptr where nobody knows it. g/L where that is lacking, or for N where the quantity has no
  /// equivalents.
  [[nodiscard]] LevelUnit level(const bath::Quantity& quantity, const bath::TankView* in) const;
  /// What a bare number means that is typed for a quantity, as the reader of readings takes it: the chosen
  /// unit, g/L where that needs a density, "N (2 eq/mol)".
  [[nodiscard]] std::string typed(const bath::Quantity& quantity) const;
  /// The chosen unit of levels needs what is known of a tank as it is now, and not of its future or past.
  [[nodiscard]] bool only_for_now() const;

  /// Of a chemical that goes in; `unit` is the engine's, "kg" or "L".
  [[nodiscard]] AmountUnit amount_unit(const std::string& unit) const;
  /// As one would weigh or measure it: "62 g" below a kilogram, "7.1 oz" below a pound.
  [[nodiscard]] std::string amount(double amount, const std::string& unit) const;
  [[nodiscard]] bool as_on_paper(const std::string& unit) const;  ///< slips have kg and L

  [[nodiscard]] std::string mass(double kg, int digits = 4) const;  ///< "62 kg"
  [[nodiscard]] std::string volume(double litres) const;            ///< "2340 L"
  [[nodiscard]] double volume_value(double litres) const { return litres * per_litre_; }
  [[nodiscard]] std::string volume_symbol() const;
  [[nodiscard]] std::string temperature(double celsius) const;  ///< "54 °C"
  [[nodiscard]] std::string density(double kg_per_L) const;     ///< "1.183 kg/L", "22.4 °Bé"

 private:
  std::string concentration_, volume_, temperature_, mass_, liquid_, density_;
  double per_litre_ = 1;
};

/// Equivalents per mole: the charge of an ion; of an acid or alkali the H^+ it is counted by. 0: it has none.
[[nodiscard]] double equivalents_of(const bath::Quantity& quantity);

/// kg of liquid water in a litre of a solution, from its density and everything that is dissolved:
/// density / (1 + sum m M / 1000). Nothing where the view has no species.
[[nodiscard]] std::optional<double> water_kg_per_L(const bath::TankView& view);

}  // namespace bathwright::sheets
