#include "coupled_newton.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

namespace bathwright::speciation {
namespace {

constexpr double highest_ln_molality = 7;  // above e^7 mol/kg nothing is a solution any more

}  // namespace

bool solve_coupled(Workspace& w, int& iterations) {
  constexpr int most = 60;
  constexpr double longest_step = 2;  // ln units, of an abundant species
  constexpr double tiny = std::numeric_limits<double>::min();
  constexpr double met = 2e-13, action_met = 1e-12;
  const Index n = w.components(), count = w.count();

  std::vector<std::size_t> active;
  for (std::size_t k = 0; k < w.phases.size(); ++k)
    if (w.phases[k].active) active.push_back(k);
  const auto held = static_cast<Index>(active.size());

  Vector ln_m = w.ln_molality().array().min(highest_ln_molality);
  Matrix G;
  std::vector<Index> abundant;
  double last_worst = std::numeric_limits<double>::infinity();
  for (int step = 0; step < most; ++step) {
    ++iterations;
    const Vector m = ln_m.array().exp();
    if (!m.allFinite()) return false;
    abundant.clear();
    const double threshold = 1e-5 * m.sum();
    for (Index j = 0; j < count; ++j)
      if (m(j) > threshold) abundant.push_back(j);
    const auto J = static_cast<Index>(abundant.size());
    w.ln_aw = w.activity_coefficients(m, w.ln_gamma, abundant, G);
    const Vector defect = w.ln_molality() - ln_m;  // of mass action

    // d ln a_w = -M_w sum m d ln a (Gibbs-Duhem), with d ln a = defect + A'dx + water d ln a_w.
    const double weight = -activity::water_kg_per_mol / (1 + activity::water_kg_per_mol * m.dot(w.water));
    const double dw0 = weight * m.dot(defect);
    const Vector dw = weight * (w.A * m);

    // d ln m of the abundant species = E0 + E dx, from (1 + G m) d ln m = defect + A'dx + water d ln a_w.
    Matrix coupling(J, J), rhs(J, n + 1);
    for (Index r = 0; r < J; ++r) {
      const Index j = abundant[static_cast<std::size_t>(r)];
      for (Index c = 0; c < J; ++c)
        coupling(r, c) = G(j, c) * m(abundant[static_cast<std::size_t>(c)]) + (r == c ? 1 : 0);
      rhs(r, 0) = defect(j) + w.water(j) * dw0;
      rhs.row(r).tail(n) = (w.A.col(j) + w.water(j) * dw).transpose();
    }
    const Matrix moved = coupling.partialPivLu().solve(rhs);
    Matrix weighted = moved;  // m d ln m, what the other species' coefficients see
    for (Index r = 0; r < J; ++r) weighted.row(r) *= m(abundant[static_cast<std::size_t>(r)]);
    Vector E0(count);
    Matrix E(count, n);
    for (Index j = 0; j < count; ++j) {
      const Eigen::RowVectorXd pull = G.row(j) * weighted;
      E0(j) = defect(j) + w.water(j) * dw0 - pull(0);
      E.row(j) = (w.A.col(j) + w.water(j) * dw).transpose() - pull.tail(n);
    }
    for (Index r = 0; r < J; ++r) {
      const Index j = abundant[static_cast<std::size_t>(r)];
      E0(j) = moved(r, 0);
      E.row(j) = moved.row(r).tail(n);
    }

    // Balances, water and conditions, linear in (dx, d ln water, phases).
    const Vector amount = w.water_kg * m;
    const Vector formed = w.A * amount;
    const Index size = n + 1 + held;
    Matrix K = Matrix::Zero(size, size);
    Vector right(size);
    K.topLeftCorner(n, n) = w.A * amount.asDiagonal() * E;
    K.block(0, n, n, 1) = formed;
    right.head(n) = w.total - formed - w.A * amount.cwiseProduct(E0);
    const Vector bound = w.water.cwiseProduct(amount);
    const double liquid = w.water_kg * water_mol_per_kg;
    K.block(n, 0, 1, n) = bound.transpose() * E;
    K(n, n) = liquid + bound.sum();
    right(n) = w.total_water - liquid - bound.sum() - bound.dot(E0);
    Vector scale = w.A.cwiseAbs() * amount + w.total.cwiseAbs();
    double residual = 0;
    Vector open = w.total - formed;
    double open_water = w.total_water - liquid - bound.sum();
    for (Index k = 0; k < held; ++k) {
      const Phase& phase = w.phases[active[static_cast<std::size_t>(k)]];
      K.block(0, n + 1 + k, n, 1) = phase.supply;
      K(n, n + 1 + k) = phase.supply_water;
      K.block(n + 1 + k, 0, 1, n) = (phase.condition + phase.water * dw).transpose();
      const double off = phase.ln_K - phase.condition.dot(w.x) - phase.water * w.ln_aw;
      right(n + 1 + k) = off - phase.water * dw0;
      open -= phase.supply * phase.mol;
      open_water -= phase.supply_water * phase.mol;
      residual = std::max(residual, std::abs(off));
    }
    for (Index i = 0; i < n; ++i) residual = std::max(residual, std::abs(open(i)) / (scale(i) + tiny));
    residual = std::max(residual, std::abs(open_water) / w.total_water);
    double action = 0;
    for (Index j = 0; j < count; ++j) action = std::max(action, std::abs(defect(j)));
    // Done at rounding level, or where rounding no longer lets it improve.
    const double worst = std::max(residual / met, action / action_met);
    if (step > 0 && (worst < 1 || (worst < 10 && worst > last_worst / 2))) return true;
    last_worst = worst;

    for (Index i = 0; i < n; ++i) {
      const double s = 1 / (scale(i) + tiny);
      K.row(i) *= s;
      right(i) *= s;
    }
    K.row(n) /= w.total_water;
    right(n) /= w.total_water;
    const Vector solution = K.partialPivLu().solve(right);
    if (!solution.allFinite()) return false;
    const Vector dln = E0 + E * solution.head(n);
    double longest = std::abs(solution(n));
    for (const Index j : abundant) longest = std::max(longest, std::abs(dln(j)));
    const double fraction = longest > longest_step ? longest_step / longest : 1;
    w.x += fraction * solution.head(n);
    w.water_kg *= std::exp(fraction * solution(n));
    ln_m = (ln_m + fraction * dln).array().min(highest_ln_molality);
    for (Index k = 0; k < held; ++k) {
      double& mol = w.phases[active[static_cast<std::size_t>(k)]].mol;
      mol += fraction * (solution(n + 1 + k) - mol);
    }
  }
  return false;
}

}  // namespace bathwright::speciation
