#include "linear_programme.hpp"

#include <Clp_C_Interface.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <memory>
#include <numeric>
#include <optional>

namespace bathwright::dosing {

std::size_t LinearProgramme::add_column(double cost, double lower_bound, double upper_bound) {
  objective.push_back(cost);
  lower.push_back(lower_bound);
  upper.push_back(upper_bound);
  for (std::vector<double>& row : rows) row.push_back(0);
  return objective.size() - 1;
}

void LinearProgramme::add_row(std::vector<double> coefficients, double lower_bound, double upper_bound) {
  coefficients.resize(objective.size(), 0);
  rows.push_back(std::move(coefficients));
  row_lower.push_back(lower_bound);
  row_upper.push_back(upper_bound);
}

Result<std::vector<double>> solve(const LinearProgramme& p) {
  static constexpr double no_bound = std::numeric_limits<double>::max();  // what Clp reads as infinite
  const auto bounds = [](std::vector<double> values) {
    for (double& value : values) value = std::clamp(value, -no_bound, no_bound);
    return values;
  };
  const int columns = static_cast<int>(p.objective.size()), rows = static_cast<int>(p.rows.size());
  std::vector<CoinBigIndex> start{0};
  std::vector<int> index;
  std::vector<double> element;
  for (int c = 0; c < columns; ++c) {
    for (int r = 0; r < rows; ++r) {
      const double value = p.rows[static_cast<std::size_t>(r)][static_cast<std::size_t>(c)];
      if (value == 0) continue;
      index.push_back(r);
      element.push_back(value);
    }
    start.push_back(static_cast<CoinBigIndex>(index.size()));
  }
  const std::vector<double> lower = bounds(p.lower), upper = bounds(p.upper), row_lower = bounds(p.row_lower),
                            row_upper = bounds(p.row_upper);
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

namespace {

/// Branch and bound, depth first.
class Search {
 public:
  Search(LinearProgramme programme, const std::vector<std::size_t>& whole)
      : programme_(std::move(programme)), whole_(whole) {}

  void explore() {
    if (++nodes_ > most_nodes) return;
    const auto relaxed = solve(programme_);
    if (!relaxed) return;
    const double value =
        std::inner_product(relaxed->begin(), relaxed->end(), programme_.objective.begin(), 0.0);
    if (value >= best_value_ - 1e-12) return;
    std::optional<std::size_t> split;
    double farthest = 1e-6;  // from a whole number, below which it is one
    for (const std::size_t c : whole_)
      if (const double off = std::abs((*relaxed)[c] - std::round((*relaxed)[c])); off > farthest)
        farthest = off, split = c;
    if (!split) {
      best_ = *relaxed;
      for (const std::size_t c : whole_) (*best_)[c] = std::round((*best_)[c]);
      best_value_ = value;
      return;
    }
    const std::size_t c = *split;
    const double at = (*relaxed)[c], low = programme_.lower[c], high = programme_.upper[c];
    const bool down_first = at - std::floor(at) < 0.5;
    for (const bool down : {down_first, !down_first}) {
      (down ? programme_.upper : programme_.lower)[c] = down ? std::floor(at) : std::ceil(at);
      explore();
      programme_.lower[c] = low, programme_.upper[c] = high;
    }
  }

  [[nodiscard]] const std::optional<std::vector<double>>& best() const { return best_; }

 private:
  static constexpr int most_nodes = 400;
  LinearProgramme programme_;
  const std::vector<std::size_t>& whole_;
  std::optional<std::vector<double>> best_;
  double best_value_ = HUGE_VAL;
  int nodes_ = 0;
};

}  // namespace

Result<std::vector<double>> solve_in_whole_numbers(LinearProgramme programme,
                                                   const std::vector<std::size_t>& whole) {
  Search search(std::move(programme), whole);
  search.explore();
  if (search.best()) return *search.best();
  return Problem{Fault::not_converged, "", "the addition planner found no set of whole packages", "", ""};
}

}  // namespace bathwright::dosing
