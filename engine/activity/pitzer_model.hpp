// The ion-interaction model of Pitzer with unsymmetrical mixing.
#pragma once

#include "block_matrix.hpp"
#include "kinds.hpp"
#include "mixing_terms.hpp"
#include "pitzer_parameters.hpp"

namespace bathwright::activity {

/// Equations: Pitzer 1991, Activity Coefficients in Electrolyte Solutions, 2nd ed., ch. 3. With the Gibbs
/// function
///   G/RT = -(4 A I/b) ln(1 + b s) + 2 sum_ca m_c m_a (B_ca + Z C_ca / 2) + sum_{i<j like} m_i m_j 2 Phi_ij
///          + sum psi m m m + 2 sum lambda m_n m_i + sum zeta m m m,        s = sqrt(I), Z = sum m |z|, b
///          = 1.2
/// ln gamma is its gradient, the derivatives are its (symmetric) second derivatives, and the osmotic
/// coefficient follows by Gibbs-Duhem. Ions outside the model (see PitzerParameters) take no part in G.
///
/// With W_kl(I) = beta0 + sum beta_a g(alpha_a s) + theta + E-theta + lambda as one symmetric matrix over
/// kinds, half of whose quadratic form is the binary part of G, each sum is a product of matrix and vector.
class PitzerModel final : public ActivityModel {
 public:
  PitzerModel(std::span<const Solute> solutes, units::Celsius t, const PitzerParameters& parameters);
  double evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma) const override;
  double evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma,
                        std::span<double> derivative) const override;
  ModelKind kind() const override { return ModelKind::pitzer; }
  std::span<const InteractionNote> notes() const override { return notes_; }
  double trusted_ionic_strength() const override;

 private:
  /// What falls off with the ionic strength as g(alpha s).
  struct Decaying {
    double alpha;
    BlockMatrix beta;
  };
  /// Kinds of one charge, which stand side by side.
  struct ChargeClass {
    std::size_t first, last;
  };
  struct Sums;  ///< what one pass over the solution yields

  PitzerModel(const Kinds& kinds, units::Celsius t, const PitzerParameters& parameters);
  double pass(std::span<const double> molality, std::span<double> ln_gamma, Sums& sums) const;

  double a_phi_;
  std::size_t inside_;              ///< kinds before this one take part in the model
  std::vector<double> z_, z2_;      ///< per kind: |charge| and its square; 0 outside the model
  std::vector<double> outside_z2_;  ///< per kind: the square of the charge outside the model, else 0
  std::vector<ChargeClass> classes_;
  MixingTerms mixing_;
  BlockMatrix constant_;  ///< beta0, theta, lambda
  BlockMatrix c_;         ///< C_ca
  std::vector<Decaying> decaying_;
  std::vector<Triplet> triplets_;  ///< over kinds
  std::vector<InteractionNote> notes_;

  static constexpr std::size_t max_alphas = 8, max_classes = 24;
};

}  // namespace bathwright::activity
