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
  for (Form* form : {&form_, &original_}) {
    form->first.reserve(count + 1);
    form->entries.reserve(count * (all + 1));
    form->first_holder.reserve(all + 1);
    form->holders.reserve(count * all);
  }
  original_phases_.reserve(solids + gases + 1);
  members_.reserve(count + solids);
}

void Workspace::load(const Task& task, const Constants& constants) {
  if (was_present_[0] && same_problem(task)) {
    if (rebased_) return_to_components();
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
    Vector column(rows);
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
  original_kept_ = false;
  over_components(rows);
  form_.A.resize(rows, static_cast<Index>(species.size()));
  form_.water.resize(form_.A.cols());
  ln_K.resize(form_.A.cols());
  charge.resize(form_.A.cols());
  for (Index j = 0; j < form_.A.cols(); ++j) {
    const SystemSpecies& row = system.species()[species[static_cast<std::size_t>(j)]];
    form_.A.col(j) = dense(row.made_of);
    form_.water(j) = row.water;
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

/// The components are the basis.
void Workspace::over_components(Index rows) {
  rebased_ = false;
  ++basis_;
  inverse_.setIdentity(rows, rows);
  members_.clear();
  for (Index i = 0; i < rows; ++i) members_.push_back({false, static_cast<std::size_t>(i)});
}

void Workspace::return_to_components() {
  form_ = original_;
  for (std::size_t k = 0; k < phases.size(); ++k) phases[k] = original_phases_[k];
  over_components(components());
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
  Vector K(components()), h(components());
  for (Index i = 0; i < components(); ++i) {
    const auto [is_phase, index] = members_[static_cast<std::size_t>(i)];
    K(i) = is_phase ? -phases[index].ln_K : ln_K(static_cast<Index>(index));
    h(i) = is_phase ? solver_->system().solids()[phases[index].index].water
                    : solver_->system().species()[species[index]].water;
  }
  total = Vector(inverse_.lazyProduct(total));
  total_water -= total.dot(h);
  for (Index j = 0; j < count(); ++j) ln_K(j) -= form_.A.col(j).dot(K);
  for (Phase& phase : phases) phase.ln_K += phase.condition.dot(K);
}

void Workspace::list_entries() {
  form_.entries.clear();
  form_.first.clear();
  for (Index j = 0; j < count(); ++j) {
    form_.first.push_back(form_.entries.size());
    for (Index i = 0; i < components(); ++i)
      if (form_.A(i, j) != 0) form_.entries.push_back({static_cast<std::uint16_t>(i), form_.A(i, j)});
    if (form_.water(j) != 0)
      form_.entries.push_back({static_cast<std::uint16_t>(components()), form_.water(j)});
  }
  form_.first.push_back(form_.entries.size());
  // The same entries row by row: count, then place.
  const auto rows = static_cast<std::size_t>(components());
  form_.first_holder.assign(rows + 1, 0);
  for (const Entry& entry : form_.entries)
    if (entry.row < rows) ++form_.first_holder[entry.row + 1u];
  for (std::size_t i = 0; i < rows; ++i) form_.first_holder[i + 1] += form_.first_holder[i];
  form_.holders.resize(form_.first_holder[rows]);
  std::array<std::size_t, most_rows> next{};
  std::copy_n(form_.first_holder.begin(), rows, next.begin());
  for (Index j = 0; j < count(); ++j)
    for (const Entry* e = begin(j); e != end(j); ++e)
      if (e->row < rows) form_.holders[next[e->row]++] = {j, e->value};
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

bool Workspace::rebase(const SpeciesVector& m) {
  // A component is scarce when its own species holds next to nothing of it: its balance then says nothing
  // about it. Two rounds a component are ample: a swap may make another one scarce.
  bool exchanged = false;
  for (Index round = 0; round < 2 * components(); ++round) {
    const Index scarce = scarce_component(m);
    if (scarce < 0) break;
    const BasisMember member = most_abundant_holder(scarce, m);
    if (member == members_[static_cast<std::size_t>(scarce)]) break;
    exchange(scarce, member);
    list_entries();
    exchanged = true;
  }
  return exchanged;
}

Index Workspace::scarce_component(const SpeciesVector& m) const {
  constexpr double scarce_fraction = 1e-6;
  Vector throughput = total.cwiseAbs();
  for (Index i = 0; i < components(); ++i)
    for (const auto& [j, count] : holders(i)) throughput(i) += std::abs(count) * m(j) * water_kg;
  for (Index i = 0; i < components(); ++i)
    if (std::exp(std::min(x(i), 50.0)) * water_kg < scarce_fraction * throughput(i)) return i;
  return -1;
}

Workspace::BasisMember Workspace::most_abundant_holder(Index component, const SpeciesVector& m) const {
  // A solid in the basis keeps the noise of its amount out of what is left dissolved.
  constexpr double part_of_it = 1e-9;
  BasisMember most = members_[static_cast<std::size_t>(component)];
  double largest = 0;
  for (Index j = 0; j < count(); ++j)
    if (std::abs(form_.A(component, j)) > part_of_it && m(j) * water_kg > largest) {
      largest = m(j) * water_kg;
      most = {false, static_cast<std::size_t>(j)};
    }
  for (std::size_t k = 0; k < phases.size(); ++k)
    if (phases[k].kind == Phase::Kind::precipitate && phases[k].active && phases[k].mol > largest &&
        std::abs(phases[k].condition(component)) > part_of_it) {
      largest = phases[k].mol;
      most = {true, k};
    }
  return most;
}

void Workspace::exchange(Index i, BasisMember member) {
  if (!original_kept_) {
    original_ = form_;
    original_phases_ = phases;
    original_kept_ = true;
  }
  const auto row = static_cast<Index>(member.index);
  const Vector made_of = member.is_phase ? phases[member.index].condition : Vector(form_.A.col(row));
  const double K = member.is_phase ? -phases[member.index].ln_K : ln_K(row);
  const double h = member.is_phase ? phases[member.index].water : form_.water(row);
  x(i) = K + h * ln_aw + made_of.dot(x);
  // Over the new basis: c_i / d_i of the new member, the rest of c less what that brings.
  const auto rewrite = [&](auto&& column) {
    const double share = to_simple_fraction(column(i) / made_of(i));
    if (share == 0) return 0.0;
    for (Index k = 0; k < components(); ++k)
      if (made_of(k) != 0) column(k) = k == i ? share : to_simple_fraction(column(k) - share * made_of(k));
    return share;
  };
  for (Index j = 0; j < count(); ++j)
    if (form_.A(i, j) != 0) {
      const double share = rewrite(form_.A.col(j));
      ln_K(j) -= share * K;
      form_.water(j) -= share * h;
    }
  for (Phase& phase : phases) {
    const double share = rewrite(phase.condition), supplied = rewrite(phase.supply);
    phase.ln_K += share * K;
    phase.water -= share * h;
    phase.supply_water -= supplied * h;
  }
  for (Index c = 0; c < inverse_.cols(); ++c) rewrite(inverse_.col(c));
  const double of_member = total(i) / made_of(i);
  total -= of_member * made_of;
  total(i) = of_member;
  total_water -= of_member * h;
  members_[static_cast<std::size_t>(i)] = member;
  rebased_ = true;
  ++basis_;
}

}  // namespace bathwright::speciation
