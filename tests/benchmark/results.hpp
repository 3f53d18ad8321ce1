// What was measured, as the page RESULTS.md shows it.
#pragma once

#include <string>
#include <vector>

namespace bathwright::benchmark {

struct Row {
  std::string system, model, cases_from, method;
  std::size_t components = 0, species = 0, solids = 0;
  double time_us = 0;  ///< median of the cases it solved (NaN: none); of a Monte Carlo, of the slower thread
                       ///< over all samples
  double ratio = 0;    ///< of the times, to the engine
  std::size_t failures = 0, cases = 0;
  double worst_residual = 0;  ///< among the answers that count
};

/// The page: how it was made, then one table for each system. Empty: the file was written; else the reason.
///   how  lines about the cases
std::string write_results(const std::string& file, const std::vector<Row>& rows, const std::string& how);

}  // namespace bathwright::benchmark
