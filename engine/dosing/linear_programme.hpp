// A small dense linear programme, solved by Clp; columns in whole numbers by branch and bound around it.
#pragma once

#include <bathwright/base/result.hpp>
#include <vector>

namespace bathwright::dosing {

/// minimise objective'x  subject to  row_lower <= A x <= row_upper,  lower <= x <= upper. Infinite bounds:
/// +-HUGE_VAL.
struct LinearProgramme {
  std::vector<double> objective;          ///< (columns)
  std::vector<double> lower, upper;       ///< (columns)
  std::vector<std::vector<double>> rows;  ///< each (columns)
  std::vector<double> row_lower, row_upper;

  /// A further column; returns its position. The rows there are get a 0 for it.
  std::size_t add_column(double cost, double lower_bound, double upper_bound);
  void add_row(std::vector<double> coefficients, double lower_bound, double upper_bound);
};

/// The optimal x. Fails (not_converged) when there is none.
Result<std::vector<double>> solve(const LinearProgramme& programme);

/// The optimal x among those whose columns `whole` are whole numbers: depth first, the nearer branch first,
/// the best of the first 400 nodes. For a handful of columns, as many bags as stand in a store.
Result<std::vector<double>> solve_in_whole_numbers(LinearProgramme programme,
                                                   const std::vector<std::size_t>& whole);

}  // namespace bathwright::dosing
