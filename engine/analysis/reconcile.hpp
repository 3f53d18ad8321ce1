// What is weighed when book and lab are reconciled: the readings of an analysis and what was known before, as
// a weighing of amounts. Read next: weighing.hpp for the algebra, explanations.hpp for what a misfit may
// mean.
#pragma once

#include <bathwright/analysis/carried.hpp>
#include <bathwright/analysis/misfit.hpp>
#include <bathwright/bath/chemistry.hpp>
#include <optional>

#include "levels.hpp"
#include "weighing.hpp"

namespace bathwright::analysis {

/// A weighing with its names. Weighed are the components found by analysis or from the book; H^+ that follows
/// from the pH is taken as it is, and the counter-ion is what balances the charges.
struct Gathered {
  Weighing weighing;
  std::vector<std::string> what;                   ///< of each reading: a quantity's id, "volume"
  std::vector<std::string> doubt;                  ///< of each column of the spread
  std::vector<std::optional<std::int64_t>> entry;  ///< of each column
  int unknown = 0;                                 ///< columns of which nothing is known beforehand
  std::vector<std::size_t> components;             ///< of each amount weighed
  Eigen::MatrixXd whole;                           ///< components of the bath from amounts weighed:
  Eigen::VectorXd rest;                            ///<   whole * amounts + rest

  [[nodiscard]] int degrees_of_freedom() const {
    return static_cast<int>(weighing.readings.size()) - unknown;
  }
  /// Component amounts, and perhaps the volume they raise the tank by, as a shift of amounts and volume.
  [[nodiscard]] Eigen::VectorXd shift(const std::vector<double>& component_mol, double volume_L) const;
  /// g of a quantity per mol of each amount weighed, and what the rest holds of it.
  [[nodiscard]] Eigen::VectorXd g_per_mol(const bath::Quantity& quantity,
                                          const bath::Chemistry& chemistry) const;
  [[nodiscard]] double g_fixed(const bath::Quantity& quantity, const bath::Chemistry& chemistry) const;
};

struct VolumeRead {
  double L = 0, u_L = 0;
};

/// `findings`: one for each quantity. Without a book the weighing starts from `start_mol`, of which nothing
/// is known; with one `start_mol` is not looked at. `proton_mol`: H^+ where it follows from the pH.
[[nodiscard]] Gathered gather(const std::vector<Finding>& findings, VolumeRead volume,
                              const std::vector<double>& start_mol, double proton_mol,
                              const std::optional<Carried>& carried, const bath::Chemistry& chemistry);

/// A quantity in the reconciled tank, g/L.
struct ReconciledLevel {
  double g_per_L, u_g_per_L;
};
[[nodiscard]] ReconciledLevel level_of(const bath::Quantity& quantity, const Gathered& gathered,
                                       const Weighed& weighed, const bath::Chemistry& chemistry);

/// Covariance of all component amounts and last of the volume, mol and L, row after row.
[[nodiscard]] std::vector<double> covariance_of(const Gathered& gathered, const Weighed& weighed);

/// Chi-square and residuals. There is an alarm where chi-square, or the largest of the residuals for their
/// number, would be as large in less than `false_alarms` of analyses in which nothing is wrong (half of it
/// for each; the residuals by Bonferroni).
[[nodiscard]] Misfit tested(const Gathered& gathered, const Weighed& weighed);

/// One analysis in a thousand: a shop with 12 tanks and 3 shifts meets one such in a month.
inline constexpr double false_alarms = 1e-3;

}  // namespace bathwright::analysis
