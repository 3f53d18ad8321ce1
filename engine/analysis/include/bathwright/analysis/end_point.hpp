// How far the change of an indicator is from the equivalence of a titration: the titrated flask, speciated.
// Not for: the eye that sees it, which is in the uncertainty of the end point.
#pragma once

#include <bathwright/analysis/method.hpp>
#include <bathwright/analysis/readings.hpp>
#include <bathwright/bath/chemistry.hpp>

namespace bathwright::analysis {

struct EndPointBias {
  std::string quantity, method, indicator;
  double mL = 0;     ///< titrant at the change, less that at the equivalence: below 0 the result is low
  double share = 0;  ///< the same over the titrant at the equivalence
  /// mL at the two ends of the indicator's range; as `mL` where it has none.
  double from_mL = 0, to_mL = 0;
};

/// A titration whose end point was not computed.
struct EndPointUnknown {
  std::string quantity, method, why;
};

/// A flask that is being titrated.
struct TitratedFlask {
  speciation::Composition holds_mol;  ///< the sample, mol of basis species; H^+ below 0: alkali
  double water_kg = 0;                ///< at the equivalence
  std::string titrant;                ///< its formula: "NaOH", "HCl", "AgNO3"
  double equivalence_mol = 0;         ///< of titrant
};

/// Where the indicator changes: at a pH, with the first of a solid, or where so little of a metal is free.
struct Change {
  std::map<std::string, double> adds_mol{};  ///< reagents, by neutral formula
  std::optional<double> start_pH{};          ///< titrated to this before the reagents were added
  double pH = 0;
  std::string solid{};               ///< "Ag2CrO4"; empty: the pH counts
  std::vector<std::string> forms{};  ///< solids that precipitate on the way
  std::optional<double> held_pH{};   ///< for a solid or a metal
  std::string metal{};  ///< the indicator's ion, "Ni^2+", where it changes with that: complexometry
  double pM = 0;        ///< -log10 of its free molality at the change
};

/// mol of titrant between the equivalence and the change, at 25 degC with the activity coefficients of SIT:
/// below 0 where the change comes first. Of a pH, the titrant that brings the flask there; of a solid, that
/// which saturates it. A start_pH is reached without the reagents, and what that takes is not counted. Fails
/// on formulae that no known ions make up, solids nobody knows, and where the flask cannot be solved.
Result<double> titrant_beyond_equivalence(const TitratedFlask& flask, const Change& change);

/// The bias of a titration of this bath: equivalence is what the levels of `state` stand for. Fails, with why
/// in Problem::what, for a method without a row in data/analysis/end_points.csv, where there is nothing to
/// titrate, and where the flask cannot be solved. What the eye needs to see the change, and what the air
/// brings or takes, are not in it.
[[nodiscard]] Result<EndPointBias> end_point_bias(const Titration& titration, const Method& method,
                                                  const bath::Quantity& quantity,
                                                  const bath::Chemistry& chemistry,
                                                  const bath::TankState& state);

}  // namespace bathwright::analysis
