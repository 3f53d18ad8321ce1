#include "pitzer_model.hpp"

#include <algorithm>
#include <array>
#include <bathwright/activity/debye_huckel_slope.hpp>
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

double dot(const double* a, const double* c, std::size_t n) {
  double sum = 0;
  for (std::size_t i = 0; i < n; ++i) sum += a[i] * c[i];
  return sum;
}

/// Everything the parameters say about a solute: outside or not, charge, and its terms with every other. Two
/// solutes with equal keys are one kind; one that is in a triplet is a kind of its own.
using Key = std::vector<int>;

std::vector<Key> keys(std::span<const Solute> solutes, const PitzerParameters& p) {
  const std::size_t n = solutes.size();
  std::vector<Key> key(n, Key(n + 3, 0));
  for (std::size_t i = 0; i < n; ++i) key[i][1] = solutes[i].charge;
  for (const std::uint32_t i : p.outside) key[i][0] = 1;
  std::map<std::array<double, 6>, int> terms;
  const auto set = [&](std::uint32_t i, std::uint32_t j, const std::array<double, 6>& term) {
    const int id = terms.emplace(term, static_cast<int>(terms.size()) + 1).first->second;
    key[i][3 + j] = key[j][3 + i] = id;
  };
  for (const BinaryTerm& t : p.binary)
    set(t.cation, t.anion,
        {t.beta0, t.beta1, t.beta2, t.c, t.beta1 == 0 ? 0 : t.alpha1, t.beta2 == 0 ? 0 : t.alpha2});
  for (const LikePair& t : p.like_pairs)
    if (t.theta != 0) set(t.i, t.j, {t.theta});
  for (const NeutralPair& t : p.neutral_pairs) set(t.neutral, t.other, {t.lambda});
  for (const Triplet& t : p.triplets)
    for (const std::uint32_t i : {t.i, t.j, t.k}) key[i][2] = static_cast<int>(i) + 1;
  return key;
}

std::vector<int> distinct_charges(const Kinds& kinds, std::size_t inside) {
  std::vector<int> charges(kinds.charge.begin(), kinds.charge.begin() + static_cast<std::ptrdiff_t>(inside));
  charges.erase(std::unique(charges.begin(), charges.end()), charges.end());
  return charges;
}

/// A matrix over kinds filled from terms over solutes.
class KindMatrix {
 public:
  explicit KindMatrix(const Kinds& kinds) : kinds_(&kinds), value_(kinds.size() * kinds.size(), 0) {}
  void set(std::uint32_t i, std::uint32_t j, double value) {
    const std::size_t n = kinds_->size(), k = kinds_->of[i], l = kinds_->of[j];
    value_[k * n + l] = value_[l * n + k] = value;
  }
  [[nodiscard]] BlockMatrix matrix() const { return {value_, kinds_->size()}; }

 private:
  const Kinds* kinds_;
  std::vector<double> value_;
};

BlockMatrix constant_part(const Kinds& kinds, const PitzerParameters& p) {
  KindMatrix part(kinds);
  for (const BinaryTerm& t : p.binary) part.set(t.cation, t.anion, t.beta0);
  for (const LikePair& t : p.like_pairs)
    if (t.theta != 0) part.set(t.i, t.j, t.theta);
  for (const NeutralPair& t : p.neutral_pairs) part.set(t.neutral, t.other, t.lambda);
  return part.matrix();
}

BlockMatrix c_part(const Kinds& kinds, const PitzerParameters& p) {
  KindMatrix part(kinds);
  for (const BinaryTerm& t : p.binary) part.set(t.cation, t.anion, t.c);
  return part.matrix();
}

}  // namespace

struct PitzerModel::Sums {
  double I, Z, F, F_slope;
  std::array<Decay, max_alphas> decay;
  std::array<MixingTerm, MixingTerms::max_pairs> mixing;
  std::array<double, max_solutes> P;  ///< sum over partners of m B' and m Phi'
  std::array<double, max_solutes> R;  ///< sum over counter-ions of m C
};

PitzerModel::PitzerModel(std::span<const Solute> solutes, units::Celsius t,
                         const PitzerParameters& parameters)
    : PitzerModel(kinds_by(solutes, keys(solutes, parameters)), t, parameters) {}

PitzerModel::PitzerModel(const Kinds& kinds, units::Celsius t, const PitzerParameters& p)
    : ActivityModel(kinds.of),
      a_phi_(osmotic_slope(t)),
      inside_([&] {
        std::vector<bool> outside(kinds.size(), false);
        for (const std::uint32_t i : p.outside) outside[kinds.of[i]] = true;
        return static_cast<std::size_t>(std::find(outside.begin(), outside.end(), true) - outside.begin());
      }()),
      mixing_(distinct_charges(kinds, inside_), a_phi_),
      constant_(constant_part(kinds, p)),
      c_(c_part(kinds, p)),
      notes_(p.notes) {
  for (std::size_t k = 0; k < kinds.size(); ++k) {
    const double z = std::abs(kinds.charge[k]);
    z_.push_back(k < inside_ ? z : 0);
    z2_.push_back(k < inside_ ? z * z : 0);
    outside_z2_.push_back(k < inside_ ? 0 : z * z);
    if (k < inside_ && (k == 0 || kinds.charge[k] != kinds.charge[k - 1])) classes_.push_back({k, k});
    if (k < inside_) classes_.back().last = k + 1;
  }
  assert(classes_.size() <= max_classes);
  std::map<double, KindMatrix> by_alpha;
  for (const BinaryTerm& t2 : p.binary) {
    if (t2.beta1 != 0)
      by_alpha.try_emplace(t2.alpha1, kinds).first->second.set(t2.cation, t2.anion, t2.beta1);
    if (t2.beta2 != 0)
      by_alpha.try_emplace(t2.alpha2, kinds).first->second.set(t2.cation, t2.anion, t2.beta2);
  }
  for (const auto& [alpha, beta] : by_alpha) decaying_.push_back({alpha, beta.matrix()});
  assert(decaying_.size() <= max_alphas);
  for (const Triplet& t3 : p.triplets)
    triplets_.push_back({kinds.of[t3.i], kinds.of[t3.j], kinds.of[t3.k], t3.value});
}

double PitzerModel::pass(std::span<const double> molality, std::span<double> ln_gamma, Sums& s) const {
  const std::size_t n = z_.size();
  const double* m = molality.data();
  double total = 0, twice_I = 0;
  s.Z = 0;
  for (std::size_t i = 0; i < n; ++i) {
    total += m[i];
    twice_I += m[i] * z2_[i];
    s.Z += m[i] * z_[i];
  }
  const double I = s.I = std::max(twice_I / 2, 1e-20);
  const double root = std::sqrt(I);
  s.F = -a_phi_ * (root / (1 + b * root) + 2 / b * std::log1p(b * root));
  s.F_slope = -a_phi_ * (1 / (2 * root * (1 + b * root) * (1 + b * root)) + 1 / (root * (1 + b * root)));
  double osmotic = -a_phi_ * I * root / (1 + b * root);  // half of (phi - 1) sum m

  std::array<double, max_solutes> u;  // sum over partners of m W
  std::fill_n(u.begin(), n, 0);
  std::fill_n(s.P.begin(), n, 0);
  std::fill_n(s.R.begin(), n, 0);
  constant_.multiply(m, u.data());
  for (std::size_t k = 0; k < decaying_.size(); ++k) {
    std::array<double, max_solutes> v;
    std::fill_n(v.begin(), n, 0);
    decaying_[k].beta.multiply(m, v.data());
    const Decay d = s.decay[k] = decay(decaying_[k].alpha * root);
    const double first = d.g1 / I;
    for (std::size_t i = 0; i < n; ++i) {
      u[i] += d.g * v[i];
      s.P[i] += first * v[i];
    }
    s.F_slope += d.g2 / (I * I) * dot(m, v.data(), n) / 2;
  }
  mixing_.evaluate(I, s.mixing);
  std::array<double, max_classes> in_class, e, e1;
  for (std::size_t c = 0; c < classes_.size(); ++c) {
    in_class[c] = e[c] = e1[c] = 0;
    for (std::size_t i = classes_[c].first; i < classes_[c].last; ++i) in_class[c] += m[i];
  }
  const auto pairs = mixing_.pairs();
  for (std::size_t k = 0; k < pairs.size(); ++k) {
    const auto [c, d] = pairs[k];
    e[c] += in_class[d] * s.mixing[k].value;
    e[d] += in_class[c] * s.mixing[k].value;
    e1[c] += in_class[d] * s.mixing[k].first;
    e1[d] += in_class[c] * s.mixing[k].first;
    s.F_slope += in_class[c] * in_class[d] * s.mixing[k].second;
  }
  for (std::size_t c = 0; c < classes_.size(); ++c)
    for (std::size_t i = classes_[c].first; i < classes_[c].last; ++i) {
      u[i] += e[c];
      s.P[i] += e1[c];
    }
  c_.multiply(m, s.R.data());
  const double Q = dot(m, s.R.data(), n) / 2;  // sum m_c m_a C_ca
  const double mP = dot(m, s.P.data(), n) / 2;
  s.F += mP;
  osmotic += dot(m, u.data(), n) / 2 + I * mP + s.Z * Q;
  for (std::size_t i = 0; i < n; ++i) ln_gamma[i] = 2 * u[i] + s.Z * s.R[i] + z2_[i] * s.F + z_[i] * Q;
  for (const Triplet& t : triplets_) {
    const double mi = m[t.i], mj = m[t.j], mk = m[t.k];
    ln_gamma[t.i] += mj * mk * t.value;
    ln_gamma[t.j] += mi * mk * t.value;
    ln_gamma[t.k] += mi * mj * t.value;
    osmotic += mi * mj * mk * t.value;
  }
  if (inside_ < n) {
    const double outside = stand_in(a_phi_, I).value;
    for (std::size_t i = inside_; i < n; ++i) ln_gamma[i] = outside_z2_[i] * outside;
  }
  return -water_kg_per_mol * (total + 2 * osmotic);
}

double PitzerModel::evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma) const {
  Sums sums;
  return pass(molality, ln_gamma, sums);
}

double PitzerModel::evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma,
                                   std::span<double> derivative) const {
  Sums s;
  const double ln_water = pass(molality, ln_gamma, s);
  const std::size_t n = z_.size();
  double* H = derivative.data();
  for (std::size_t i = 0; i < n; ++i) {
    const double z = z_[i], z2 = z2_[i], base = z2 / 2 * s.F_slope + s.P[i], R = s.R[i];
    double* row = H + i * n;
    for (std::size_t j = 0; j < n; ++j) row[j] = base * z2_[j] + z2 * s.P[j] + z * s.R[j] + z_[j] * R;
  }
  constant_.add_to(H, 2);
  for (std::size_t k = 0; k < decaying_.size(); ++k) decaying_[k].beta.add_to(H, 2 * s.decay[k].g);
  c_.add_to(H, s.Z);
  const auto pairs = mixing_.pairs();
  for (std::size_t k = 0; k < pairs.size(); ++k) {
    const ChargeClass c = classes_[pairs[k].i], d = classes_[pairs[k].j];
    const double twice = 2 * s.mixing[k].value;
    for (std::size_t i = c.first; i < c.last; ++i)
      for (std::size_t j = d.first; j < d.last; ++j) {
        H[i * n + j] += twice;
        H[j * n + i] += twice;
      }
  }
  for (const Triplet& t : triplets_) {
    const auto add = [&](std::uint32_t i, std::uint32_t j, double value) {
      H[i * n + j] += value;
      H[j * n + i] += value;
    };
    add(t.i, t.j, molality[t.k] * t.value);
    add(t.i, t.k, molality[t.j] * t.value);
    add(t.j, t.k, molality[t.i] * t.value);
  }
  if (inside_ < n) {
    const double slope = stand_in(a_phi_, s.I).slope / 2;
    for (std::size_t i = inside_; i < n; ++i)
      for (std::size_t j = 0; j < n; ++j) H[i * n + j] = slope * outside_z2_[i] * z2_[j];
  }
  return ln_water;
}

double PitzerModel::trusted_ionic_strength() const { return std::numeric_limits<double>::infinity(); }

}  // namespace bathwright::activity
