#include "linear_programme.hpp"

#include <Clp_C_Interface.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <memory>

namespace bathwright::dosing {

void LinearProgramme::add_row(std::vector<double> coefficients, double lower, double upper_bound) {
  rows.push_back(std::move(coefficients));
  row_lower.push_back(lower);
  row_upper.push_back(upper_bound);
}

Result<std::vector<double>> solve(const LinearProgramme& p) {
  static constexpr double no_bound = std::numeric_limits<double>::max();  // what Clp reads as infinite
  const auto bound = [](double value) { return std::clamp(value, -no_bound, no_bound); };
  const int columns = static_cast<int>(p.objective.size()), rows = static_cast<int>(p.rows.size());
  std::vector<CoinBigIndex> start{0};
  std::vector<int> index;
  std::vector<double> element, lower(p.objective.size(), 0.0), upper, row_lower, row_upper;
  for (int c = 0; c < columns; ++c) {
    for (int r = 0; r < rows; ++r) {
      const double value = p.rows[static_cast<std::size_t>(r)][static_cast<std::size_t>(c)];
      if (value == 0) continue;
      index.push_back(r);
      element.push_back(value);
    }
    start.push_back(static_cast<CoinBigIndex>(index.size()));
    upper.push_back(bound(p.upper[static_cast<std::size_t>(c)]));
  }
  for (int r = 0; r < rows; ++r) {
    row_lower.push_back(bound(p.row_lower[static_cast<std::size_t>(r)]));
    row_upper.push_back(bound(p.row_upper[static_cast<std::size_t>(r)]));
  }
  const std::unique_ptr<Clp_Simplex, decltype(&Clp_deleteModel)> model(Clp_newModel(), &Clp_deleteModel);
  Clp_setLogLevel(model.get(), 0);
  Clp_loadProblem(model.get(), columns, rows, start.data(), index.data(), element.data(), lower.data(),
                  upper.data(), p.objective.data(), row_lower.data(), row_upper.data());
  Clp_setPrimalTolerance(model.get(), 1e-10);
  Clp_setDualTolerance(model.get(), 1e-10);
  Clp_primal(model.get(), 0);
  if (Clp_status(model.get()) != 0)
    return Problem{Fault::not_converged, "", "the addition planner found no set of additions", "", ""};
  const double* x = Clp_primalColumnSolution(model.get());
  return std::vector<double>(x, x + columns);
}

}  // namespace bathwright::dosing
