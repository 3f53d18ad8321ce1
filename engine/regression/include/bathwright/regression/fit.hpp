// Fits the fewest constants and interaction parameters to measurements: weighted least squares, with the
// engine's own solver as the model. For what nobody published; never for a number that the same measurements
// are then to test.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/solution/recipe.hpp>
#include <bathwright/speciation/equilibria.hpp>
#include <cstdint>
#include <optional>
#include <string>
#include <variant>
#include <vector>

namespace bathwright::regression {

enum class Quantity : std::uint8_t {
  solubility,                 ///< of a solid in excess: mol per kg of liquid water
  pH,                         ///< -log10 a(H^+)
  water_activity,             ///< mole-fraction scale
  osmotic_coefficient,        ///< over the stoichiometric molalities, as if fully dissociated
  mean_activity_coefficient,  ///< of a salt, acid or base: stoichiometric, molality scale
  molality,                   ///< of a dissolved species: mol per kg of liquid water
  partial_pressure            ///< of a gas over the solution, atm
};

struct Measurement {
  solution::Recipe recipe;  ///< its model is that of the task
  Quantity quantity = Quantity::pH;
  std::string of;            ///< solid, species, gas or salt as the recipe writes it; else empty
  double value = 0;          ///< in the unit of the quantity
  double uncertainty = 1;    ///< one standard uncertainty, in the same unit; > 0
  bool held_out = false;     ///< not fitted: tells how well the fit predicts
  std::string label, where;  ///< what it is called; file:line for messages
};

/// Whether it is of the whole solution, so that `of` says nothing.
[[nodiscard]] constexpr bool of_solution(Quantity quantity) {
  return quantity == Quantity::pH || quantity == Quantity::water_activity ||
         quantity == Quantity::osmotic_coefficient;
}

enum class Parameter : std::uint8_t { log10_K, dH_kJ_per_mol, dCp_J_per_molK };

/// Of a species, solid or gas by the name of its row.
struct OfConstant {
  std::string constant;
  Parameter parameter = Parameter::log10_K;
};

/// One number to be found. It starts at what the equilibria of the task or the tables of the activity model
/// say; value and source of an interaction are not read.
struct Unknown {
  std::variant<OfConstant, activity::Interaction> what;
  std::string where;
};

/// "dH_kJ_per_mol" of "H3BO3"; "theta" of "Cu^2+ - Na^+".
[[nodiscard]] std::string_view parameter_name(const Unknown& unknown);
[[nodiscard]] std::string owner(const Unknown& unknown);

struct Task {
  std::string source;     ///< of the measurements, for the label of what is found
  std::string fitted_by;  ///< the shop to whose tank it is fitted; empty: a constant for the tables
  activity::ModelKind model = activity::ModelKind::pitzer;
  speciation::Equilibria equilibria;  ///< of the model's convention, with the following added
  std::vector<speciation::StatedSpecies> own_species;
  std::vector<speciation::StatedSolid> own_solids;
  std::vector<Unknown> unknowns;
  std::vector<Measurement> measurements;
};

struct Found {
  Unknown unknown;
  double before = 0, value = 0;
  double standard_error = 0;
};

struct Compared {
  std::string label;
  double measured = 0, uncertainty = 1;
  std::optional<double> before, computed;  ///< with the start, with the fit; nothing: not solved
  bool held_out = false;
};

struct Fit {
  std::vector<Found> found;
  /// (n, n), row by row: of the unknowns, in their units. From the stated uncertainties, widened by
  /// reduced_chi2 where that is above 1.
  std::vector<double> covariance;
  std::vector<Compared> measurements;
  std::size_t degrees_of_freedom = 0;  ///< fitted measurements less unknowns
  double reduced_chi2 = 0;             ///< sum ((computed - measured)/uncertainty)^2 / degrees of freedom
  double fit_error = 0;                ///< root mean square of computed/measured - 1 (pH: of the difference)
  std::optional<double> test_error;    ///< the same over what was held out
  std::optional<double> test_error_before;  ///< and that with the start
  int steps = 0;
};

/// Minimises the sum of ((computed - measured)/uncertainty)^2 over what is not held out by Gauss-Newton with
/// halved steps; derivatives by central differences, the linear problems by rank-revealing QR. Ends when a
/// step moves no unknown by 1e-4 of its standard error, or after 50 steps (not_converged).
/// Fails on an unknown that names no constant or interaction, fewer measurements than unknowns, a measurement
/// that cannot be solved at the start, and on unknowns, or combinations of them, that the measurements do not
/// determine (all named).
Result<Fit> fit(const Task& task);

/// Where the numbers come from: "regressed from ...", or "fitted to this tank by ..., from ...". Also the
/// source of an interaction found, so that every answer with it says so.
[[nodiscard]] std::string provenance(const Task& task);

[[nodiscard]] std::string_view name(Parameter parameter);
[[nodiscard]] std::string_view name(Quantity quantity);

}  // namespace bathwright::regression
