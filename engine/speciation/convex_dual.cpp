#include "convex_dual.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>
#include <vector>

#include "active_set.hpp"

namespace bathwright::speciation {
namespace {

constexpr double largest_ln_molality = 30;  // keeps sums finite wherever a trial step lands

Vector amounts(const Workspace& w) {
  return w.water_kg * w.ln_molality().array().min(largest_ln_molality).exp().matrix();
}

/// The directions x may move in without leaving the active conditions, and the rows that were given up for
/// them.
struct NullSpace {
  Matrix Z;                   ///< components x free directions
  std::vector<Index> pivots;  ///< per active phase, the row it limits
  std::vector<std::size_t> active;
  bool independent = true;
};

NullSpace null_space(const Workspace& w) {
  NullSpace space;
  for (std::size_t k = 0; k < w.phases.size(); ++k)
    if (w.phases[k].active) space.active.push_back(k);
  const auto rows = static_cast<Index>(space.active.size());
  const Index n = w.components();
  Matrix E(rows, n);
  for (Index r = 0; r < rows; ++r)
    E.row(r) = w.phases[space.active[static_cast<std::size_t>(r)]].condition.transpose();
  std::vector<bool> taken(static_cast<std::size_t>(n), false);
  for (Index r = 0; r < rows; ++r) {
    // The phase takes the place of the component it would use up first.
    Index pivot = -1;
    double least = 0;
    for (Index i = 0; i < n; ++i) {
      if (taken[static_cast<std::size_t>(i)] || std::abs(E(r, i)) < 1e-9) continue;
      const double lasts = std::abs(w.total(i) / E(r, i));
      if (pivot < 0 || lasts < least) pivot = i, least = lasts;
    }
    if (pivot < 0) {
      space.independent = false;
      return space;
    }
    taken[static_cast<std::size_t>(pivot)] = true;
    space.pivots.push_back(pivot);
    E.row(r) /= E(r, pivot);
    for (Index other = 0; other < rows; ++other)
      if (other != r && E(other, pivot) != 0) E.row(other) -= E(other, pivot) * E.row(r);
  }
  space.Z = Matrix::Zero(n, n - rows);
  Index column = 0;
  for (Index i = 0; i < n; ++i) {
    if (taken[static_cast<std::size_t>(i)]) continue;
    space.Z(i, column) = 1;
    for (Index r = 0; r < rows; ++r) space.Z(space.pivots[static_cast<std::size_t>(r)], column) = -E(r, i);
    ++column;
  }
  return space;
}

/// Moves x onto the active conditions, changing only the pivot components.
void meet_conditions(Workspace& w, const NullSpace& space) {
  const auto rows = static_cast<Index>(space.active.size());
  if (rows == 0) return;
  Matrix E(rows, rows);
  Vector gap(rows);
  for (Index r = 0; r < rows; ++r) {
    const Phase& phase = w.phases[space.active[static_cast<std::size_t>(r)]];
    gap(r) = phase.ln_K - phase.water * w.ln_aw - phase.condition.dot(w.x);
    for (Index c = 0; c < rows; ++c) E(r, c) = phase.condition(space.pivots[static_cast<std::size_t>(c)]);
  }
  const Vector step = E.partialPivLu().solve(gap);
  for (Index c = 0; c < rows; ++c) w.x(space.pivots[static_cast<std::size_t>(c)]) += step(c);
}

/// What the totals are worth with the counter-ion that came along with a held pH.
Vector effective_total(const Workspace& w) {
  Vector total = w.total;
  for (const Phase& phase : w.phases)
    if (phase.kind == Phase::Kind::ph) total += -phase.mol * (phase.supply - phase.condition);
  return total;
}

/// Multipliers: the amounts of the active phases that close the balances of their pivot rows.
void set_phase_amounts(Workspace& w, const NullSpace& space, const Vector& open_balance) {
  const auto rows = static_cast<Index>(space.active.size());
  if (rows == 0) return;
  Matrix S(rows, rows);
  Vector open(rows);
  for (Index r = 0; r < rows; ++r) {
    open(r) = open_balance(space.pivots[static_cast<std::size_t>(r)]);
    for (Index c = 0; c < rows; ++c)
      S(r, c) = w.phases[space.active[static_cast<std::size_t>(c)]].condition(
          space.pivots[static_cast<std::size_t>(r)]);
  }
  const Vector mol = S.partialPivLu().solve(open);
  for (Index c = 0; c < rows; ++c) w.phases[space.active[static_cast<std::size_t>(c)]].mol = mol(c);
}

/// Newton on the convex function within the active conditions; true once every free balance is within
/// tolerance.
bool newton(Workspace& w, const NullSpace& space, double tolerance, int& iterations) {
  constexpr int most = 200;
  constexpr double longest_step = 4;
  const Vector total = effective_total(w);
  const Vector target = space.Z.transpose() * total;
  const Vector scale_total = space.Z.cwiseAbs().transpose() * total.cwiseAbs();
  Vector n = amounts(w);
  double value = n.sum() - total.dot(w.x);
  for (int step = 0; step < most; ++step) {
    ++iterations;
    const Matrix R = space.Z.transpose() * w.A;  // free directions x species
    const Vector gradient = R * n - target;
    const Matrix H = R * n.asDiagonal() * R.transpose();
    const Vector throughput = R.cwiseAbs() * n;
    bool met = true;
    for (Index i = 0; i < gradient.size(); ++i)
      met = met && std::abs(gradient(i)) <=
                       tolerance * std::max(scale_total(i) > 0 ? scale_total(i) : throughput(i), 1e-300);
    if (met) return true;
    // Unit diagonal before the factorisation: totals may differ by ten decades.
    const Vector d = (H.diagonal().array() + 1e-290).sqrt().inverse().matrix();
    Matrix scaled = d.asDiagonal() * H * d.asDiagonal();
    scaled.diagonal().array() += 1e-14;
    const Eigen::LLT<Matrix> factor(scaled);
    if (factor.info() != Eigen::Success) return false;
    Vector y = -(d.asDiagonal() * factor.solve(Vector(d.asDiagonal() * gradient)));
    Vector move = space.Z * y;
    const double longest = move.cwiseAbs().maxCoeff();
    if (!std::isfinite(longest)) return false;
    double fraction = longest > longest_step ? longest_step / longest : 1;
    const double slope = gradient.dot(y);
    const Vector start = w.x;
    bool accepted = false;
    for (int halving = 0; halving < 40 && !accepted; ++halving, fraction /= 2) {
      w.x = start + fraction * move;
      n = amounts(w);
      const double trial = n.sum() - total.dot(w.x);
      // Near the minimum the decrease drowns in rounding: a step that does not raise the value noticeably is
      // fine.
      if (trial <= value + 1e-4 * fraction * slope + 1e-14 * std::abs(value)) {
        value = trial;
        accepted = true;
      }
    }
    if (!accepted) return false;
  }
  return false;
}

}  // namespace

bool solve_convex(Workspace& w, double tolerance, int& iterations) {
  constexpr double saturated = 1e-7;
  const int most_changes = 20 + 4 * static_cast<int>(w.phases.size());
  for (int change = 0; change < most_changes; ++change) {
    const NullSpace space = null_space(w);
    if (!space.independent) return false;
    meet_conditions(w, space);
    if (!newton(w, space, tolerance, iterations)) return false;
    set_phase_amounts(w, space, effective_total(w) - w.A * amounts(w));

    bool changed = false;
    for (Phase& phase : w.phases)
      if (phase.kind == Phase::Kind::precipitate && phase.active && phase.mol < 0) {
        phase.active = false;
        phase.mol = 0;
        changed = true;
        if (change > most_changes / 3) break;  // one at a time once dropping all has not settled it
      }
    if (changed) continue;
    std::size_t worst = w.phases.size();
    double largest = saturated;
    for (std::size_t k = 0; k < w.phases.size(); ++k)
      if (!w.phases[k].active) {
        const double above = ln_saturation(w, w.phases[k]);
        if (above > largest) worst = k, largest = above;
      }
    if (worst == w.phases.size()) return true;
    if (!let_in(w, worst, WaterActivity::fixed)) return false;
  }
  return false;
}

void cold_start(Workspace& w) {
  const Index n = w.components();
  constexpr double trace = 1e-9;
  const Vector total = effective_total(w);
  Vector wanted(n);  // mol of each component to aim for
  for (Index i = 0; i < n; ++i) wanted(i) = total(i) > 0 ? total(i) : trace;
  // What comes only from a phase in excess or a held gas starts where that phase is saturated, in equal
  // activities.
  constexpr double neutral = -7 * std::numbers::ln10;
  for (const Phase& phase : w.phases) {
    if (phase.kind != Phase::Kind::excess && phase.kind != Phase::Kind::gas) continue;
    double ln_rest = phase.ln_K, share = 0;
    for (Index i = 0; i < n; ++i) {
      if (i == w.proton || total(i) > 0)
        ln_rest -= phase.condition(i) * (i == w.proton ? neutral : std::log(total(i) / w.water_kg));
      else
        share += phase.condition(i);
    }
    for (Index i = 0; i < n; ++i)
      if (share > 0 && phase.condition(i) > 0 && i != w.proton && !(total(i) > 0))
        wanted(i) = w.water_kg * std::exp(std::clamp(ln_rest / share, -60.0, 2.0));
  }
  w.x = (wanted / w.water_kg).array().log().matrix();

  // Scales every basis species but H^+ to its total, one after the other; each step is a Newton step in the
  // logarithm.
  const auto scale = [&](double x_proton, int sweeps) {
    w.x(w.proton) = x_proton;
    Vector amount = amounts(w);
    for (int sweep = 0; sweep < sweeps; ++sweep)
      for (Index i = 0; i < n; ++i) {
        if (i == w.proton) continue;
        double sum = 0, weighted = 0;
        for (Index j = 0; j < w.count(); ++j)
          if (w.A(i, j) > 0) {
            sum += w.A(i, j) * amount(j);
            weighted += w.A(i, j) * w.A(i, j) * amount(j);
          }
        const double step = std::log(wanted(i) / sum) * sum / weighted;
        w.x(i) += step;
        // Only the species that hold it move; most hold it once.
        const double once = std::exp(step);
        for (Index j = 0; j < w.count(); ++j)
          if (w.A(i, j) != 0) amount(j) *= w.A(i, j) == 1 ? once : std::exp(w.A(i, j) * step);
      }
    return w.A.row(w.proton).dot(amount) - w.total(w.proton);
  };
  for (Phase& phase : w.phases) {
    if (phase.kind != Phase::Kind::ph) continue;
    // The acid that holds the pH brings its counter-ion: a few rounds settle how much.
    constexpr int rounds = 4;
    for (int round = 0; round < rounds; ++round) {
      phase.mol = -scale(phase.ln_K, 4);
      for (Index i = 0; i < n; ++i)
        if (i != w.proton && phase.supply(i) != 0)
          wanted(i) = std::max(w.total(i) - phase.mol * phase.supply(i), trace);
    }
    return;
  }
  double low = -20 * std::numbers::ln10, high = 3 * std::numbers::ln10;  // pH 20 to -3
  const Vector start = w.x;
  for (int halving = 0; halving < 8; ++halving) {  // to a tenth of a pH unit
    const double middle = (low + high) / 2;
    w.x = start;
    (scale(middle, 4) > 0 ? high : low) = middle;
  }
  scale(low, 4);
}

}  // namespace bathwright::speciation
