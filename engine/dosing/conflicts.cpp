#include "conflicts.hpp"

#include <algorithm>
#include <bathwright/units/show.hpp>
#include <cmath>

#include "linear_programme.hpp"

namespace bathwright::dosing {
namespace {

using units::significant;

/// One side of a goal that must hold.
struct Bound {
  std::size_t goal;
  bool upper;
};

double bound_of(const Goal& goal, bool upper) {
  return ((upper ? goal.high : goal.low) - goal.value) / goal.unit;
}

/// Least sum by which these bounds are missed, at the linearisation, in units of their goals.
double least_miss(const Settling& settling, const Settled& end, const std::vector<Bound>& bounds) {
  LinearProgramme lp;
  const auto& columns = settling.columns();
  const std::size_t n = columns.size();
  // A column counts what would move some goal by 1.
  std::vector<double> size(n, 0);
  for (const Row& row : end.rows)
    for (std::size_t c = 0; c < n; ++c) size[c] = std::max(size[c], std::abs(row.slope[c]));
  for (std::size_t c = 0; c < n; ++c) {
    size[c] = size[c] > 0 ? 1 / size[c] : 1;
    lp.add_column(0, columns[c].lower / size[c], columns[c].upper / size[c]);
  }
  for (const Bound& bound : bounds) {
    const Row& row = end.rows[bound.goal];
    std::vector<double> coefficients(n);
    double at_nothing = row.deviation;
    for (std::size_t c = 0; c < n; ++c) {
      coefficients[c] = row.slope[c] * size[c];
      at_nothing -= row.slope[c] * end.amount[c];
    }
    lp.add_column(1, 0, HUGE_VAL);
    coefficients.resize(lp.objective.size(), 0);
    coefficients.back() = bound.upper ? -1 : 1;
    const double limit = bound_of(settling.goals()[bound.goal], bound.upper) - at_nothing;
    lp.add_row(std::move(coefficients), bound.upper ? -HUGE_VAL : limit, bound.upper ? limit : HUGE_VAL);
  }
  const auto x = solve(lp);
  if (!x) return 0;
  double miss = 0;
  for (std::size_t c = n; c < x->size(); ++c) miss += (*x)[c];
  return miss;
}

std::string words(const Goal& goal, bool upper) {
  const std::string side = upper ? " at most " : " at least ";
  const double bound = upper ? goal.high : goal.low;
  switch (goal.of) {
    case Goal::Of::volume:
      return "no more than " + significant(bound, 4) + " L in the tank";
    case Goal::Of::pH:
      return "pH" + side + significant(bound, 3);
    case Goal::Of::solid:
      return goal.dissolved;
    case Goal::Of::level:
      return goal.quantity->label + side + significant(bound, 3) + " g/L";
  }
  return "";
}

bool something_moves(const Settling& settling, const Row& row, bool up) {
  for (std::size_t c = 0; c < row.slope.size(); ++c)
    if (settling.columns()[c].upper > 0 && (up ? row.slope[c] > 1e-12 : row.slope[c] < -1e-12)) return true;
  return false;
}

}  // namespace

std::vector<std::string> conflicts(const Settling& settling, const Settled& end, bool may_decant) {
  constexpr double missed = 1e-6;
  std::vector<Bound> open;
  for (std::size_t g = 0; g < settling.goals().size(); ++g)
    for (const bool upper : {true, false})
      if (std::isfinite(bound_of(settling.goals()[g], upper))) open.push_back({g, upper});
  std::vector<std::string> lines;
  while (least_miss(settling, end, open) > missed && lines.size() < 5) {
    // Whatever can be left out without the rest holding together has no part in it.
    std::vector<Bound> set = open;
    for (std::size_t i = 0; i < set.size();) {
      std::vector<Bound> without = set;
      without.erase(without.begin() + static_cast<std::ptrdiff_t>(i));
      if (least_miss(settling, end, without) > missed)
        set = std::move(without);
      else
        ++i;
    }
    const double miss = least_miss(settling, end, set);
    const Bound& first = set.front();
    const Goal& goal = settling.goals()[first.goal];
    const std::string by = goal.of == Goal::Of::pH       ? significant(miss, 2)
                           : goal.of == Goal::Of::volume ? significant(miss * goal.unit, 2) + " L"
                           : goal.of == Goal::Of::solid
                               ? significant(100 * (std::pow(10, miss) - 1), 2) + " % of saturation"
                               : significant(miss * goal.unit, 2) + " g/L";
    if (set.size() > 1) {
      std::string together;
      for (const Bound& bound : set)
        together += (together.empty() ? "" : "; ") + words(settling.goals()[bound.goal], bound.upper);
      lines.push_back("cannot hold together: " + together + " (missed by " + by + " of the first)");
    } else if (first.upper) {
      lines.push_back(words(goal, true) + " is out of reach by " + by +
                      (goal.of == Goal::Of::level && !may_decant ? ": only taking bath out brings it lower"
                       : goal.of == Goal::Of::pH                 ? ": nothing on the shelf lowers it that far"
                                                                 : ""));
    } else {
      lines.push_back(words(goal, false) + " is out of reach by " + by +
                      (something_moves(settling, end.rows[first.goal], true) ? ""
                       : goal.of == Goal::Of::pH ? ": nothing on the shelf raises it"
                                                 : ": nothing on the shelf brings " + goal.quantity->label));
    }
    // The next set is one without anything of this one that is missed by itself.
    std::erase_if(open,
                  [&](const Bound& bound) { return bound.goal == first.goal && bound.upper == first.upper; });
  }
  return lines;
}

}  // namespace bathwright::dosing
