// Many solves of the three baths from random totals: what failed, what was refused and why, how exact the
// answers are, how long one takes. Knows nothing of a test framework.
#pragma once

#include <array>
#include <cstddef>
#include <cstdint>
#include <map>
#include <string>
#include <vector>

#include "../../support/bath_systems.hpp"

namespace bathwright::speciation {

/// Where the totals of a case come from; the cases take them in turn.
enum class Totals : std::uint8_t {
  near_usual,       ///< the bath's amounts, halved to doubled; its own solids may form
  wild_own_solids,  ///< wild_totals; the bath's own solids may form
  wild_all_solids   ///< wild_totals; every solid may form
};
inline constexpr std::array all_totals{Totals::near_usual, Totals::wild_own_solids, Totals::wild_all_solids};

/// The cases take these in turn, degC.
inline constexpr std::array sweep_temperatures_C{5.0, 25.0, 60.0, 90.0};

inline constexpr std::array sweep_models{activity::ModelKind::davies, activity::ModelKind::debye_huckel,
                                         activity::ModelKind::sit, activity::ModelKind::pitzer};

/// A bath under one model. A case is one cold solve, one warm solve from its answer with one total moved by
/// 2 %, and one cold solve of the moved task to compare with.
struct SweepRow {
  std::string system, model;
  std::size_t cases = 0, answers = 0, warm_compared = 0;
  std::vector<std::string> failures;            ///< with all that is needed to see it again
  std::map<std::string, std::size_t> refusals;  ///< out_of_range: how often, by reason
  std::size_t refused_near_usual = 0;           ///< of those, near a bath that a shop runs
  std::size_t not_stable = 0;                   ///< answers marked as beyond the model's range
  std::size_t not_stable_near_usual = 0;
  /// Warm and cold start led to two answers, neither of which is called valid (else it is a failure): outside
  /// its range a model may have more than one.
  std::size_t several_equilibria = 0;
  Residuals worst;
  double worst_warm_difference = 0;  ///< relative, of a species above 1e-12 mol/kg; of the same equilibrium
  double median_cold_us = 0, median_warm_us = 0;
};

/// The same seed gives the same cases, on any number of threads.
SweepRow sweep(const BathSystem& bath, activity::ModelKind model, unsigned seed, std::size_t cases,
               unsigned threads);

/// Every bath under every model.
std::vector<SweepRow> sweep_all(unsigned seed, std::size_t cases, unsigned threads);

/// As tables in Markdown.
std::string markdown(const std::vector<SweepRow>& rows);

}  // namespace bathwright::speciation
