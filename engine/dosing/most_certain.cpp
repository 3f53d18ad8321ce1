#include "most_certain.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>

#include "sampled_ends.hpp"

namespace bathwright::dosing {
namespace {

using bath::Aim;

/// The ends of a plan, moved as a whole.
class MovedEnds {
 public:
  MovedEnds(const std::vector<Aim>& aims, const SampledEnds& ends) : aims_(aims), ends_(ends) {}

  /// Mean over the samples of how well inside all windows each lies: 0 where one window is missed by a
  /// twentieth of its width or more, 1 where all are met by as much. A share with soft edges has no plateaus.
  [[nodiscard]] double inside(const std::vector<double>& shift) const {
    constexpr double edge = 0.05;
    const std::size_t samples = ends_.level.front().size();
    double sum = 0;
    for (std::size_t i = 0; i < samples; ++i) {
      double room = 1;  // to the nearest edge, in widths of its window
      for (std::size_t a = 0; a < aims_.size(); ++a) {
        const double level = ends_.level[a][i] + shift[a], width = aims_[a].high - aims_[a].low;
        const double here = std::min(level - aims_[a].low, aims_[a].high - level) / width;
        room = std::isnan(here) ? -1 : std::min(room, here);
      }
      sum += std::clamp(0.5 + room / (2 * edge), 0.0, 1.0);
    }
    return sum / static_cast<double>(samples);
  }

 private:
  const std::vector<Aim>& aims_;
  const SampledEnds& ends_;
};

/// The shift with the best mean, by trying each level up and down in steps that halve, and the sum of what
/// helped again (Hooke & Jeeves 1961, J. ACM 8:212). None goes below `least`.
std::vector<double> best_shift(const MovedEnds& ends, const std::vector<Aim>& aims,
                               const std::vector<double>& least) {
  std::vector<double> best(aims.size(), 0);
  double value = ends.inside(best);
  const auto take = [&](std::vector<double> candidate) {
    for (std::size_t a = 0; a < candidate.size(); ++a) candidate[a] = std::max(candidate[a], least[a]);
    const double there = ends.inside(candidate);
    if (there <= value) return false;
    best = std::move(candidate);
    value = there;
    return true;
  };
  for (double step = 0.25; step > 0.005;) {  // of the width of a window
    const std::vector<double> before = best;
    for (std::size_t a = 0; a < aims.size(); ++a)
      for (const double sign : {1.0, -1.0}) {
        std::vector<double> candidate = best;
        candidate[a] += sign * step * (aims[a].high - aims[a].low);
        if (take(std::move(candidate))) break;
      }
    if (best == before) {
      step /= 2;
      continue;
    }
    std::vector<double> further = best;
    for (std::size_t a = 0; a < aims.size(); ++a) further[a] += best[a] - before[a];
    take(std::move(further));
  }
  return best;
}

/// How far below the plan's end each level can be brought: to where the tank stands when only water is added.
std::vector<double> least_shifts(const Situation& s, const Plan& plan) {
  std::vector<double> least;
  for (const Aim& aim : s.tank.aims) {
    const bath::Quantity* quantity = s.chemistry.type().quantity(aim.quantity);
    if (!quantity || plan.decant_L > 0) {
      least.push_back(-HUGE_VAL);
      continue;
    }
    const double filled =
        s.chemistry.quantity_g_per_L(*quantity, s.now) * s.now_view.volume_L / plan.final_view.volume_L;
    least.push_back(std::min(0.0, filled - s.chemistry.quantity_g_per_L(*quantity, plan.final_state)));
  }
  return least;
}

double median(std::vector<double> values) {
  std::erase_if(values, [](double v) { return std::isnan(v); });
  if (values.empty()) return 0;
  const auto middle = values.begin() + static_cast<std::ptrdiff_t>(values.size() / 2);
  std::ranges::nth_element(values, middle);
  return *middle;
}

}  // namespace

Result<std::optional<Plan>> most_certain_plan(const Situation& s, const Plan& best, const Spread& spread,
                                              const Sampling& sampling) {
  const double now = best.chances->in_every_window;
  const double error = std::sqrt(now * (1 - now) / sampling.samples);
  const double clearly = now + std::max(0.02, 3 * error);
  if (s.tank.aims.empty() || clearly >= 1) return std::optional<Plan>();

  Situation to_the_aims = s;
  to_the_aims.dead_band.clear();
  std::optional<Plan> found;
  const Plan* from = &best;
  for (int round = 0; round < 2; ++round) {
    const auto ends = sampled_ends(s.tank, s.chemistry, s.now, *from, spread, sampling, {});
    if (!ends) return ends.problems();
    const std::vector<double> shift =
        best_shift(MovedEnds(s.tank.aims, *ends), s.tank.aims, least_shifts(s, *from));
    Wish wish{"most certain", s.tank.aims, Wish::Least::cost, from->decant_L > 0, false};
    for (std::size_t a = 0; a < wish.aims.size(); ++a)
      wish.aims[a].aim = std::clamp(median(ends->level[a]) + shift[a], wish.aims[a].low, wish.aims[a].high);
    auto planned = plan_of_kind(to_the_aims, wish);
    if (!planned) break;  // what cannot be planned is not offered
    Plan plan = *std::move(planned);
    auto chances = chance_of(s.tank, s.chemistry, s.now, plan, spread, sampling);
    if (!chances) return chances.problems();
    plan.chances = *std::move(chances);
    if (found && plan.chances->in_every_window <= found->chances->in_every_window) break;
    found = std::move(plan);
    from = &*found;
  }
  if (!found || !found->feasible || found->chances->in_every_window < clearly) return std::optional<Plan>();
  return found;
}

}  // namespace bathwright::dosing
