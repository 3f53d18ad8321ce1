// A bath type made ready to compute for one tank: amounts in, concentrations, pH, free ions, headroom and
// volume out. Read next: bath_type.hpp for the words, speciation/solver.hpp for what stands behind.
#pragma once

#include <bathwright/bath/tank.hpp>
#include <bathwright/matter/component_density.hpp>
#include <bathwright/speciation/components.hpp>
#include <bathwright/speciation/solver.hpp>
#include <map>

namespace bathwright::bath {

/// A solid's distance from forming, at the tank's working and idle temperature.
struct Headroom {
  std::string solid, formula, sign_in_tank;
  bool slow = false;
  double working_log10 = 0, idle_log10 = 0;  ///< -log10(ion product / K): positive below saturation
  /// kg of the solid that would still dissolve in the tank (positive), or would crystallise from it
  /// (negative). NaN for a solid whose constant does not cover the temperature, or that only a change of pH
  /// can form (hydroxides).
  double working_kg = not_given, idle_kg = not_given;
  /// pH above which a hydroxide would form at the working temperature; NaN for other solids.
  double forms_above_pH = not_given;
  /// Whether the idle form differs (NiSO4 hexahydrate hot, heptahydrate cold): only the covered temperature
  /// counts.
  bool covers_working = true, covers_idle = true;
  /// Standard uncertainties of the above; only view_with_uncertainty (uncertainty.hpp) gives them.
  std::optional<double> u_working_log10, u_idle_log10, u_working_kg, u_idle_kg, u_forms_above_pH;
};

struct SpeciesView {
  std::string name;
  double molality, gamma, log10_activity;
  std::optional<double> u_log10_activity{};  ///< as those of Headroom
};

struct GasView {
  std::string name;
  double bar;  ///< partial pressure over the liquid at the working temperature
};

struct IndicatorValue {
  std::string id, label, meaning, unit;
  std::optional<double> value;  ///< nothing: not available, `note` says why
  std::string note;
};

/// Everything that can be said of a tank's state.
struct TankView {
  double volume_L = 0, density_kg_per_L = 0, pH = 0, ionic_strength = 0, water_activity = 0;
  std::optional<double> u_pH;            ///< where the pH is computed; as those of Headroom
  std::vector<double> quantity_g_per_L;  ///< in the order of BathType::quantities
  std::vector<SpeciesView> species;      ///< by falling molality
  std::vector<GasView> gases;            ///< over the tank, at equilibrium
  std::vector<Headroom> headroom;
  std::vector<IndicatorValue> indicators;
  std::string_view model;             ///< of the activity coefficients
  bool valid = true;                  ///< false: indicative only, a warning says why
  std::vector<std::string> missing;   ///< interactions nobody published that matter here
  std::vector<std::string> warnings;  ///< those, and estimates, ranges left, doubts about the density
};

/// What a unit of something brings into the solution: a kg of a stock chemical, a mol of a formula.
struct Brings {
  std::vector<double> component_mol;  ///< per unit
  double water_kg = 0;                ///< per unit, crystal water included
};

/// What is in the tank, as the solver asks for it: nothing precipitates, no pH is held.
[[nodiscard]] speciation::Task task_of(const TankState& state);

class Chemistry {
 public:
  /// Fails on a component or solid the tables do not know, a temperature outside the bath type's range.
  static Result<Chemistry> prepare(const BathType& type, units::Celsius working, units::Celsius idle);

  [[nodiscard]] const BathType& type() const;
  /// Basis species the totals are counted in; H^+ first.
  [[nodiscard]] const std::vector<std::string>& components() const;
  [[nodiscard]] std::size_t found_by_charge() const;  ///< the component that electroneutrality gives
  /// The ion that comes or goes with H^+ where a pH is held: the one found by charge, or, where that is H^+
  /// itself, the first other ion.
  [[nodiscard]] std::size_t counter_ion() const;
  [[nodiscard]] const speciation::Solver& working() const;
  [[nodiscard]] const speciation::Solver& idle() const;
  [[nodiscard]] units::Celsius working_temperature() const;
  [[nodiscard]] units::Celsius idle_temperature() const;

  /// Volume of the solution at its temperature, L. Smooth but where acid turns to alkali.
  [[nodiscard]] double volume_L(const TankState& state) const;
  [[nodiscard]] units::KilogramsPerLitre density(const TankState& state) const;

  /// Total amount of a quantity in the tank, mol; in g/L divide by volume and multiply by the formula's molar
  /// mass.
  [[nodiscard]] double quantity_mol(const Quantity& quantity, std::span<const double> component_mol) const;
  [[nodiscard]] double quantity_g_per_L(const Quantity& quantity, const TankState& state) const;

  /// The equilibrium at the working temperature, nothing precipitating (what supersaturates is reported).
  [[nodiscard]] Result<speciation::Equilibrium> speciate(const TankState& state) const;

  /// The full view: levels, pH, species, headroom at both temperatures, indicators, warnings.
  [[nodiscard]] Result<TankView> view(const TankState& state) const;
  /// Only the headroom in log10 units and pH: what a step check and a path need; much cheaper than view().
  [[nodiscard]] Result<TankView> quick_view(const TankState& state) const;

  /// The state of a tank from its levels: g/L per quantity id (those of components found by analysis, or
  /// their salt views), pH, volume. What is found by charge follows from electroneutrality (at that pH, where
  /// the acid is found by pH; elsewhere the pH is not looked at), the water from the density model, so that
  /// volume_L gives the volume back. Fails on a component nobody gave, levels that leave no room for what is
  /// found by charge (names them), a pH that is missing or cannot be reached.
  [[nodiscard]] Result<TankState> state_from(const std::map<std::string, double>& g_per_L,
                                             std::optional<double> pH, units::Litres volume,
                                             units::Celsius temperature) const;

  /// What a mol of a formula brings; an ion brings its charge with it. Fails as brings().
  [[nodiscard]] Result<Brings> brings_per_mol(const matter::Formula& formula) const;
  /// What a kg of a product brings, what its lot contains beside its substance included: of an ion, the
  /// charge is made up by the component found by charge. Fails when something needs a component the bath type
  /// does not have.
  [[nodiscard]] Result<Brings> brings(const matter::StockChemical& stock) const;

  /// The state after `kg` of something is stirred in.
  [[nodiscard]] static TankState after(TankState state, const Brings& brings, double kg);

 private:
  struct Prepared;
  [[nodiscard]] TankView view_of(const TankState& state, const speciation::Equilibrium& now,
                                 const speciation::Equilibrium& cold) const;
  std::shared_ptr<const Prepared> prepared_;
};

}  // namespace bathwright::bath
