#include "coupled_newton.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>

#include "elimination.hpp"

namespace bathwright::speciation {
namespace {

constexpr double highest_ln_molality = 7;  // above e^7 mol/kg nothing is a solution any more
constexpr double tiny = std::numeric_limits<double>::min();

/// One linearisation. Species j moves by
///   d ln m_j = defect_j + A_j' dx + water_j d ln a_w - d ln gamma_k(j),     d ln gamma = H dM,  dM_k = sum
///   m_j d ln m_j
/// so that the kinds, not the species, carry the coupling: (1 + diag(M) H) dM = U (dx, d ln a_w, 1) with
/// U_k = sum_j m_j (A_j, water_j, defect_j). Columns of all tables: components, ln a_w, 1.
class Linearisation {
 public:
  explicit Linearisation(Workspace& w)
      : w_(w),
        n_(static_cast<std::size_t>(w.components())),
        kinds_(w.kinds()),
        stride_(padded(n_ + 2)),
        U_(w.kind_table.data()),
        gamma_(w.kind_table.data() + kinds_ * stride_),
        X_(w.curvature.data()) {}

  /// What is there of everything, from the molalities and the defects of mass action.
  void add_up(const SpeciesVector& m, const SpeciesVector& defect);
  /// Slopes of the sums; false when the coefficients cannot follow.
  bool linearise(const SpeciesVector& m, const SpeciesVector& defect, const SpeciesVector& in_kind);

  /// Balances of the components, then of water, per kg of water: what is there, d/d(x, ln a_w), and at dx =
  /// 0.
  [[nodiscard]] double formed(std::size_t row) const { return formed_[row]; }
  /// The sum of their sizes.
  [[nodiscard]] double turnover(std::size_t row) const { return scale_[row]; }
  [[nodiscard]] const double* row(std::size_t r) const { return X_ + r * stride_; }

  /// d ln a_w = water_constant() + water_slope(i) dx_i, by Gibbs-Duhem: -M_w sum m d ln a.
  [[nodiscard]] double water_constant() const { return water_weight_ * formed_[n_ + 1]; }
  [[nodiscard]] double water_slope(std::size_t i) const { return water_weight_ * formed_[i]; }

  /// d ln gamma of each kind for a step (dx, d ln a_w, 1).
  void ln_gamma_step(const double* step, double* change) const {
    for (std::size_t k = 0; k < kinds_; ++k) {
      const double* row = gamma_ + k * stride_;
      double sum = 0;
      for (std::size_t c = 0; c < n_ + 2; ++c) sum += row[c] * step[c];
      change[k] = sum;
    }
  }

 private:
  bool solve_kinds(const SpeciesVector& in_kind);

  Workspace& w_;
  std::size_t n_, kinds_, stride_;
  double *U_, *gamma_, *X_;
  std::array<double, most_rows + 2> formed_{}, scale_{};
  double water_weight_ = 0;
};

void Linearisation::add_up(const SpeciesVector& m, const SpeciesVector& defect) {
  std::fill_n(U_, kinds_ * stride_, 0);
  scale_.fill(0);
  for (Index j = 0; j < w_.count(); ++j) {
    double* U = U_ + w_.kind[static_cast<std::size_t>(j)] * stride_;
    const double mol = m(j);
    U[n_ + 1] += mol * defect(j);
    for (const auto *e = w_.begin(j), *end = w_.end(j); e != end; ++e) {
      const double part = mol * e->value;
      U[e->row] += part;
      scale_[e->row] += std::abs(part);
    }
  }
  formed_.fill(0);
  for (std::size_t k = 0; k < kinds_; ++k)
    for (std::size_t c = 0; c < n_ + 2; ++c) formed_[c] += U_[k * stride_ + c];
  water_weight_ = -activity::water_kg_per_mol / (1 + activity::water_kg_per_mol * formed_[n_]);
}

bool Linearisation::linearise(const SpeciesVector& m, const SpeciesVector& defect,
                              const SpeciesVector& in_kind) {
  const std::size_t width = n_ + 2;
  std::fill_n(X_, (n_ + 1) * stride_, 0);
  for (Index j = 0; j < w_.count(); ++j) {
    const double mol = m(j), off = mol * defect(j);
    for (const auto *e = w_.begin(j), *end = w_.end(j); e != end; ++e) {
      const double weight = mol * e->value;
      double* X = X_ + e->row * stride_;
      X[n_ + 1] += off * e->value;
      for (const auto* other = w_.begin(j); other != end; ++other) X[other->row] += weight * other->value;
    }
  }
  if (!solve_kinds(in_kind)) return false;
  for (std::size_t k = 0; k < kinds_; ++k) {
    const double *U = U_ + k * stride_, *gamma = gamma_ + k * stride_;
    for (std::size_t r = 0; r <= n_; ++r) {
      const double weight = U[r];
      if (weight == 0) continue;
      double* X = X_ + r * stride_;
      for (std::size_t c = 0; c < width; ++c) X[c] -= weight * gamma[c];
    }
  }
  return true;
}

bool Linearisation::solve_kinds(const SpeciesVector& in_kind) {
  // A trace kind does not move the coefficients of others.
  const double threshold = 1e-5 * in_kind.sum();
  std::array<std::uint16_t, activity::max_solutes> abundant;
  std::size_t count = 0;
  for (std::size_t k = 0; k < kinds_; ++k)
    if (in_kind(static_cast<Index>(k)) > threshold) abundant[count++] = static_cast<std::uint16_t>(k);
  const std::size_t width = n_ + 2, wide = padded(count) + stride_;
  double* a = w_.elimination.data();
  const double* H = w_.derivative.data();
  for (std::size_t r = 0; r < count; ++r) {
    double* row = a + r * wide;
    const double mol = in_kind(abundant[r]);
    for (std::size_t c = 0; c < count; ++c) row[c] = mol * H[abundant[r] * kinds_ + abundant[c]];
    row[r] += 1;
    // The right-hand sides follow at once, so that elimination runs along one row.
    std::copy_n(U_ + abundant[r] * stride_, width, row + count);
  }
  if (!eliminate(a, count, count + width, wide)) return false;
  std::fill_n(gamma_, kinds_ * stride_, 0);
  std::size_t next = 0;
  for (std::size_t k = 0; k < kinds_; ++k) {
    double* gamma = gamma_ + k * stride_;
    if (next < count && abundant[next] == k) {  // M d ln gamma = U - dM
      const double *U = U_ + k * stride_, *moved = a + next++ * wide + count;
      const double scale = 1 / in_kind(static_cast<Index>(k));
      for (std::size_t c = 0; c < width; ++c) gamma[c] = (U[c] - moved[c]) * scale;
    } else if (in_kind(static_cast<Index>(k)) > 0) {
      for (std::size_t r = 0; r < count; ++r) {
        const double slope = H[k * kinds_ + abundant[r]];
        const double* moved = a + r * wide + count;
        for (std::size_t c = 0; c < width; ++c) gamma[c] += slope * moved[c];
      }
    }
  }
  return true;
}

}  // namespace

bool solve_coupled(Workspace& w, int& iterations) {
  constexpr int most = 60;
  constexpr double longest_step = 2;  // ln units, of an abundant species
  const auto n = static_cast<std::size_t>(w.components());
  const Index count = w.count();

  std::array<std::size_t, most_rows> active{};
  std::size_t held = 0;
  for (std::size_t k = 0; k < w.phases.size(); ++k)
    if (w.phases[k].active) {
      if (held == active.size()) return false;
      active[held++] = k;
    }
  const std::size_t size = n + 1 + held, wide = padded(size + 1);
  Linearisation line(w);

  SpeciesVector m, defect, in_kind, ln_gamma_step(static_cast<Index>(w.kinds()));
  SpeciesVector& ln_m = w.ln_m;
  w.ln_molality(ln_m);
  ln_m = ln_m.array().min(highest_ln_molality);
  double last_worst = std::numeric_limits<double>::infinity();
  for (int step = 0; step < most; ++step) {
    ++iterations;
    m = ln_m.array().exp();
    w.sum_kinds(m, in_kind);
    const double sum = in_kind.sum();
    if (!std::isfinite(sum)) return false;
    w.ln_aw =
        w.model().evaluate_kinds({in_kind.data(), w.kinds()}, {w.ln_gamma.data(), w.kinds()}, w.derivative);
    w.ln_molality(defect);
    defect -= ln_m;  // of mass action
    line.add_up(m, defect);

    const double liquid = w.water_kg * water_mol_per_kg;
    std::array<double, most_rows> scale, open, off{};
    for (std::size_t i = 0; i < n; ++i) {
      const double total = w.total(static_cast<Index>(i));
      scale[i] = w.water_kg * line.turnover(i) + std::abs(total) + tiny;
      open[i] = total - w.water_kg * line.formed(i);
    }
    scale[n] = w.total_water;
    open[n] = w.total_water - w.water_kg * line.formed(n) - liquid;
    double residual = 0;
    // Of the balances as they stand; `right` is what the phases, unknown as amounts, have to close.
    std::array<double, most_rows> right = open;
    for (std::size_t k = 0; k < held; ++k) {
      const Phase& phase = w.phases[active[k]];
      off[k] = phase.ln_K - phase.water * w.ln_aw;
      for (std::size_t i = 0; i < n; ++i) {
        const auto at = static_cast<Index>(i);
        off[k] -= phase.condition(at) * w.x(at);
        open[i] -= phase.supply(at) * phase.mol;
      }
      open[n] -= phase.supply_water * phase.mol;
      residual = std::max(residual, std::abs(off[k]));
    }
    for (std::size_t i = 0; i <= n; ++i) residual = std::max(residual, std::abs(open[i]) / scale[i]);
    // Done at rounding level, or where rounding no longer lets it improve.
    const double worst = std::max(residual / balance_met, defect.cwiseAbs().maxCoeff() / action_met);
    if (step > 0 && (worst < 1 || (worst < 50 && worst > last_worst / 2))) return true;
    last_worst = worst;

    // Balances, water and conditions, linear in (dx, d ln water, phases).
    if (!line.linearise(m, defect, in_kind)) return false;
    double* K = w.elimination.data();
    std::fill_n(K, size * wide, 0);
    for (std::size_t i = 0; i <= n; ++i) {
      double* row = K + i * wide;
      const double* slope = line.row(i);
      for (std::size_t c = 0; c < n; ++c) row[c] = w.water_kg * (slope[c] + slope[n] * line.water_slope(c));
      row[n] = w.water_kg * line.formed(i) + (i == n ? liquid : 0);
      row[size] = right[i] - w.water_kg * (slope[n + 1] + slope[n] * line.water_constant());
    }
    for (std::size_t k = 0; k < held; ++k) {
      const Phase& phase = w.phases[active[k]];
      double* row = K + (n + 1 + k) * wide;
      for (std::size_t i = 0; i < n; ++i) {
        const auto at = static_cast<Index>(i);
        K[i * wide + n + 1 + k] = phase.supply(at);
        row[i] = phase.condition(at) + phase.water * line.water_slope(i);
      }
      K[n * wide + n + 1 + k] = phase.supply_water;
      row[size] = off[k] - phase.water * line.water_constant();
    }
    for (std::size_t i = 0; i <= n; ++i) {
      const double s = 1 / scale[i];
      for (std::size_t c = 0; c <= size; ++c) K[i * wide + c] *= s;
    }
    if (!eliminate(K, size, size + 1, wide)) return false;
    std::array<double, most_rows + 2> move{};  // dx, d ln a_w, 1
    double d_ln_aw = line.water_constant();
    for (std::size_t i = 0; i < n; ++i) {
      move[i] = K[i * wide + size];
      d_ln_aw += line.water_slope(i) * move[i];
    }
    move[n] = d_ln_aw;
    move[n + 1] = 1;
    const double d_ln_water = K[n * wide + size];
    if (!std::isfinite(d_ln_water + d_ln_aw)) return false;
    line.ln_gamma_step(move.data(), ln_gamma_step.data());
    double longest = std::abs(d_ln_water);
    const double abundant = 1e-5 * sum;
    for (Index j = 0; j < count; ++j) {
      double d = defect(j) - ln_gamma_step(w.kind[static_cast<std::size_t>(j)]);
      for (const auto* e = w.begin(j); e != w.end(j); ++e) d += e->value * move[e->row];
      defect(j) = d;  // from here on the step of ln m
      if (m(j) > abundant) longest = std::max(longest, std::abs(d));
    }
    if (!std::isfinite(longest)) return false;
    const double fraction = longest > longest_step ? longest_step / longest : 1;
    for (std::size_t i = 0; i < n; ++i) w.x(static_cast<Index>(i)) += fraction * move[i];
    w.water_kg *= std::exp(fraction * d_ln_water);
    ln_m = (ln_m + fraction * defect).array().min(highest_ln_molality);
    for (std::size_t k = 0; k < held; ++k) {
      double& mol = w.phases[active[k]].mol;
      mol += fraction * (K[(n + 1 + k) * wide + size] - mol);
    }
  }
  return false;
}

}  // namespace bathwright::speciation
