#include "pitzer_model.hpp"

#include <algorithm>
#include <array>
#include <bathwright/activity/debye_huckel_slope.hpp>
#include <bathwright/activity/unsymmetrical_mixing.hpp>
#include <cassert>
#include <cmath>
#include <cstdlib>
#include <limits>

namespace bathwright::activity {
namespace {

constexpr double b = 1.2;  // kg^0.5 mol^-0.5, the same for all electrolytes

/// g and the two functions its derivatives with respect to I are made of, at x = alpha sqrt(I):
///   dg/dI = g1 / I,  d2g/dI2 = g2 / I^2.
struct Decay {
  double g, g1, g2;
};

Decay decay(double x) {
  const double e = std::exp(-x);
  if (x < 0.05) {  // series: the closed forms lose digits
    const double g = 1 + x * (-2.0 / 3 + x * (1.0 / 4 + x * (-1.0 / 15 + x / 72)));
    const double g1 = x * (-1.0 / 3 + x * (1.0 / 4 + x * (-1.0 / 10 + x / 36)));
    return {g, g1, -(x * e / 2 + 2 * g1)};
  }
  const double g1 = -2 * (1 - (1 + x + x * x / 2) * e) / (x * x);
  return {2 * (1 - (1 + x) * e) / (x * x), g1, -(x * e / 2 + 2 * g1)};
}

/// What stands in for ions outside the model: Davies' bracket held at 1 mol/kg, ln g = z^2 f(I).
struct StandIn {
  double value, slope;
};

StandIn stand_in(double a_phi, double I) {
  const double i = std::min(I, 1.0), s = std::sqrt(i);
  return {-3 * a_phi * (s / (1 + s) - 0.3 * i),
          I < 1 ? -3 * a_phi * (1 / (2 * s * (1 + s) * (1 + s)) - 0.3) : 0};
}

}  // namespace

struct PitzerModel::Sums {
  double I, Z, F, F_slope;
  std::array<Decay, max_alphas> decay;
  std::array<MixingTerm, max_mixed> mixing;
  std::array<double, max_solutes> P;  ///< sum over partners of m B' and m Phi'
  std::array<double, max_solutes> R;  ///< sum over counter-ions of m C
};

PitzerModel::PitzerModel(std::span<const Solute> solutes, units::Celsius t, PitzerParameters parameters)
    : a_phi_(osmotic_slope(t)), inside_(solutes.size(), 1), p_(std::move(parameters)) {
  for (const Solute& solute : solutes) charge_.push_back(solute.charge);
  for (const std::uint32_t i : p_.outside) inside_[i] = 0;
  const auto position = [&](double alpha) -> std::uint8_t {
    const auto found = std::find(alphas_.begin(), alphas_.end(), alpha);
    if (found != alphas_.end()) return static_cast<std::uint8_t>(found - alphas_.begin());
    assert(alphas_.size() < max_alphas);
    alphas_.push_back(alpha);
    return static_cast<std::uint8_t>(alphas_.size() - 1);
  };
  for (const BinaryTerm& t2 : p_.binary)
    pairs_.push_back({t2.cation, t2.anion, t2.beta0, t2.beta1, t2.beta2, t2.c,
                      t2.beta1 == 0 ? none : position(t2.alpha1),
                      t2.beta2 == 0 ? none : position(t2.alpha2)});
  for (const LikePair& pair : p_.like_pairs) {
    const std::pair<int, int> charges = std::minmax(charge_[pair.i], charge_[pair.j]);
    std::uint8_t mixing = none;
    if (charges.first != charges.second) {
      auto found = std::find(mixed_charges_.begin(), mixed_charges_.end(), charges);
      if (found == mixed_charges_.end()) found = mixed_charges_.insert(found, charges);
      mixing = static_cast<std::uint8_t>(found - mixed_charges_.begin());
    }
    like_pairs_.push_back({pair.i, pair.j, pair.theta, mixing});
  }
  assert(mixed_charges_.size() <= max_mixed);
}

template <bool second_order>
double PitzerModel::pass(std::span<const double> m, std::span<double> ln_gamma, Sums& s) const {
  const std::size_t n = charge_.size();
  double total = 0, twice_I = 0;
  s.Z = 0;
  for (std::size_t i = 0; i < n; ++i) {
    ln_gamma[i] = 0;  // collects the explicit terms first
    s.P[i] = s.R[i] = 0;
    total += m[i];
    if (!inside_[i]) continue;
    twice_I += m[i] * charge_[i] * charge_[i];
    s.Z += m[i] * std::abs(charge_[i]);
  }
  const double I = s.I = std::max(twice_I / 2, 1e-20);
  const double root = std::sqrt(I);
  for (std::size_t k = 0; k < alphas_.size(); ++k) s.decay[k] = decay(alphas_[k] * root);
  for (std::size_t k = 0; k < mixed_charges_.size(); ++k)
    s.mixing[k] = unsymmetrical_mixing(mixed_charges_[k].first, mixed_charges_[k].second, a_phi_, I);

  s.F = -a_phi_ * (root / (1 + b * root) + 2 / b * std::log1p(b * root));
  if constexpr (second_order)
    s.F_slope = -a_phi_ * (1 / (2 * root * (1 + b * root) * (1 + b * root)) + 1 / (root * (1 + b * root)));
  double osmotic = -a_phi_ * I * root / (1 + b * root);  // half of (phi - 1) sum m
  double Q = 0;                                          // sum m_c m_a C_ca

  for (const Pair& p : pairs_) {
    double B = p.beta0, B1 = 0, B2 = 0;
    const auto add = [&](double beta, std::uint8_t alpha) {
      if (alpha == none) return;
      const Decay& d = s.decay[alpha];
      B += beta * d.g;
      B1 += beta * d.g1;
      B2 += beta * d.g2;
    };
    add(p.beta1, p.alpha1);
    add(p.beta2, p.alpha2);
    B1 /= I;
    const double mc = m[p.cation], ma = m[p.anion], mm = mc * ma;
    s.F += mm * B1;
    if constexpr (second_order) s.F_slope += mm * B2 / (I * I);
    s.P[p.cation] += ma * B1;
    s.P[p.anion] += mc * B1;
    s.R[p.cation] += ma * p.c;
    s.R[p.anion] += mc * p.c;
    Q += mm * p.c;
    ln_gamma[p.cation] += ma * (2 * B + s.Z * p.c);
    ln_gamma[p.anion] += mc * (2 * B + s.Z * p.c);
    osmotic += mm * (B + I * B1 + s.Z * p.c);
  }
  for (const LikePairTerm& p : like_pairs_) {
    double phi = p.theta, phi1 = 0;
    const double mi = m[p.i], mj = m[p.j], mm = mi * mj;
    if (p.mixing != none) {
      const MixingTerm& e = s.mixing[p.mixing];
      phi += e.value;
      phi1 = e.first;
      s.F += mm * phi1;
      if constexpr (second_order) s.F_slope += mm * e.second;
      s.P[p.i] += mj * phi1;
      s.P[p.j] += mi * phi1;
    }
    ln_gamma[p.i] += 2 * mj * phi;
    ln_gamma[p.j] += 2 * mi * phi;
    osmotic += mm * (phi + I * phi1);
  }
  for (const NeutralPair& p : p_.neutral_pairs) {
    // A neutral with itself counts once in G (lambda m^2), a pair twice (2 lambda m m).
    const double twice = p.neutral == p.other ? 1 : 2;
    ln_gamma[p.neutral] += twice * m[p.other] * p.lambda;
    ln_gamma[p.other] += twice * m[p.neutral] * p.lambda;
    osmotic += twice / 2 * m[p.neutral] * m[p.other] * p.lambda;
  }
  for (const Triplet& t : p_.triplets) {
    const double mi = m[t.i], mj = m[t.j], mk = m[t.k];
    ln_gamma[t.i] += mj * mk * t.value;
    ln_gamma[t.j] += mi * mk * t.value;
    ln_gamma[t.k] += mi * mj * t.value;
    osmotic += mi * mj * mk * t.value;
  }
  const StandIn outside = stand_in(a_phi_, I);
  for (std::size_t i = 0; i < n; ++i) {
    const int z = charge_[i];
    if (inside_[i])
      ln_gamma[i] += z * z * s.F + std::abs(z) * Q;
    else
      ln_gamma[i] = z * z * outside.value;
  }
  return -water_kg_per_mol * (total + 2 * osmotic);
}

double PitzerModel::evaluate(std::span<const double> molality, std::span<double> ln_gamma) const {
  Sums sums;
  return pass<false>(molality, ln_gamma, sums);
}

double PitzerModel::evaluate(std::span<const double> molality, std::span<double> ln_gamma,
                             std::span<const std::uint32_t> columns, std::span<double> derivative) const {
  Sums s;
  const double ln_water = pass<true>(molality, ln_gamma, s);
  const std::size_t n = charge_.size(), width = columns.size();
  std::array<std::int32_t, max_solutes> column_of;
  std::fill_n(column_of.begin(), n, -1);
  for (std::size_t c = 0; c < width; ++c) column_of[columns[c]] = static_cast<std::int32_t>(c);

  const double outside_slope = stand_in(a_phi_, s.I).slope;
  for (std::size_t i = 0; i < n; ++i) {
    const double z2 = charge_[i] * charge_[i], z = std::abs(charge_[i]);
    double* row = &derivative[i * width];
    for (std::size_t c = 0; c < width; ++c) {
      const std::uint32_t j = columns[c];
      const double y2 = charge_[j] * charge_[j], y = std::abs(charge_[j]);
      if (!inside_[j])
        row[c] = 0;
      else if (!inside_[i])
        row[c] = z2 * y2 / 2 * outside_slope;
      else
        row[c] = z2 * y2 / 2 * s.F_slope + z2 * s.P[j] + y2 * s.P[i] + z * s.R[j] + y * s.R[i];
    }
  }
  const auto add = [&](std::uint32_t i, std::uint32_t j, double value) {
    if (column_of[j] >= 0) derivative[i * width + static_cast<std::size_t>(column_of[j])] += value;
    if (i != j && column_of[i] >= 0) derivative[j * width + static_cast<std::size_t>(column_of[i])] += value;
  };
  for (const Pair& p : pairs_) {
    double B = p.beta0;
    if (p.alpha1 != none) B += p.beta1 * s.decay[p.alpha1].g;
    if (p.alpha2 != none) B += p.beta2 * s.decay[p.alpha2].g;
    add(p.cation, p.anion, 2 * B + s.Z * p.c);
  }
  for (const LikePairTerm& p : like_pairs_)
    add(p.i, p.j, 2 * (p.theta + (p.mixing == none ? 0 : s.mixing[p.mixing].value)));
  for (const NeutralPair& p : p_.neutral_pairs) add(p.neutral, p.other, 2 * p.lambda);
  for (const Triplet& t : p_.triplets) {
    add(t.i, t.j, molality[t.k] * t.value);
    add(t.i, t.k, molality[t.j] * t.value);
    add(t.j, t.k, molality[t.i] * t.value);
  }
  return ln_water;
}

double PitzerModel::trusted_ionic_strength() const { return std::numeric_limits<double>::infinity(); }

}  // namespace bathwright::activity
