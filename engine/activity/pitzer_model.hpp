// The ion-interaction model of Pitzer with unsymmetrical mixing.
#pragma once

#include "pitzer_parameters.hpp"

namespace bathwright::activity {

/// Equations: Pitzer 1991, Activity Coefficients in Electrolyte Solutions, 2nd ed., ch. 3. With the Gibbs
/// function
///   G/RT = -(4 A I/b) ln(1 + b s) + 2 sum_ca m_c m_a (B_ca + Z C_ca / 2) + sum_{i<j like} m_i m_j 2 Phi_ij
///          + sum psi m m m + 2 sum lambda m_n m_i + sum zeta m m m,        s = sqrt(I), Z = sum m |z|, b
///          = 1.2
/// ln gamma is its gradient, the derivatives are its (symmetric) second derivatives, and the osmotic
/// coefficient follows by Gibbs-Duhem. Ions outside the model (see PitzerParameters) take no part in G.
class PitzerModel final : public ActivityModel {
 public:
  PitzerModel(std::span<const Solute> solutes, units::Celsius t, PitzerParameters parameters);
  double evaluate(std::span<const double> molality, std::span<double> ln_gamma) const override;
  double evaluate(std::span<const double> molality, std::span<double> ln_gamma,
                  std::span<const std::uint32_t> columns, std::span<double> derivative) const override;
  ModelKind kind() const override { return ModelKind::pitzer; }
  std::span<const InteractionNote> notes() const override { return p_.notes; }
  double trusted_ionic_strength() const override;

 private:
  /// A binary term with its alphas replaced by positions in alphas_ (none: no_alpha).
  struct Pair {
    std::uint32_t cation, anion;
    double beta0, beta1, beta2, c;
    std::uint8_t alpha1, alpha2;
  };
  struct LikePairTerm {
    std::uint32_t i, j;
    double theta;
    std::uint8_t mixing;  ///< position in mixed_charges_ (none: equal charges)
  };
  struct Sums;  ///< what one pass over the solution yields

  template <bool second_order>
  double pass(std::span<const double> molality, std::span<double> ln_gamma, Sums& sums) const;

  static constexpr std::uint8_t none = 255;
  static constexpr std::size_t max_alphas = 8, max_mixed = 32;

  double a_phi_;
  std::vector<int> charge_;
  std::vector<std::uint8_t> inside_;  ///< 0 for the ions outside the model
  std::vector<double> alphas_;
  std::vector<std::pair<int, int>> mixed_charges_;
  std::vector<Pair> pairs_;
  std::vector<LikePairTerm> like_pairs_;
  PitzerParameters p_;
};

}  // namespace bathwright::activity
