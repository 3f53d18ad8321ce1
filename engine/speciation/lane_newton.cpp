#include "lane_newton.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "coupled_newton.hpp"

namespace bathwright::speciation {
namespace {

double least(const Lanes& value) {
  double low = std::numeric_limits<double>::infinity();
  for (std::size_t l = 0; l < lanes; ++l) low = std::min(low, std::abs(value[l]));
  return low;
}

/// [M | B] -> M^-1 B in the columns from n on, in every lane with the same pivots: the row whose weakest lane
/// is strongest.
inline __attribute__((always_inline)) bool eliminate(Lanes* a, std::size_t n, std::size_t width) {
  for (std::size_t k = 0; k < n; ++k) {
    std::size_t pivot = k;
    double largest = 0;
    for (std::size_t r = k; r < n; ++r)
      if (const double size = least(a[r * width + k]); size > largest) largest = size, pivot = r;
    if (!(largest > 0)) return false;
    Lanes* row = a + k * width;
    if (pivot != k) std::swap_ranges(row + k, row + width, a + pivot * width + k);
    const Lanes scale = 1 / row[k];
    for (std::size_t r = k + 1; r < n; ++r) {
      Lanes* other = a + r * width;
      const Lanes factor = other[k] * scale;
      for (std::size_t c = k + 1; c < width; ++c) other[c] -= factor * row[c];
    }
  }
  for (std::size_t k = n; k-- > 0;) {
    Lanes* row = a + k * width;
    for (std::size_t r = k + 1; r < n; ++r) {
      const Lanes factor = row[r];
      for (std::size_t c = n; c < width; ++c) row[c] -= factor * a[r * width + c];
    }
    const Lanes scale = 1 / row[k];
    for (std::size_t c = n; c < width; ++c) row[c] *= scale;
  }
  return true;
}

}  // namespace

LaneProblem::LaneProblem(const Workspace& w)
    : total(static_cast<std::size_t>(w.components())),
      ln_K(static_cast<std::size_t>(w.count())),
      phase_ln_K(w.phases.size()),
      x(total.size()),
      ln_m(ln_K.size()),
      ln_gamma(w.kinds()),
      phase_mol(w.phases.size()),
      active(w.phases.size()) {}

void LaneProblem::set_amounts(std::size_t lane, const Workspace& w) {
  for (std::size_t i = 0; i < total.size(); ++i) total[i][lane] = w.total(static_cast<Index>(i));
  for (std::size_t j = 0; j < ln_K.size(); ++j) ln_K[j][lane] = w.ln_K(static_cast<Index>(j));
  for (std::size_t k = 0; k < phase_ln_K.size(); ++k) phase_ln_K[k][lane] = w.phases[k].ln_K;
  total_water[lane] = w.total_water;
}

void LaneProblem::set_start(std::size_t lane, const Workspace& w) {
  for (std::size_t i = 0; i < x.size(); ++i) x[i][lane] = w.x(static_cast<Index>(i));
  for (std::size_t j = 0; j < ln_m.size(); ++j) ln_m[j][lane] = w.ln_m(static_cast<Index>(j));
  for (std::size_t k = 0; k < phase_mol.size(); ++k) {
    phase_mol[k][lane] = w.phases[k].mol;
    active[k][lane] = w.phases[k].active ? 1 : 0;
  }
  ln_aw[lane] = w.ln_aw;
  water_kg[lane] = w.water_kg;
}

void LaneProblem::copy_state(std::size_t lane, Workspace& w) const {
  for (std::size_t i = 0; i < x.size(); ++i) w.x(static_cast<Index>(i)) = x[i][lane];
  for (std::size_t j = 0; j < ln_m.size(); ++j) w.ln_m(static_cast<Index>(j)) = ln_m[j][lane];
  for (std::size_t k = 0; k < ln_gamma.size(); ++k) w.ln_gamma(static_cast<Index>(k)) = ln_gamma[k][lane];
  for (std::size_t k = 0; k < phase_mol.size(); ++k) {
    w.phases[k].active = active[k][lane] != 0;
    w.phases[k].mol = w.phases[k].active ? phase_mol[k][lane] : 0;
  }
  w.ln_aw = ln_aw[lane];
  w.water_kg = water_kg[lane];
}

LaneTables::LaneTables(const Workspace& w)
    : LaneTables(static_cast<std::size_t>(w.components()), static_cast<std::size_t>(w.count()), w.kinds(),
                 w.phases.size()) {}

LaneTables::LaneTables(std::size_t components, std::size_t species, std::size_t kinds_count,
                       std::size_t phases)
    : U(kinds_count * (components + 2)),
      gamma(U.size()),
      X((components + 1) * (components + 2)),
      system((components + 1 + phases) * (components + 2 + phases)),
      kinds(kinds_count * (kinds_count + components + 2)),
      H(kinds_count * kinds_count),
      m(species),
      defect(species) {}

bool change_phases(const Workspace& w, LaneProblem& p, std::size_t lane) {
  std::size_t leaving = w.phases.size(), entering = w.phases.size();
  double least_mol = 0, largest = saturated;
  for (std::size_t k = 0; k < w.phases.size(); ++k) {
    const Phase& phase = w.phases[k];
    if (phase.kind != Phase::Kind::precipitate) continue;
    if (p.active[k][lane] != 0) {
      if (p.phase_mol[k][lane] < least_mol) leaving = k, least_mol = p.phase_mol[k][lane];
      continue;
    }
    double above = phase.water * p.ln_aw[lane] - p.phase_ln_K[k][lane];
    for (std::size_t i = 0; i < p.x.size(); ++i)
      above += phase.condition(static_cast<Index>(i)) * p.x[i][lane];
    if (above > largest) entering = k, largest = above;
  }
  if (leaving < w.phases.size()) {
    p.active[leaving][lane] = 0;
    p.phase_mol[leaving][lane] = 0;
  } else if (entering < w.phases.size()) {
    p.active[entering][lane] = 1;
    p.phase_mol[entering][lane] = 0;
  } else {
    return false;
  }
  return true;
}

BATHWRIGHT_LANES_CLONES
void lane_newton(Workspace& w, LaneProblem& p, LaneTables& t, std::array<bool, lanes>& arrived) {
  constexpr int most = 12;
  constexpr double longest_step = 2;
  const auto n = static_cast<std::size_t>(w.components()), count = static_cast<std::size_t>(w.count());
  const std::size_t kinds = w.kinds(), width = n + 2;
  std::array<std::size_t, most_rows> active{};
  std::size_t held = 0;
  for (std::size_t k = 0; k < w.phases.size(); ++k)
    for (std::size_t lane = 0; lane < lanes; ++lane)
      if (p.active[k][lane] != 0) {
        if (held == active.size()) return;
        active[held++] = k;
        break;
      }
  const std::size_t size = n + 1 + held, wide = size + 1;

  Lanes in_kind[activity::max_solutes];
  for (int step = 0; step < most; ++step) {
    std::fill_n(in_kind, kinds, Lanes{});
    for (std::size_t j = 0; j < count; ++j) {
      t.m[j] = p.ln_m[j];
      exponential(t.m[j]);
      in_kind[w.kind[j]] += t.m[j];
    }
    Lanes sum{};
    for (std::size_t k = 0; k < kinds; ++k) sum += in_kind[k];
    // A trace kind does not move the coefficients of others.
    std::array<std::uint16_t, activity::max_solutes> abundant;
    std::size_t several = 0;
    for (std::size_t k = 0; k < kinds; ++k)
      for (std::size_t lane = 0; lane < lanes; ++lane)
        if (in_kind[k][lane] > 1e-5 * sum[lane]) {
          abundant[several++] = static_cast<std::uint16_t>(k);
          break;
        }
    for (std::size_t lane = 0; lane < lanes; ++lane) {
      if (arrived[lane]) {  // stands still; its slopes only have to be harmless
        for (std::size_t k = 0; k < kinds * several; ++k) t.H[k][lane] = 0;
        continue;
      }
      std::array<double, activity::max_solutes> one, ln_gamma;
      for (std::size_t k = 0; k < kinds; ++k) one[k] = in_kind[k][lane];
      p.ln_aw[lane] = w.model().evaluate_kinds({one.data(), kinds}, {ln_gamma.data(), kinds}, w.derivative);
      for (std::size_t k = 0; k < kinds; ++k) p.ln_gamma[k][lane] = ln_gamma[k];
      for (std::size_t k = 0; k < kinds; ++k)
        for (std::size_t r = 0; r < several; ++r)
          t.H[k * several + r][lane] = w.derivative[k * kinds + abundant[r]];
    }
    // Sums over kinds, the defects of mass action, and what is there of everything.
    std::fill(t.U.begin(), t.U.end(), Lanes{});
    Lanes formed[most_rows + 2], turnover[most_rows + 2];
    std::fill_n(formed, width, Lanes{});
    std::fill_n(turnover, width, Lanes{});
    Lanes action{};
    for (std::size_t j = 0; j < count; ++j) {
      const auto at = static_cast<Index>(j);
      Lanes ln = p.ln_K[j] - p.ln_gamma[w.kind[j]] - p.ln_m[j];
      for (const auto *e = w.begin(at), *end = w.end(at); e != end; ++e)
        ln += e->value * (e->row == n ? p.ln_aw : p.x[e->row]);
      t.defect[j] = ln;
      Lanes off = ln;
      magnitude(off);
      raise(action, off);
      Lanes* U = &t.U[w.kind[j] * width];
      U[n + 1] += t.m[j] * ln;
      for (const auto *e = w.begin(at), *end = w.end(at); e != end; ++e) {
        Lanes part = t.m[j] * e->value;
        U[e->row] += part;
        magnitude(part);
        turnover[e->row] += part;
      }
    }
    for (std::size_t k = 0; k < kinds; ++k)
      for (std::size_t c = 0; c < width; ++c) formed[c] += t.U[k * width + c];
    const Lanes water_weight = -activity::water_kg_per_mol / (1 + activity::water_kg_per_mol * formed[n]);

    Lanes open[most_rows + 1], right[most_rows + 1], scale[most_rows + 1], off[most_rows + 1];
    Lanes residual{};
    for (std::size_t i = 0; i <= n; ++i) {
      Lanes total = i == n ? p.total_water - p.water_kg * water_mol_per_kg : p.total[i];
      open[i] = right[i] = total - p.water_kg * formed[i];
      magnitude(total);
      scale[i] = i == n ? p.total_water : p.water_kg * turnover[i] + total + 1e-300;
    }
    for (std::size_t k = 0; k < held; ++k) {
      const Phase& phase = w.phases[active[k]];
      off[k] = p.phase_ln_K[active[k]] - phase.water * p.ln_aw;
      for (std::size_t i = 0; i < n; ++i) {
        const auto at = static_cast<Index>(i);
        off[k] -= phase.condition(at) * p.x[i];
        open[i] -= phase.supply(at) * p.phase_mol[active[k]];
      }
      off[k] *= p.active[active[k]];
      open[n] -= phase.supply_water * p.phase_mol[active[k]];
      Lanes size_of = off[k];
      magnitude(size_of);
      raise(residual, size_of);
    }
    for (std::size_t i = 0; i <= n; ++i) {
      Lanes size_of = open[i] / scale[i];
      magnitude(size_of);
      raise(residual, size_of);
    }
    bool all = true;
    for (std::size_t lane = 0; lane < lanes; ++lane) {
      arrived[lane] =
          arrived[lane] || (step > 0 && residual[lane] < balance_met && action[lane] < action_met);
      all = all && arrived[lane];
    }
    if (all) return;

    // Slopes: the species themselves, then what the kinds change.
    std::fill(t.X.begin(), t.X.end(), Lanes{});
    for (std::size_t j = 0; j < count; ++j) {
      const auto at = static_cast<Index>(j);
      for (const auto *e = w.begin(at), *end = w.end(at); e != end; ++e) {
        const Lanes weight = t.m[j] * e->value;
        Lanes* X = &t.X[e->row * width];
        X[n + 1] += weight * t.defect[j];
        for (const auto* other = w.begin(at); other != end; ++other) X[other->row] += weight * other->value;
      }
    }
    const std::size_t row_length = several + width;
    for (std::size_t r = 0; r < several; ++r) {
      Lanes* row = &t.kinds[r * row_length];
      for (std::size_t c = 0; c < several; ++c)
        row[c] = in_kind[abundant[r]] * t.H[abundant[r] * several + c];
      row[r] += 1;
      std::copy_n(&t.U[abundant[r] * width], width, row + several);
    }
    if (!eliminate(t.kinds.begin(), several, row_length)) return;
    std::fill(t.gamma.begin(), t.gamma.end(), Lanes{});
    std::size_t next = 0;
    for (std::size_t k = 0; k < kinds; ++k) {
      Lanes* gamma = &t.gamma[k * width];
      const Lanes* U = &t.U[k * width];
      if (next < several && abundant[next] == k) {
        const Lanes* moved = &t.kinds[next++ * row_length + several];
        const Lanes inverse = 1 / in_kind[k];
        for (std::size_t c = 0; c < width; ++c) gamma[c] = (U[c] - moved[c]) * inverse;
      } else {
        for (std::size_t r = 0; r < several; ++r) {
          const Lanes slope = t.H[k * several + r];
          const Lanes* moved = &t.kinds[r * row_length + several];
          for (std::size_t c = 0; c < width; ++c) gamma[c] += slope * moved[c];
        }
      }
      for (std::size_t r = 0; r <= n; ++r) {
        const Lanes weight = U[r];
        bool none = true;
        for (std::size_t lane = 0; lane < lanes; ++lane) none = none && weight[lane] == 0;
        if (none) continue;
        Lanes* X = &t.X[r * width];
        for (std::size_t c = 0; c < width; ++c) X[c] -= weight * gamma[c];
      }
    }

    // The system in (dx, d ln water, phases), rows scaled, and its solution.
    Lanes* K = t.system.begin();
    std::fill_n(K, size * wide, Lanes{});
    const Lanes constant = water_weight * formed[n + 1];
    for (std::size_t i = 0; i <= n; ++i) {
      Lanes* row = K + i * wide;
      const Lanes* slope = &t.X[i * width];
      const Lanes s = 1 / scale[i];
      for (std::size_t c = 0; c < n; ++c)
        row[c] = s * p.water_kg * (slope[c] + slope[n] * (water_weight * formed[c]));
      row[n] = s * p.water_kg * formed[i];
      if (i == n) row[n] += s * p.water_kg * water_mol_per_kg;
      row[size] = s * (right[i] - p.water_kg * (slope[n + 1] + slope[n] * constant));
      for (std::size_t k = 0; k < held; ++k) {
        const Phase& phase = w.phases[active[k]];
        row[n + 1 + k] = s * (i == n ? phase.supply_water : phase.supply(static_cast<Index>(i)));
      }
    }
    for (std::size_t k = 0; k < held; ++k) {
      const Phase& phase = w.phases[active[k]];
      Lanes* row = K + (n + 1 + k) * wide;
      // Where the phase is not there, its condition is that there is none of it.
      const Lanes here = p.active[active[k]];
      for (std::size_t i = 0; i < n; ++i)
        row[i] = here * (phase.condition(static_cast<Index>(i)) + phase.water * (water_weight * formed[i]));
      row[n + 1 + k] = 1 - here;
      row[size] = off[k] - here * phase.water * constant;
    }
    if (!eliminate(K, size, wide)) return;

    Lanes move[most_rows + 2];
    Lanes d_ln_aw = constant;
    for (std::size_t i = 0; i < n; ++i) {
      move[i] = K[i * wide + size];
      d_ln_aw += water_weight * formed[i] * move[i];
    }
    move[n] = d_ln_aw;
    const Lanes d_ln_water = K[n * wide + size];
    Lanes longest = d_ln_water;
    magnitude(longest);
    Lanes d_ln_gamma[activity::max_solutes];
    for (std::size_t k = 0; k < kinds; ++k) {
      const Lanes* gamma = &t.gamma[k * width];
      Lanes d = gamma[n + 1];
      for (std::size_t c = 0; c <= n; ++c) d += gamma[c] * move[c];
      d_ln_gamma[k] = d;
    }
    const Lanes abundant_from = 1e-5 * sum;
    for (std::size_t j = 0; j < count; ++j) {
      const auto at = static_cast<Index>(j);
      Lanes d = t.defect[j] - d_ln_gamma[w.kind[j]];
      for (const auto *e = w.begin(at), *end = w.end(at); e != end; ++e) d += e->value * move[e->row];
      t.defect[j] = d;  // from here on the step of ln m
      magnitude(d);
      raise(longest, t.m[j] > abundant_from ? d : Lanes{});
    }
    Lanes fraction = longest > longest_step ? longest_step / longest : Lanes{} + 1.0;
    for (std::size_t lane = 0; lane < lanes; ++lane)
      if (arrived[lane]) fraction[lane] = 0;
    for (std::size_t i = 0; i < n; ++i) p.x[i] += fraction * move[i];
    Lanes growth = fraction * d_ln_water;
    exponential(growth);
    p.water_kg *= growth;
    for (std::size_t j = 0; j < count; ++j) p.ln_m[j] += fraction * t.defect[j];
    for (std::size_t k = 0; k < held; ++k) {
      Lanes& mol = p.phase_mol[active[k]];
      mol += fraction * (K[(n + 1 + k) * wide + size] - mol);
    }
  }
  return;
}

}  // namespace bathwright::speciation
