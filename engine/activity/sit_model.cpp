#include "sit_model.hpp"

#include <algorithm>
#include <array>
#include <bathwright/activity/debye_huckel_slope.hpp>
#include <cmath>
#include <numbers>
#include <numeric>

namespace bathwright::activity {
namespace {

constexpr double size = 1.5;          // kg^0.5 mol^-0.5, the size term of the convention
constexpr double smallest_I = 1e-30;  // for the logarithm and the root

/// Solutes of one charge with the same coefficients towards every ion.
Kinds kinds_by_coefficients(std::span<const Solute> solutes, const SitParameters& parameters) {
  using Key = std::pair<int, std::vector<SitCoefficient>>;
  std::vector<Key> key;
  for (const Solute& solute : solutes)
    key.emplace_back(solute.charge, std::vector<SitCoefficient>(solutes.size()));
  for (const SitParameters::Pair& pair : parameters.pairs) {
    key[pair.cation].second[pair.anion] = pair.epsilon;
    key[pair.anion].second[pair.cation] = pair.epsilon;
  }
  return kinds_by(solutes, key);
}

}  // namespace

SitModel::SitModel(std::span<const Solute> solutes, units::Celsius t, std::span<const Interaction> stated)
    : SitModel(solutes, sit_parameters(solutes, t, stated), t) {}

SitModel::SitModel(std::span<const Solute> solutes, const SitParameters& parameters, units::Celsius t)
    : SitModel(kinds_by_coefficients(solutes, parameters), parameters, t) {}

SitModel::SitModel(const Kinds& kinds, const SitParameters& parameters, units::Celsius t)
    : ActivityModel(kinds.of),
      charge_(kinds.charge),
      slope_ln_(3 * osmotic_slope(t)),
      notes_(parameters.notes) {
  for (const SitParameters::Pair& pair : parameters.pairs) {
    const std::uint16_t cation = kinds.of[pair.cation], anion = kinds.of[pair.anion];
    // Solutes of a kind share their coefficients: one pair of examples stands for all.
    if (kinds.example[cation] != pair.cation || kinds.example[anion] != pair.anion) continue;
    pairs_.push_back(
        {cation,
         anion,
         {pair.epsilon.constant * std::numbers::ln10, pair.epsilon.log_term * std::numbers::ln10}});
  }
}

double SitModel::evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma) const {
  const double I = std::max(ionic_strength(molality, charge_), smallest_I);
  const double s = std::sqrt(I), x = size * s, log10_I = std::log10(I);
  for (std::size_t i = 0; i < charge_.size(); ++i)
    ln_gamma[i] = -slope_ln_ * charge_[i] * charge_[i] * s / (1 + x);
  // Gibbs-Duhem along dilution: -ln a_w / M_w = sum m + int lambda d(sum m ln gamma), term by term.
  double osmotic = -2 * slope_ln_ / (size * size * size) * (1 + x - 2 * std::log1p(x) - 1 / (1 + x));
  for (const Pair& p : pairs_) {
    const double epsilon = p.epsilon.constant + p.epsilon.log_term * log10_I;
    const double mc = molality[p.cation], ma = molality[p.anion];
    ln_gamma[p.cation] += epsilon * ma;
    ln_gamma[p.anion] += epsilon * mc;
    osmotic += mc * ma * (epsilon + p.epsilon.log_term / (2 * std::numbers::ln10));
  }
  return -water_kg_per_mol * (std::accumulate(molality.begin(), molality.end(), 0.0) + osmotic);
}

double SitModel::evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma,
                                std::span<double> derivative) const {
  const std::size_t n = charge_.size();
  const double I = std::max(ionic_strength(molality, charge_), smallest_I);
  const double s = std::sqrt(I), log10_I = std::log10(I);
  // by_I[i]: d ln gamma_i / dI; I moves by z^2 / 2 for each mol/kg.
  std::array<double, max_solutes> by_I;
  for (std::size_t i = 0; i < n; ++i)
    by_I[i] = -slope_ln_ * charge_[i] * charge_[i] / (2 * s * (1 + size * s) * (1 + size * s));
  for (const Pair& p : pairs_) {
    by_I[p.cation] += p.epsilon.log_term * molality[p.anion] / (I * std::numbers::ln10);
    by_I[p.anion] += p.epsilon.log_term * molality[p.cation] / (I * std::numbers::ln10);
  }
  for (std::size_t i = 0; i < n; ++i)
    for (std::size_t j = 0; j < n; ++j) derivative[i * n + j] = by_I[i] * charge_[j] * charge_[j] / 2;
  for (const Pair& p : pairs_) {
    const double epsilon = p.epsilon.constant + p.epsilon.log_term * log10_I;
    derivative[p.cation * n + p.anion] += epsilon;
    derivative[p.anion * n + p.cation] += epsilon;
  }
  return evaluate_kinds(molality, ln_gamma);
}

}  // namespace bathwright::activity
