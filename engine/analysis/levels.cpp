#include "levels.hpp"

#include <algorithm>
#include <bathwright/matter/formula.hpp>
#include <cassert>
#include <cmath>

namespace bathwright::analysis {
namespace {

double charge_of(const std::string& species) {
  const auto formula = matter::Formula::parse(species);
  assert(formula);  // Chemistry::prepare has read it
  return formula->charge();
}

}  // namespace

Levels::Taken Levels::take(const Finding& finding) {
  const bath::Quantity& quantity = *finding.quantity;
  speciation::Composition known = quantity.counts;
  const auto is_open = [&](const auto& part) { return !knows(part.first); };
  const auto open = std::ranges::find_if(known, is_open);
  if (open == known.end()) return Taken::restates;
  const auto [component, coefficient] = *open;
  known.erase(open);
  if (std::ranges::any_of(known, is_open)) return Taken::leaves_open;

  Weights weights = *weights_of(known);
  for (auto& [input, weight] : weights) weight /= -coefficient;
  weights[inputs_.size()] = 1 / coefficient;
  weights_[component] = std::move(weights);
  const double molar_mass = quantity.formula.molar_mass().v;
  inputs_.push_back({quantity.id, finding.g_per_L, finding.g_per_L / molar_mass,
                     finding.u_g_per_L / molar_mass, finding.from});
  return Taken::settles_a_component;
}

void Levels::close_charge(const std::string& counter_ion, double mol_per_L) {
  Weights weights;
  double balanced = 0;
  for (const auto& [component, of_component] : weights_) {
    const double share = -charge_of(component) / charge_of(counter_ion);
    for (const auto& [input, weight] : of_component) {
      weights[input] += share * weight;
      balanced += share * weight * inputs_[input].mol_per_L;
    }
  }
  weights[inputs_.size()] = 1;
  weights_[counter_ion] = std::move(weights);
  inputs_.push_back({"", 0, mol_per_L - balanced, 0, Origin::electroneutrality});
}

std::map<std::string, double> Levels::in_use() const {
  std::map<std::string, double> g_per_L;
  for (const Input& input : inputs_) {
    if (!input.quantity.empty()) g_per_L[input.quantity] = input.g_per_L;
  }
  return g_per_L;
}

std::optional<Levels::Weights> Levels::weights_of(const speciation::Composition& counts) const {
  Weights sum;
  for (const auto& [component, coefficient] : counts) {
    const auto found = weights_.find(component);
    if (found == weights_.end()) return std::nullopt;
    for (const auto& [input, weight] : found->second) sum[input] += coefficient * weight;
  }
  return sum;
}

std::optional<Levels::Level> Levels::of(const speciation::Composition& counts) const {
  const auto weights = weights_of(counts);
  if (!weights) return std::nullopt;
  Level level{0, 0, weights->empty() ? Origin::book : Origin::titration};
  for (const auto& [index, weight] : *weights) {
    const Input& input = inputs_[index];
    level.mol_per_L += weight * input.mol_per_L;
    level.u_mol_per_L = std::hypot(level.u_mol_per_L, weight * input.u_mol_per_L);
    if (weight != 0) level.from = std::max(level.from, input.from);
  }
  return level;
}

}  // namespace bathwright::analysis
