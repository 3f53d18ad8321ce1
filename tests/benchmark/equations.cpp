#include "equations.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

namespace bathwright::benchmark {

using speciation::SolidRule;
using speciation::water_mol_per_kg;

namespace {

constexpr double start_pH = 7;
constexpr double largest_ln = 300;  // exp of it is finite, and so are its products with amounts

}  // namespace

Equations::Equations(const speciation::Solver& solver, const speciation::Task& task)
    : model_(&solver.model()),
      components_(solver.system().components().size()),
      solids_in_system_(solver.system().solids().size()),
      total_(task.component_mol),
      total_water_mol_(task.water_kg * water_mol_per_kg) {
  const auto fill = [&](Row& row, const speciation::SystemSpecies& from, double ln_K) {
    for (std::size_t i = 0; i < components_; ++i)
      if (from.made_of[i] != 0) row.terms.push_back({i, from.made_of[i]});
    row.water = from.water;
    row.ln_K = ln_K;
  };
  const auto& system = solver.system();
  species_.resize(system.species().size());
  for (std::size_t j = 0; j < species_.size(); ++j) {
    fill(species_[j], system.species()[j], solver.ln_K().species[j]);
    charge_.push_back(system.species()[j].charge);
  }
  for (std::size_t k = 0; k < solids_in_system_; ++k) {
    if (task.solids.empty() || task.solids[k] != SolidRule::may_precipitate || !solver.covers(k)) continue;
    Solid solid;
    fill(solid, system.solids()[k], solver.ln_K().solids[k]);
    solid.index = k;
    solids_.push_back(std::move(solid));
  }
  ln_gamma_.resize(species_.size());
  fresh_ln_gamma_.resize(species_.size());
  mol_.resize(species_.size());
  balance_.resize(components_ + 1);
}

void Equations::set_totals(const speciation::Task& task) {
  total_ = task.component_mol;
  total_water_mol_ = task.water_kg * water_mol_per_kg;
}

void Equations::use(const speciation::Constants& ln_K) {
  for (std::size_t j = 0; j < species_.size(); ++j) species_[j].ln_K = ln_K.species[j];
  for (Solid& solid : solids_) solid.ln_K = ln_K.solids[solid.index];
}

void Equations::amounts(const double* u) const {
  for (std::size_t j = 0; j < species_.size(); ++j) {
    double ln_n = species_[j].ln_K + species_[j].water * ln_aw_ - ln_gamma_[j] + u[components_];
    for (const Term& term : species_[j].terms) ln_n += term.count * u[term.component];
    mol_[j] = std::exp(std::clamp(ln_n, -largest_ln, largest_ln));
  }
}

void Equations::balances(const double* u) const {
  const auto put = [&](std::size_t row, double mol) {
    (mol > 0 ? balance_[row].left : balance_[row].right) += std::abs(mol);
  };
  std::fill(balance_.begin(), balance_.end(), Side{});
  for (std::size_t j = 0; j < species_.size(); ++j) {
    for (const Term& term : species_[j].terms) put(term.component, term.count * mol_[j]);
    put(components_, species_[j].water * mol_[j]);
  }
  for (std::size_t s = 0; s < present_.size(); ++s) {
    const Solid& solid = solids_[present_[s]];
    const double mol = u[components_ + 1 + s] * solid.limit_mol;
    for (const Term& term : solid.terms) put(term.component, term.count * mol);
    put(components_, solid.water * mol);
  }
  for (std::size_t i = 0; i < components_; ++i) put(i, -total_[i]);
  put(components_, std::exp(std::clamp(u[components_], -largest_ln, largest_ln)) * water_mol_per_kg);
  put(components_, -total_water_mol_);
}

double Equations::ln_saturation(const Solid& solid, const double* u) const {
  double ln_product = solid.water * ln_aw_ - solid.ln_K;
  for (const Term& term : solid.terms) ln_product += term.count * u[term.component];
  return ln_product;
}

bool Equations::residuals(const double* u, double* f) const {
  for (std::size_t i = 0; i < size(); ++i)
    if (!std::isfinite(u[i])) return false;
  amounts(u);
  balances(u);
  for (std::size_t i = 0; i <= components_; ++i) f[i] = std::log(balance_[i].left / balance_[i].right);
  for (std::size_t s = 0; s < present_.size(); ++s)
    f[components_ + 1 + s] = ln_saturation(solids_[present_[s]], u);
  return std::all_of(f, f + size(), [](double value) { return std::isfinite(value); });
}

bool Equations::jacobian(const double* u, double* jacobian, std::size_t row_step,
                         std::size_t column_step) const {
  const std::size_t n = size();
  const auto at = [&](std::size_t row, std::size_t column) -> double& {
    return jacobian[row * row_step + column * column_step];
  };
  for (std::size_t r = 0; r < n; ++r)
    for (std::size_t c = 0; c < n; ++c) at(r, c) = 0;
  for (std::size_t i = 0; i < n; ++i)
    if (!std::isfinite(u[i])) return false;
  amounts(u);
  balances(u);
  // d ln(left)/d mol on one side, -d ln(right)/d mol on the other; a negative count turns the sign again.
  const auto per_mol = [&](std::size_t row, double mol) {
    return mol > 0 ? 1 / balance_[row].left : 1 / balance_[row].right;
  };
  for (std::size_t j = 0; j < species_.size(); ++j) {
    const auto row_of = [&](std::size_t row, double count) {
      const double weight = count * mol_[j] * per_mol(row, count);
      for (const Term& by : species_[j].terms) at(row, by.component) += weight * by.count;
      at(row, components_) += weight;
    };
    for (const Term& term : species_[j].terms) row_of(term.component, term.count);
    if (species_[j].water != 0) row_of(components_, species_[j].water);
  }
  at(components_, components_) += std::exp(std::clamp(u[components_], -largest_ln, largest_ln)) *
                                  water_mol_per_kg / balance_[components_].left;
  for (std::size_t s = 0; s < present_.size(); ++s) {
    const Solid& solid = solids_[present_[s]];
    const std::size_t column = components_ + 1 + s;
    for (const Term& term : solid.terms) {
      const double amount = term.count * solid.limit_mol;
      at(term.component, column) += amount * per_mol(term.component, amount * u[column]);
      at(column, term.component) += term.count;
    }
    const double water = solid.water * solid.limit_mol;
    at(components_, column) += water * per_mol(components_, water * u[column]);
  }
  for (std::size_t r = 0; r < n; ++r)
    for (std::size_t c = 0; c < n; ++c)
      if (!std::isfinite(at(r, c))) return false;
  return true;
}

std::vector<double> Equations::cold_start() {
  present_.clear();
  for (Solid& solid : solids_) {
    solid.limit_mol = std::numeric_limits<double>::infinity();
    for (const Term& term : solid.terms)
      if (term.component != proton_)
        solid.limit_mol = std::min(solid.limit_mol, total_[term.component] / std::abs(term.count));
  }
  const double water_kg = total_water_mol_ / water_mol_per_kg;
  std::vector<double> guess(species_.size(), 0.0);
  for (std::size_t i = 0; i < components_; ++i)
    if (i != proton_) guess[i] = total_[i] / water_kg;
  ln_aw_ = model_->evaluate(guess, ln_gamma_);
  std::vector<double> u(components_ + 1);
  for (std::size_t i = 0; i < components_; ++i)
    u[i] = i == proton_ ? -start_pH * std::log(10.0) : std::log(guess[i]) + ln_gamma_[i];
  u[components_] = std::log(water_kg);
  // The worst offender first, one component at a time: the scarcest of the species' own.
  for (int sweep = 0; sweep < 50; ++sweep) {
    amounts(u.data());
    bool lowered = false;
    for (std::size_t j = components_; j < species_.size(); ++j) {
      const Term* scarcest = nullptr;
      double ln_excess = 0;
      for (const Term& term : species_[j].terms) {
        if (term.component == proton_ || term.count < 0) continue;
        const double here = std::log(term.count * mol_[j] / total_[term.component]);
        if (here > ln_excess) scarcest = &term, ln_excess = here;
      }
      if (!scarcest) continue;
      u[scarcest->component] -= ln_excess / scarcest->count;
      amounts(u.data());
      lowered = true;
    }
    if (!lowered) break;
  }
  return u;
}

double Equations::move_coefficients(const std::vector<double>& u, double share) {
  const double water_kg = std::exp(u[components_]);
  amounts(u.data());
  std::vector<double>& molality = mol_;  // n_j in place
  for (double& m : molality) m /= water_kg;
  const double fresh_ln_aw = model_->evaluate(molality, fresh_ln_gamma_);
  double largest = std::abs(fresh_ln_aw - ln_aw_);
  for (std::size_t j = 0; j < species_.size(); ++j)
    largest = std::max(largest, std::abs(fresh_ln_gamma_[j] - ln_gamma_[j]));
  if (!std::isfinite(largest) ||
      std::any_of(fresh_ln_gamma_.begin(), fresh_ln_gamma_.end(), [](double g) { return std::isnan(g); }))
    return std::numeric_limits<double>::infinity();
  ln_aw_ += share * (fresh_ln_aw - ln_aw_);
  for (std::size_t j = 0; j < species_.size(); ++j)
    ln_gamma_[j] += share * (fresh_ln_gamma_[j] - ln_gamma_[j]);
  return largest;
}

bool Equations::change_solids(std::vector<double>& u) {
  const auto drop = [&](std::size_t s) {
    present_.erase(present_.begin() + static_cast<std::ptrdiff_t>(s));
    u.erase(u.begin() + static_cast<std::ptrdiff_t>(components_ + 1 + s));
  };
  for (std::size_t s = 0; s < present_.size(); ++s)
    if (u[components_ + 1 + s] < 0) {
      drop(s);
      return true;
    }
  constexpr double saturated = 1e-9;  // ln units
  std::size_t entering = solids_.size();
  double most = saturated;
  for (std::size_t k = 0; k < solids_.size(); ++k)
    if (std::find(present_.begin(), present_.end(), k) == present_.end())
      if (const double above = ln_saturation(solids_[k], u.data()); above > most) entering = k, most = above;
  if (entering == solids_.size()) return false;
  const auto same_ions = [&](const Solid& a, const Solid& b) {
    return a.terms.size() == b.terms.size() &&
           std::equal(a.terms.begin(), a.terms.end(), b.terms.begin(), [&](const Term& p, const Term& q) {
             return p.component == q.component &&
                    std::abs(p.count * b.terms[0].count - q.count * a.terms[0].count) < 1e-12;
           });
  };
  for (std::size_t s = 0; s < present_.size(); ++s)
    if (same_ions(solids_[present_[s]], solids_[entering])) {
      drop(s);
      break;
    }
  present_.push_back(entering);
  u.push_back(0.0);
  return true;
}

Answer Equations::answer(const std::vector<double>& u) const {
  Answer answer;
  amounts(u.data());
  answer.water_kg = std::exp(u[components_]);
  for (const double n : mol_) answer.molality.push_back(n / answer.water_kg);
  answer.solid_mol.assign(solids_in_system_, 0);
  for (std::size_t s = 0; s < present_.size(); ++s)
    answer.solid_mol[solids_[present_[s]].index] = u[components_ + 1 + s] * solids_[present_[s]].limit_mol;
  return answer;
}

}  // namespace bathwright::benchmark
