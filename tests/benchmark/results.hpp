// What was measured, as the page RESULTS.md shows it.
#pragma once

#include <string>
#include <vector>

namespace bathwright::benchmark {

struct Row {
  std::string system, model, totals, method;
  std::size_t components = 0, species = 0, solids = 0;
  double median_us = 0;  ///< over the cases it solved; NaN: none
  double ratio = 0;      ///< of medians, to the engine on the same cases
  std::size_t failures = 0, cases = 0;
  double worst_residual = 0;  ///< among the answers that count
};

/// The page: how it was made, then one table for each system. Empty: the file was written; else the reason.
std::string write_results(const std::string& file, const std::vector<Row>& rows, double spread,
                          unsigned seed);

}  // namespace bathwright::benchmark
