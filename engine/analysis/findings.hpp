// The readings of one analysis as findings: each titration worked out, each stated concentration in g/L.
#pragma once

#include <bathwright/analysis/analysis.hpp>

#include "levels.hpp"

namespace bathwright::analysis {

struct Findings {
  std::vector<Finding> all;
  std::vector<Titration>
      titrations;  ///< with the strengths of their titrants, by whatever way these were given
  std::vector<std::string> notes;
};

/// Fails with every reading that cannot be used, and why.
Result<Findings> findings_of(const Readings& readings, const bath::BathType& type);

/// One finding per quantity: the mean of those that share one. Adds a suspect where two differ by more than 3
/// standard uncertainties of their difference.
std::vector<Finding> united(const std::vector<Finding>& findings, std::vector<Suspect>& suspects);

/// |a - b| against 3 standard uncertainties of the difference, the two taken as independent.
[[nodiscard]] bool disagree(double a, double u_a, double b, double u_b);

}  // namespace bathwright::analysis
