#include "workspace.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>

#include "elimination.hpp"

namespace bathwright::speciation {
namespace {

/// Stoichiometric inverses are small fractions; rounding them keeps the totals of the new basis exact.
double to_simple_fraction(double value) {
  if (value == static_cast<double>(static_cast<int>(value))) return value;
  constexpr double denominator = 5040;
  const double rounded = std::round(value * denominator) / denominator;
  return std::abs(value - rounded) < 1e-10 ? rounded : value;
}

SolidRule rule(const Task& task, std::size_t solid) {
  return task.solids.empty() ? SolidRule::report_only : task.solids[solid];
}

void mark_present(const ChemicalSystem& system, const Task& task, std::vector<bool>& present) {
  for (std::size_t i = 0; i < present.size(); ++i) present[i] = std::abs(task.component_mol[i]) > absent_mol;
  present[0] = true;  // water always brings H^+
  const auto bring = [&](const std::vector<double>& made_of) {
    for (std::size_t i = 0; i < present.size(); ++i)
      if (made_of[i] != 0) present[i] = true;
  };
  for (std::size_t k = 0; k < system.solids().size(); ++k)
    if (rule(task, k) == SolidRule::in_excess) bring(system.solids()[k].made_of);
  for (const HeldGas& held : task.gases) bring(system.gases()[held.gas].made_of);
  if (task.pH) present[task.pH->counter_ion] = true;
}

}  // namespace

Workspace::Workspace(const Solver& solver) : solver_(&solver), model_(&solver.model()) {
  const ChemicalSystem& system = solver.system();
  const std::size_t all = system.components().size(), count = system.species().size(),
                    solids = system.solids().size(), gases = system.gases().size();
  const std::size_t width = padded(all + 2), system_width = padded(all + solids + gases + 4);
  kind_table.resize(2 * kinds() * width);
  by_kind.resize(kinds() * kinds());
  derivative.resize(kinds() * kinds());
  elimination.resize(std::max(kinds() * (padded(kinds()) + width), system_width * system_width));
  curvature.resize((all + 1) * width);
  phases.reserve(solids + gases + 1);
  species.reserve(count);
  kind.reserve(count);
  row_of_.reserve(all);
  present_.resize(all);
  was_present_.resize(all);
  rules_.reserve(solids);
  held_gases_.reserve(gases);
  first_.reserve(count + 1);
  entries_.reserve(count * (all + 1));
  first_holder_.reserve(all + 1);
  holders_.reserve(count * all);
  members_.reserve(count + solids);
}

void Workspace::load(const Task& task, const Constants& constants) {
  if (was_present_[0] && !rebased_ && same_problem(task)) {
    for (Phase& phase : phases) {
      phase.active = phase.kind != Phase::Kind::precipitate;
      phase.mol = 0;
    }
  } else {
    compile(task);
  }
  fill(task, constants);
  x.setZero(components());
  ln_gamma.setZero(static_cast<Index>(kinds()));
  ln_aw = 0;
  water_kg = task.water_kg;
}

bool Workspace::reload(const Task& task, const Constants& constants) {
  if (!was_present_[0] || !same_problem(task)) return false;
  fill(task, constants);
  return true;
}

bool Workspace::same_problem(const Task& task) const {
  if (task.solids.size() != rules_.size() || !std::equal(rules_.begin(), rules_.end(), task.solids.begin()) ||
      task.gases.size() != held_gases_.size() || task.pH.has_value() != counter_ion_.has_value() ||
      (task.pH && task.pH->counter_ion != *counter_ion_))
    return false;
  for (std::size_t g = 0; g < held_gases_.size(); ++g)
    if (task.gases[g].gas != held_gases_[g]) return false;
  for (std::size_t i = 0; i < present_.size(); ++i)
    if (std::abs(task.component_mol[i]) > absent_mol && !was_present_[i]) return false;
  // A component that is gone altogether must not keep its place; one that only solids bring does.
  for (std::size_t i = 1; i < present_.size(); ++i)
    if (present_[i] && !(std::abs(task.component_mol[i]) > absent_mol)) return false;
  return true;
}

void Workspace::compile(const Task& task) {
  const ChemicalSystem& system = solver_->system();
  const std::size_t all = system.components().size();
  mark_present(system, task, was_present_);
  for (std::size_t i = 0; i < all; ++i)
    present_[i] = was_present_[i] && std::abs(task.component_mol[i]) > absent_mol;
  rules_.assign(task.solids.begin(), task.solids.end());
  held_gases_.clear();
  for (const HeldGas& held : task.gases) held_gases_.push_back(held.gas);
  counter_ion_.reset();
  if (task.pH) counter_ion_ = task.pH->counter_ion;
  rebased_ = false;

  row_of_.assign(all, -1);
  Index rows = 0;
  for (std::size_t i = 0; i < all; ++i)
    if (was_present_[i]) row_of_[i] = rows++;
  const auto possible = [&](const std::vector<double>& made_of) {
    for (std::size_t i = 0; i < all; ++i)
      if (made_of[i] != 0 && !was_present_[i]) return false;
    return true;
  };
  const auto dense = [&](const std::vector<double>& made_of) {
    Vector column = Vector::Zero(rows);
    for (std::size_t i = 0; i < all; ++i)
      if (row_of_[i] >= 0) column(row_of_[i]) = made_of[i];
    return column;
  };

  species.clear();
  kind.clear();
  for (std::size_t j = 0; j < system.species().size(); ++j)
    if (possible(system.species()[j].made_of)) {
      species.push_back(j);
      kind.push_back(model_->kind_of()[j]);
    }
  A.resize(rows, static_cast<Index>(species.size()));
  water.resize(A.cols());
  ln_K.resize(A.cols());
  charge.resize(A.cols());
  for (Index j = 0; j < A.cols(); ++j) {
    const SystemSpecies& row = system.species()[species[static_cast<std::size_t>(j)]];
    A.col(j) = dense(row.made_of);
    water(j) = row.water;
    charge(j) = row.charge;
  }
  list_entries();

  phases.clear();
  for (std::size_t k = 0; k < system.solids().size(); ++k) {
    const SystemSolid& solid = system.solids()[k];
    if (rule(task, k) == SolidRule::report_only || !possible(solid.made_of)) continue;
    const bool excess = rule(task, k) == SolidRule::in_excess;
    if (!excess && !solver_->covers(k)) continue;
    const Vector column = dense(solid.made_of);
    phases.push_back({excess ? Phase::Kind::excess : Phase::Kind::precipitate, k, column, column, solid.water,
                      solid.water, 0, excess, 0});
  }
  for (const HeldGas& held : task.gases) {
    const SystemSpecies& gas = system.gases()[held.gas];
    const Vector column = dense(gas.made_of);
    phases.push_back({Phase::Kind::gas, held.gas, column, column, gas.water, gas.water, 0, true, 0});
  }
  if (task.pH) {
    Vector condition = Vector::Zero(rows), supply = Vector::Zero(rows);
    condition(proton) = 1;
    supply(proton) = 1;
    const int z = system.species()[task.pH->counter_ion].charge;
    supply(row_of_[task.pH->counter_ion]) = -1.0 / z;
    phases.push_back({Phase::Kind::ph, 0, condition, supply, 0, 0, 0, true, 0});
  }
}

void Workspace::fill(const Task& task, const Constants& constants) {
  total.resize(components());
  for (std::size_t i = 0; i < row_of_.size(); ++i)
    if (row_of_[i] >= 0) total(row_of_[i]) = task.component_mol[i];
  total_water = task.water_kg * water_mol_per_kg;
  for (Index j = 0; j < count(); ++j) ln_K(j) = constants.species[species[static_cast<std::size_t>(j)]];
  std::size_t gas = 0;
  for (Phase& phase : phases) switch (phase.kind) {
      case Phase::Kind::precipitate:
      case Phase::Kind::excess:
        phase.ln_K = constants.solids[phase.index];
        break;
      case Phase::Kind::gas:
        phase.ln_K = constants.gases[phase.index] + std::log(task.gases[gas++].pressure_bar);
        break;
      case Phase::Kind::ph:
        phase.ln_K = -task.pH->pH * std::numbers::ln10;
        break;
    }
  if (!rebased_) return;
  // Over the members of another basis.
  Vector K(components());
  for (Index i = 0; i < components(); ++i) {
    const BasisMember& member = members_[static_cast<std::size_t>(i)];
    K(i) = member.is_phase ? -phases[member.index].ln_K : ln_K(static_cast<Index>(member.index));
  }
  total = Vector(inverse_.lazyProduct(total));
  total_water -= total.dot(members_water_);
  for (Index j = 0; j < count(); ++j) ln_K(j) -= A.col(j).dot(K);
  for (Phase& phase : phases) phase.ln_K += phase.condition.dot(K);
}

void Workspace::list_entries() {
  entries_.clear();
  first_.clear();
  for (Index j = 0; j < count(); ++j) {
    first_.push_back(entries_.size());
    for (Index i = 0; i < components(); ++i)
      if (A(i, j) != 0) entries_.push_back({static_cast<std::uint16_t>(i), A(i, j)});
    if (water(j) != 0) entries_.push_back({static_cast<std::uint16_t>(components()), water(j)});
  }
  first_.push_back(entries_.size());
  holders_.clear();
  first_holder_.clear();
  for (Index i = 0; i < components(); ++i) {
    first_holder_.push_back(holders_.size());
    for (Index j = 0; j < count(); ++j)
      if (A(i, j) != 0) holders_.push_back({j, A(i, j)});
  }
  first_holder_.push_back(holders_.size());
}

void Workspace::ln_molality(SpeciesVector& result) const {
  double extended[most_rows];
  std::copy_n(x.data(), components(), extended);
  extended[components()] = ln_aw;
  result.resize(count());
  for (Index j = 0; j < count(); ++j) {
    double sum = ln_K(j) - ln_gamma(kind[static_cast<std::size_t>(j)]);
    for (const Entry* e = begin(j); e != end(j); ++e) sum += e->value * extended[e->row];
    result(j) = sum;
  }
}

void Workspace::molality(SpeciesVector& result, double highest) const {
  ln_molality(result);
  result = result.array().min(highest).exp();
}

void Workspace::sum_kinds(const SpeciesVector& molality, SpeciesVector& in_kind) const {
  in_kind.setZero(static_cast<Index>(kinds()));
  for (Index j = 0; j < count(); ++j) in_kind(kind[static_cast<std::size_t>(j)]) += molality(j);
}

void Workspace::rebase(const SpeciesVector& m) {
  // Gaussian elimination over the species and present solids in order of abundance picks the most abundant
  // independent ones. A solid in the basis keeps the noise of its amount out of what is left dissolved.
  const auto amount = [&](const BasisMember& member) {
    return member.is_phase ? phases[member.index].mol : m(static_cast<Index>(member.index)) * water_kg;
  };
  members_.clear();
  for (std::size_t j = 0; j < species.size(); ++j) members_.push_back({false, j});
  for (std::size_t k = 0; k < phases.size(); ++k)
    if (phases[k].kind == Phase::Kind::precipitate && phases[k].active) members_.push_back({true, k});
  std::sort(members_.begin(), members_.end(), [&](const BasisMember& a, const BasisMember& b) {
    const double left = amount(a), right = amount(b);
    if (left != right) return left > right;
    return a.is_phase != b.is_phase ? b.is_phase : a.index < b.index;
  });
  const auto made_of = [&](const BasisMember& member) -> Vector {
    if (member.is_phase) return phases[member.index].condition;
    return A.col(static_cast<Index>(member.index));
  };
  const Index n = components();
  Table B(n, n), eliminated(n, n);
  Vector K(n), h(n);
  std::array<Index, most_rows> pivots{};
  Index chosen = 0;
  for (std::size_t c = 0; c < members_.size() && chosen < n; ++c) {
    const BasisMember member = members_[c];
    Vector column = made_of(member);
    for (Index k = 0; k < chosen; ++k)
      column -= column(pivots[static_cast<std::size_t>(k)]) * eliminated.col(k);
    Index pivot = 0;
    const double size = column.cwiseAbs().maxCoeff(&pivot);
    if (size < 1e-9) continue;
    B.col(chosen) = made_of(member);
    K(chosen) = member.is_phase ? -phases[member.index].ln_K : ln_K(static_cast<Index>(member.index));
    h(chosen) = member.is_phase ? phases[member.index].water : water(static_cast<Index>(member.index));
    eliminated.col(chosen) = column / column(pivot);
    pivots[static_cast<std::size_t>(chosen)] = pivot;
    members_[static_cast<std::size_t>(chosen)] = member;
    ++chosen;
  }
  const Table inverse = Table(B.inverse()).unaryExpr(&to_simple_fraction);
  x = Vector(K + h * ln_aw + B.transpose().lazyProduct(x));
  total = Vector(inverse.lazyProduct(total));
  total_water -= total.dot(h);
  for (Index j = 0; j < count(); ++j) {
    A.col(j) = Vector(inverse.lazyProduct(A.col(j))).unaryExpr(&to_simple_fraction);
    ln_K(j) -= A.col(j).dot(K);
    water(j) -= A.col(j).dot(h);
  }
  for (Phase& phase : phases) {
    phase.condition = Vector(inverse.lazyProduct(phase.condition));
    phase.supply = Vector(inverse.lazyProduct(phase.supply));
    phase.ln_K += phase.condition.dot(K);
    phase.water -= phase.condition.dot(h);
    phase.supply_water -= phase.supply.dot(h);
  }
  list_entries();
  // For reload(): the way from the components, whatever the basis was before.
  inverse_ = rebased_ ? Table(inverse.lazyProduct(inverse_)).unaryExpr(&to_simple_fraction) : inverse;
  rebased_ = true;
  members_water_.resize(n);
  for (Index i = 0; i < n; ++i) {
    const auto [is_phase, index] = members_[static_cast<std::size_t>(i)];
    members_water_(i) = is_phase ? solver_->system().solids()[phases[index].index].water
                                 : solver_->system().species()[species[index]].water;
  }
}

}  // namespace bathwright::speciation
