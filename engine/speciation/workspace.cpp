#include "workspace.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace bathwright::speciation {
namespace {

/// Stoichiometric inverses are small fractions; rounding them keeps the totals of the new basis exact.
double to_simple_fraction(double value) {
  constexpr double denominator = 5040;
  const double rounded = std::round(value * denominator) / denominator;
  return std::abs(value - rounded) < 1e-10 ? rounded : value;
}

}  // namespace

Workspace::Workspace(const Solver& solver, const Task& task) : model_(&solver.model()) {
  const ChemicalSystem& system = solver.system();
  const std::size_t all = system.components().size();
  const auto rule = [&](std::size_t solid) {
    return task.solids.empty() ? SolidRule::report_only : task.solids[solid];
  };

  std::vector<bool> present(all, false);
  present[0] = true;  // water always brings H^+
  for (std::size_t i = 0; i < all; ++i)
    present[i] = present[i] || std::abs(task.component_mol[i]) > absent_mol;
  const auto bring = [&](const std::vector<double>& made_of) {
    for (std::size_t i = 0; i < all; ++i) present[i] = present[i] || made_of[i] != 0;
  };
  for (std::size_t k = 0; k < system.solids().size(); ++k)
    if (rule(k) == SolidRule::in_excess) bring(system.solids()[k].made_of);
  for (const HeldGas& held : task.gases) bring(system.gases()[held.gas].made_of);
  if (task.pH) present[task.pH->counter_ion] = true;

  std::vector<Index> row_of(all, -1);
  Index rows = 0;
  for (std::size_t i = 0; i < all; ++i)
    if (present[i]) row_of[i] = rows++;
  const auto possible = [&](const std::vector<double>& made_of) {
    for (std::size_t i = 0; i < all; ++i)
      if (made_of[i] != 0 && !present[i]) return false;
    return true;
  };
  const auto dense = [&](const std::vector<double>& made_of) {
    Vector column = Vector::Zero(rows);
    for (std::size_t i = 0; i < all; ++i)
      if (row_of[i] >= 0) column(row_of[i]) = made_of[i];
    return column;
  };

  for (std::size_t j = 0; j < system.species().size(); ++j)
    if (possible(system.species()[j].made_of)) species.push_back(j);
  A.resize(rows, static_cast<Index>(species.size()));
  water.resize(A.cols());
  ln_K.resize(A.cols());
  charge.resize(A.cols());
  for (Index j = 0; j < A.cols(); ++j) {
    const std::size_t at = species[static_cast<std::size_t>(j)];
    A.col(j) = dense(system.species()[at].made_of);
    water(j) = system.species()[at].water;
    charge(j) = system.species()[at].charge;
    ln_K(j) = solver.ln_K_species()[at];
  }
  total = dense(task.component_mol);
  total_water = task.water_kg * water_mol_per_kg;
  water_kg = task.water_kg;

  for (std::size_t k = 0; k < system.solids().size(); ++k) {
    const SystemSolid& solid = system.solids()[k];
    if (rule(k) == SolidRule::report_only || !possible(solid.made_of)) continue;
    const bool excess = rule(k) == SolidRule::in_excess;
    if (!excess && !solver.covers(k)) continue;
    const Vector column = dense(solid.made_of);
    phases.push_back({excess ? Phase::Kind::excess : Phase::Kind::precipitate, k, column, column, solid.water,
                      solid.water, solver.ln_K_solids()[k], excess, 0});
  }
  for (const HeldGas& held : task.gases) {
    const SystemSpecies& gas = system.gases()[held.gas];
    const Vector column = dense(gas.made_of);
    phases.push_back({Phase::Kind::gas, held.gas, column, column, gas.water, gas.water,
                      solver.ln_K_gases()[held.gas] + std::log(held.pressure_bar), true, 0});
  }
  if (task.pH) {
    Vector condition = Vector::Zero(rows), supply = Vector::Zero(rows);
    condition(proton) = 1;
    supply(proton) = 1;
    const int z = system.species()[task.pH->counter_ion].charge;
    supply(row_of[task.pH->counter_ion]) = -1.0 / z;
    phases.push_back(
        {Phase::Kind::ph, 0, condition, supply, 0, 0, -task.pH->pH * std::numbers::ln10, true, 0});
  }

  x = Vector::Zero(rows);
  ln_gamma = Vector::Zero(A.cols());
  full_molality_.assign(system.species().size(), 0);
  full_ln_gamma_.assign(system.species().size(), 0);
}

Vector Workspace::ln_molality() const { return ln_K + A.transpose() * x + water * ln_aw - ln_gamma; }

double Workspace::activity_coefficients(const Vector& molality, Vector& ln_g) {
  for (std::size_t j = 0; j < species.size(); ++j)
    full_molality_[species[j]] = molality(static_cast<Index>(j));
  const double ln_water = model_->evaluate(full_molality_, full_ln_gamma_);
  for (std::size_t j = 0; j < species.size(); ++j) ln_g(static_cast<Index>(j)) = full_ln_gamma_[species[j]];
  return ln_water;
}

double Workspace::activity_coefficients(const Vector& molality, Vector& ln_g,
                                        const std::vector<Index>& columns, Matrix& derivative) {
  const auto kind = model_->kind_of();
  const std::size_t kinds = model_->kinds();
  std::vector<double> in_kind(kinds, 0), ln_gamma_of_kind(kinds), by_kind(kinds * kinds);
  for (std::size_t j = 0; j < species.size(); ++j)
    in_kind[kind[species[j]]] += molality(static_cast<Index>(j));
  const double ln_water = model_->evaluate_kinds(in_kind, ln_gamma_of_kind, by_kind);
  derivative.resize(count(), static_cast<Index>(columns.size()));
  for (std::size_t j = 0; j < species.size(); ++j) {
    ln_g(static_cast<Index>(j)) = ln_gamma_of_kind[kind[species[j]]];
    for (std::size_t c = 0; c < columns.size(); ++c)
      derivative(static_cast<Index>(j), static_cast<Index>(c)) =
          by_kind[kind[species[j]] * kinds + kind[species[static_cast<std::size_t>(columns[c])]]];
  }
  return ln_water;
}

void Workspace::rebase(const Vector& molality, double ln_a_water) {
  // Gaussian elimination over the species and present solids in order of abundance picks the most abundant
  // independent ones. A solid in the basis keeps the noise of its amount out of what is left dissolved.
  struct Candidate {
    double mol;
    const double* made_of;
    double ln_K, water;
  };
  std::vector<Candidate> order;
  for (Index j = 0; j < count(); ++j)
    order.push_back({molality(j) * water_kg, A.col(j).data(), ln_K(j), water(j)});
  for (const Phase& phase : phases)
    if (phase.kind == Phase::Kind::precipitate && phase.active)
      order.push_back({phase.mol, phase.condition.data(), -phase.ln_K, phase.water});
  std::stable_sort(order.begin(), order.end(),
                   [](const Candidate& a, const Candidate& b) { return a.mol > b.mol; });
  Matrix B(components(), components());
  Vector K(components()), h(components());
  std::vector<Vector> eliminated;
  std::vector<Index> pivots;
  for (const Candidate& candidate : order) {
    const auto chosen = static_cast<Index>(eliminated.size());
    if (chosen == components()) break;
    const Eigen::Map<const Vector> made_of(candidate.made_of, components());
    Vector column = made_of;
    for (std::size_t k = 0; k < eliminated.size(); ++k) column -= column(pivots[k]) * eliminated[k];
    Index pivot = 0;
    const double size = column.cwiseAbs().maxCoeff(&pivot);
    if (size < 1e-9) continue;
    B.col(chosen) = made_of;
    K(chosen) = candidate.ln_K;
    h(chosen) = candidate.water;
    eliminated.push_back(column / column(pivot));
    pivots.push_back(pivot);
  }
  const Matrix inverse = Matrix(B.inverse()).unaryExpr(&to_simple_fraction);
  x = K + h * ln_a_water + B.transpose() * x;
  A = (inverse * A).unaryExpr(&to_simple_fraction);
  ln_K -= A.transpose() * K;
  water -= A.transpose() * h;
  total = inverse * total;
  total_water -= total.dot(h);
  for (Phase& phase : phases) {
    phase.condition = inverse * phase.condition;
    phase.supply = inverse * phase.supply;
    phase.ln_K += phase.condition.dot(K);
    phase.water -= phase.condition.dot(h);
    phase.supply_water -= phase.supply.dot(h);
  }
}

}  // namespace bathwright::speciation
