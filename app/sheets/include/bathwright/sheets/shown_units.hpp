// Figures in the units a person chose. Every factor is the engine's (units, matter/concentration.hpp); what
// cannot be told in the chosen unit stays in the engine's own, and says so.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/bath/chemistry.hpp>
#include <optional>
#include <string>
#include <string_view>
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

/// Of a list of units in any order, "oz/US gal, lb, US gal, degF": each counts for the kind of figure it is
/// of; L, US gal and imp gal for the volumes of tanks and for liquids, unless another word says one of them.
/// What no word says stays the usual unit. Case and spaces do not matter; degC, degF, degBe and degTw are °C,
/// °F, °Bé and °Tw. Fails on a word that is no unit of a kind, and on two of a kind.
[[nodiscard]] Result<UnitNames> unit_names(std::string_view list);

/// What of a solution the units by mass and by kg of water need.
struct Medium {
  double density_kg_per_L = 0;                ///< 0: not known
  std::optional<double> water_kg_per_L = {};  ///< of liquid water
};

/// How one g/L of a quantity is told in one solution.
struct LevelUnit {
  std::string symbol = "g/L";
  double per_g_per_L = 1;
  [[nodiscard]] double of(double g_per_L) const { return g_per_L * per_g_per_L; }
  /// As many as resolve what so many resolve of g/L.
  [[nodiscard]] int decimals(int of_g_per_L) const;
};

/// Likewise one kg of a solid or one L of a liquid.
struct AmountUnit {
  std::string symbol = "kg";
  double per_one = 1;
};

class Units {
 public:
  Units() : Units(UnitNames{}) {}  ///< as the engine has them
  explicit Units(const UnitNames& chosen);

  /// A level of a quantity. `in`: the solution it is in, for the units that need its density or its water.
  /// g/L where that is lacking, or for N where the quantity has no equivalents.
  [[nodiscard]] LevelUnit level(const bath::Quantity& quantity, const Medium& in = {}) const;
  /// Of a view, what the chosen unit needs of it.
  [[nodiscard]] Medium medium_of(const bath::TankView& view) const;
  /// Of what has no formula, or none that is known: the chosen unit where it is a mass in a volume, else g/L.
  [[nodiscard]] LevelUnit any_level() const;
  /// What a bare number means that is typed for a quantity, as the reader of readings takes it: the chosen
  /// unit, g/L where that needs a density, "N (2 eq/mol)".
  [[nodiscard]] std::string typed(const bath::Quantity& quantity) const;
  /// The chosen unit of levels needs a Medium; its water.
  [[nodiscard]] bool needs_medium() const;
  [[nodiscard]] bool needs_water() const;

  /// Of a chemical that goes in; `unit` is the engine's, "kg" or "L".
  [[nodiscard]] AmountUnit amount_unit(const std::string& unit) const;
  /// As one would weigh or measure it: "62 g" below a kilogram, "7.1 oz" below a pound.
  [[nodiscard]] std::string amount(double amount, const std::string& unit) const;
  [[nodiscard]] AmountUnit small_mass() const;  ///< per kg, of what comes to little: g, oz

  [[nodiscard]] std::string mass(double kg, int digits = 4) const;        ///< "62 kg"
  [[nodiscard]] std::string volume(double litres, int digits = 4) const;  ///< "2340 L"
  [[nodiscard]] std::string liquid(double litres,
                                   int digits = 4) const;  ///< what is measured out, as "2.5 L"
  [[nodiscard]] double volume_value(double litres) const { return litres * per_litre_; }
  [[nodiscard]] std::string volume_symbol() const;
  /// The figure alone, as fine as so many decimals of a litre or finer.
  [[nodiscard]] std::string volume_figure(double litres, int decimals = 0) const;
  [[nodiscard]] std::string temperature(double celsius) const;  ///< "54 °C"
  [[nodiscard]] std::string degrees(units::Celsius at) const;   ///< the same as sheets have it: "54.0 degC"
  [[nodiscard]] std::string warming(double by_C) const;         ///< a difference: "3.6 degF" of 2
  /// "1.183 kg/L", "22.4 °Bé"; `decimals` of kg/L and SG.
  [[nodiscard]] std::string density(double kg_per_L, int decimals = 3) const;

  /// For the foot of a sheet: which units it has, and which the log and the engine's sentences; "" where they
  /// are the same.
  [[nodiscard]] std::string note() const;

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
