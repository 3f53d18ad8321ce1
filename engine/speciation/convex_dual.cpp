#include "convex_dual.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>

#include "active_set.hpp"
#include "elimination.hpp"

namespace bathwright::speciation {
namespace {

constexpr double largest_ln_molality = 30;  // keeps sums finite wherever a trial step lands

/// mol of every species.
void amounts(const Workspace& w, SpeciesVector& n, double highest = largest_ln_molality) {
  w.molality(n, highest);
  n *= w.water_kg;
}

Vector component_sums(const Workspace& w, const SpeciesVector& n) {
  Vector sum = Vector::Zero(w.components() + 1);
  for (Index j = 0; j < w.count(); ++j)
    for (const auto* e = w.begin(j); e != w.end(j); ++e) sum(e->row) += e->value * n(j);
  sum.conservativeResize(w.components());
  return sum;
}

/// The directions x may move in without leaving the active conditions, and the rows that were given up for
/// them.
struct NullSpace {
  Table Z;                              ///< components x free directions
  std::array<Index, most_rows> pivots;  ///< per active phase, the row it limits
  std::array<std::size_t, most_rows> active;
  Index rows = 0;  ///< active phases
  bool independent = true;
};

void find_null_space(const Workspace& w, NullSpace& space) {
  space.rows = 0;
  space.independent = true;
  const Index n = w.components();
  for (std::size_t k = 0; k < w.phases.size(); ++k)
    if (w.phases[k].active) {
      if (space.rows == n) {
        space.independent = false;
        return;
      }
      space.active[static_cast<std::size_t>(space.rows++)] = k;
    }
  Index rows = space.rows;
  if (rows == 0) return;
  Table E(rows, n);
  for (Index r = 0; r < rows; ++r)
    E.row(r) = w.phases[space.active[static_cast<std::size_t>(r)]].condition.transpose();
  std::array<bool, most_rows> taken{};
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
      // At a fixed activity of water this condition says what the others say: two hydrates of one salt side
      // by side. It waits for the coupled Newton, where water gives way.
      space.active[static_cast<std::size_t>(r)] = space.active[static_cast<std::size_t>(rows - 1)];
      E.row(r) = E.row(rows - 1);
      --r, --rows;
      continue;
    }
    taken[static_cast<std::size_t>(pivot)] = true;
    space.pivots[static_cast<std::size_t>(r)] = pivot;
    E.row(r) /= E(r, pivot);
    for (Index other = 0; other < rows; ++other)
      if (other != r && E(other, pivot) != 0) E.row(other) -= E(other, pivot) * E.row(r);
  }
  space.rows = rows;
  space.Z.setZero(n, n - rows);
  Index column = 0;
  for (Index i = 0; i < n; ++i) {
    if (taken[static_cast<std::size_t>(i)]) continue;
    space.Z(i, column) = 1;
    for (Index r = 0; r < rows; ++r) space.Z(space.pivots[static_cast<std::size_t>(r)], column) = -E(r, i);
    ++column;
  }
}

/// Moves x onto the active conditions, changing only the pivot components.
void meet_conditions(Workspace& w, const NullSpace& space) {
  const Index rows = space.rows;
  if (rows == 0) return;
  Table E(rows, rows);
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
  const Index rows = space.rows;
  if (rows == 0) return;
  Table S(rows, rows);
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

/// The gradient of the convex function and its curvature over the free directions.
struct Slope {
  Vector gradient, throughput;
};

/// f' = Z'(A n - b) and, in w.curvature (lower half, rows of `stride`), Z' A diag(n) A' Z.
void differentiate(Workspace& w, const NullSpace& space, const SpeciesVector& n, const Vector& total,
                   Slope& slope, std::size_t stride) {
  const auto rows = static_cast<std::size_t>(w.components());
  double* H = w.curvature.data();
  std::fill_n(H, rows * stride, 0);
  std::array<double, most_rows> sum{}, through{};
  for (Index j = 0; j < w.count(); ++j) {
    const double mol = n(j);
    for (const auto *e = w.begin(j), *end = w.end(j); e != end && e->row < rows; ++e) {
      const double weight = mol * e->value;
      sum[e->row] += weight;
      through[e->row] += std::abs(weight);
      double* row = H + e->row * stride;
      for (const auto* other = w.begin(j); other <= e; ++other) row[other->row] += weight * other->value;
    }
  }
  const Index size = w.components();
  slope.gradient.resize(size);
  slope.throughput.resize(size);
  for (Index i = 0; i < size; ++i) {
    slope.gradient(i) = sum[static_cast<std::size_t>(i)] - total(i);
    slope.throughput(i) = through[static_cast<std::size_t>(i)];
  }
  if (space.rows == 0) return;
  Table full(size, size);
  for (Index r = 0; r < size; ++r)
    for (Index c = 0; c <= r; ++c)
      full(r, c) = full(c, r) = H[static_cast<std::size_t>(r) * stride + static_cast<std::size_t>(c)];
  const Table half = full.lazyProduct(space.Z);
  const Table reduced = space.Z.transpose().lazyProduct(half);
  for (Index r = 0; r < reduced.rows(); ++r)
    for (Index c = 0; c <= r; ++c)
      H[static_cast<std::size_t>(r) * stride + static_cast<std::size_t>(c)] = reduced(r, c);
  slope.gradient = Vector(space.Z.transpose().lazyProduct(slope.gradient));
  slope.throughput = Vector(space.Z.cwiseAbs().transpose().lazyProduct(slope.throughput));
}

/// Newton on the convex function within the active conditions; true once every free balance is within
/// tolerance.
bool newton(Workspace& w, const NullSpace& space, double tolerance, int& iterations) {
  constexpr int most = 200;
  constexpr double longest_step = 4, damping = 1e-14, least_pivot = 1e-15;
  const Vector total = effective_total(w);
  Vector scale_total = total.cwiseAbs();
  if (space.rows > 0) scale_total = Vector(space.Z.cwiseAbs().transpose().lazyProduct(scale_total));
  const std::size_t stride = padded(static_cast<std::size_t>(w.components()));
  SpeciesVector n;
  amounts(w, n);
  double value = n.sum() - total.dot(w.x);
  Slope slope;
  Vector d, y, move, start;
  for (int step = 0; step < most; ++step) {
    ++iterations;
    differentiate(w, space, n, total, slope, stride);
    const Index free = slope.gradient.size();
    bool met = true;
    for (Index i = 0; i < free; ++i)
      met =
          met && std::abs(slope.gradient(i)) <=
                     tolerance * std::max(scale_total(i) > 0 ? scale_total(i) : slope.throughput(i), 1e-300);
    if (met) return true;
    // Unit diagonal before the factorisation: totals may differ by ten decades.
    double* H = w.curvature.data();
    d.resize(free);
    y.resize(free);
    for (Index i = 0; i < free; ++i)
      d(i) = 1 / std::sqrt(H[static_cast<std::size_t>(i) * (stride + 1)] + 1e-290);
    for (Index r = 0; r < free; ++r) {
      double* row = H + static_cast<std::size_t>(r) * stride;
      for (Index c = 0; c <= r; ++c) row[c] *= d(r) * d(c);
      row[r] += damping;
      y(r) = -d(r) * slope.gradient(r);
    }
    if (!solve_positive_definite(H, y.data(), static_cast<std::size_t>(free), stride, least_pivot))
      return false;
    y.array() *= d.array();
    if (space.rows == 0)
      move = y;
    else
      move = space.Z.lazyProduct(y);
    const double longest = move.cwiseAbs().maxCoeff();
    if (!std::isfinite(longest)) return false;
    double fraction = longest > longest_step ? longest_step / longest : 1;
    const double descent = slope.gradient.dot(y);
    start = w.x;
    bool accepted = false;
    for (int halving = 0; halving < 40 && !accepted; ++halving, fraction /= 2) {
      w.x = start + fraction * move;
      amounts(w, n);
      const double trial = n.sum() - total.dot(w.x);
      // Near the minimum the decrease drowns in rounding: a step that does not raise the value noticeably is
      // fine.
      if (trial <= value + 1e-4 * fraction * descent + 1e-14 * std::abs(value)) {
        value = trial;
        accepted = true;
      }
    }
    if (!accepted) return false;
  }
  return false;
}

enum class Scale : std::uint8_t { up_and_down, down_only };

/// Scales every basis species but H^+ to its total (where that is above 0), one after the other; each step is
/// a Newton step in the logarithm.
void scale_to(Workspace& w, const Vector& wanted, Scale direction, int sweeps, SpeciesVector& amount) {
  constexpr double largest_ln_start = 600;  // a strong complex of totals that are still free
  amounts(w, amount, largest_ln_start);
  for (int sweep = 0; sweep < sweeps; ++sweep)
    for (Index i = 0; i < w.components(); ++i) {
      if (i == w.proton || !(wanted(i) > 0)) continue;
      double sum = 0, weighted = 0;
      for (const auto& [j, count] : w.holders(i))
        if (count > 0) {
          sum += count * amount(j);
          weighted += count * count * amount(j);
        }
      if (direction == Scale::down_only && sum <= wanted(i)) continue;
      const double step = std::log(wanted(i) / sum) * sum / weighted;
      w.x(i) += step;
      // Only the species that hold it move; most hold it once.
      const double once = std::exp(step);
      for (const auto& [j, count] : w.holders(i)) amount(j) *= count == 1 ? once : std::exp(count * step);
    }
}

}  // namespace

bool solve_convex(Workspace& w, double tolerance, int& iterations) {
  constexpr double saturated = 1e-7;
  const int most_changes = 20 + 4 * static_cast<int>(w.phases.size());
  NullSpace space;
  SpeciesVector n;
  for (int change = 0; change < most_changes; ++change) {
    find_null_space(w, space);
    if (!space.independent) return false;
    meet_conditions(w, space);
    if (!newton(w, space, tolerance, iterations)) return false;
    if (space.rows > 0) {
      amounts(w, n);
      set_phase_amounts(w, space, effective_total(w) - component_sums(w, n));
    }

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

  const auto scale = [&](double x_proton, int sweeps) {
    w.x(w.proton) = x_proton;
    SpeciesVector amount;
    scale_to(w, wanted, Scale::up_and_down, sweeps, amount);
    double protons = -w.total(w.proton);
    for (const auto& [j, count] : w.holders(w.proton)) protons += count * amount(j);
    return protons;
  };
  for (Phase& phase : w.phases) {
    if (phase.kind != Phase::Kind::ph || !phase.active) continue;
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
  for (int halving = 0; halving < 7; ++halving) {                        // to a fifth of a pH unit
    const double middle = (low + high) / 2;
    (scale(middle, 2) > 0 ? high : low) = middle;
  }
  scale(low, 4);
}

void pull_back(Workspace& w) {
  SpeciesVector amount;
  scale_to(w, effective_total(w), Scale::down_only, 2, amount);
}

}  // namespace bathwright::speciation
