// A small dense linear programme, solved by Clp.
#pragma once

#include <bathwright/base/result.hpp>
#include <vector>

namespace bathwright::dosing {

/// minimise objective'x  subject to  row_lower <= A x <= row_upper,  0 <= x <= upper. Infinite bounds:
/// +-HUGE_VAL.
struct LinearProgramme {
  std::vector<double> objective;          ///< (columns)
  std::vector<double> upper;              ///< (columns)
  std::vector<std::vector<double>> rows;  ///< each (columns)
  std::vector<double> row_lower, row_upper;

  void add_row(std::vector<double> coefficients, double lower, double upper_bound);
};

/// The optimal x. Fails (not_converged) when there is none.
Result<std::vector<double>> solve(const LinearProgramme& programme);

}  // namespace bathwright::dosing
