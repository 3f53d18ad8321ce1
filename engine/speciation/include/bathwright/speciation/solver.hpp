// Solves a chemical system: amounts in, equilibrium out. Prepared once for a system, an activity model and a
// temperature; then any number of threads may solve with it. Read next: session.hpp for many solves in a row,
// verify.hpp for the check.
#pragma once

#include <bathwright/activity/make_model.hpp>
#include <bathwright/speciation/system.hpp>
#include <cstdint>
#include <memory>
#include <optional>

namespace bathwright::speciation {

enum class SolidRule : std::uint8_t {
  report_only,      ///< saturation is reported, nothing precipitates
  may_precipitate,  ///< forms when it would be supersaturated
  in_excess         ///< present without limit: dissolves or grows until saturated
};

struct HeldGas {
  std::size_t gas;      ///< position in ChemicalSystem::gases()
  double pressure_bar;  ///< > 0
};

/// pH held by adding the acid or base of a counter-ion (H^+ with an anion, or the cation's hydroxide).
struct HeldPh {
  double pH;
  std::size_t counter_ion;  ///< position in ChemicalSystem::components(), not H^+
};

/// What is in the vessel. Amounts are analytical totals: dissolved and solid together.
struct Task {
  std::vector<double> component_mol;  ///< one per component, mol; >= 0, except H^+ (negative: net alkali)
  double water_kg = 1;                ///< all water, free and as crystal water of what may form; > 0
  std::vector<SolidRule> solids;      ///< one per solid, or empty: report_only for all
  std::vector<HeldGas> gases;
  std::optional<HeldPh> pH;
};

/// Largest violations, computed afresh from the answer by verify.cpp.
struct Residuals {
  double mass_balance = 0;  ///< relative to the component's total (absolute mol for a total of zero)
  double mass_action = 0;   ///< |ln a(species) - ln K - sum nu ln a(component)|
  double saturation =
      0;  ///< ln units above saturation of a solid that may precipitate, or off it for one present
  double charge_mol_per_kg = 0;
  double negative_solid = 0;  ///< mol of a precipitate below zero
};

struct Equilibrium {
  std::vector<double> molality;     ///< per species, mol/kg of the water that is left as liquid
  std::vector<double> ln_gamma;     ///< per species
  std::vector<double> ln_activity;  ///< per species
  double ln_water_activity = 0;
  double water_kg = 0;                   ///< liquid water
  double ionic_strength = 0;             ///< mol/kg
  double osmotic_coefficient = 1;        ///< over the sum of the true molalities
  std::vector<double> solid_mol;         ///< per solid: formed (> 0), or dissolved from an excess (< 0)
  std::vector<double> saturation_index;  ///< per solid, log10
  std::vector<double> gas_bar;           ///< per gas: partial pressure over the solution
  std::vector<double> gas_mol;           ///< per held gas: taken up (negative: given off)
  double held_ph_mol = 0;                ///< H^+ added to hold the pH, with its counter-ion
  bool stable = true;                    ///< the Gibbs energy curves upward: no other solution nearby
  int iterations = 0;
  Residuals residuals;

  [[nodiscard]] double pH() const;  ///< -log10 a(H^+)
};

/// ln of every constant at the temperature, in the order of the system.
struct Constants {
  std::vector<double> species, solids, gases;
};

class Solver {
 public:
  /// t: 0-100 degC. Fails as make_model does, or for a solid range that excludes the temperature nothing:
  /// such solids are only reported.
  static Result<Solver> prepare(std::shared_ptr<const ChemicalSystem> system, activity::ModelKind model,
                                units::Celsius t, activity::AcidSet acid_set = activity::AcidSet::sulfate);

  /// The same system, model and sets of parameters at another temperature.
  [[nodiscard]] Result<Solver> at_temperature(units::Celsius t) const;

  /// Converges to: relative mass balance 1e-12, ln mass action 1e-10, ln saturation 1e-8, as verified. Fails,
  /// never with a silent wrong answer, on: a total that is not finite or negative, water not positive
  /// (bad_input); a pH or gas pressure that cannot be held with what was given, a solution that dries up or
  /// that the model cannot follow (out_of_range); no convergence (not_converged, with the numbers).
  Result<Equilibrium> solve(const Task& task) const;

  [[nodiscard]] const ChemicalSystem& system() const { return *system_; }
  [[nodiscard]] const activity::ActivityModel& model() const { return *model_; }
  [[nodiscard]] units::Celsius temperature() const { return t_; }
  [[nodiscard]] const Constants& ln_K() const { return ln_K_; }

  /// Whether a solid's constant covers this temperature; one that does not never precipitates.
  [[nodiscard]] bool covers(std::size_t solid) const;

 private:
  Solver() = default;
  std::shared_ptr<const ChemicalSystem> system_;
  std::shared_ptr<const activity::ActivityModel> model_;
  units::Celsius t_;
  activity::AcidSet acid_set_ = activity::AcidSet::sulfate;
  Constants ln_K_;
};

/// A total below this counts as absent: far less than one ion, and too near the end of what a double can
/// divide by.
inline constexpr double absent_mol = 1e-250;

/// mol of water per kg.
inline constexpr double water_mol_per_kg = 1 / activity::water_kg_per_mol;

}  // namespace bathwright::speciation
