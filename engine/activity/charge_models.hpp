// Davies and extended Debye-Hueckel: activity coefficients from charge, size and ionic strength alone.
#pragma once

#include <bathwright/activity/model.hpp>
#include <bathwright/units/quantity.hpp>

#include "kinds.hpp"

namespace bathwright::activity {

/// What equations that know only charge and size leave open, of each cation with each anion: |z+ z-| times
/// 0.25 ln units per mol/kg. Davies' own comparison with 1-1 and 1-2 electrolytes: 2 % in the mean at
/// 0.1 mol/kg (recalled), a standard deviation of 2.5 % where errors are normal; what is left out, specific
/// interaction, is linear in the molality of the other ion.
std::vector<InteractionNote> specific_interaction_left_out(std::span<const Solute> solutes);

/// log10 g = -A z^2 (sqrt(I)/(1+sqrt(I)) - 0.3 I); a neutral solute gives exactly 0. The bracket is held at
/// its value at I = 1 mol/kg above that (the quadratic would run away). Trusted to 0.5 mol/kg. Water activity
/// by Gibbs-Duhem. Source: Davies, C. W., Ion Association, Butterworths, London, 1962.
class DaviesModel final : public ActivityModel {
 public:
  DaviesModel(std::span<const Solute> solutes, units::Celsius t);
  double evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma) const override;
  double evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma,
                        std::span<double> derivative) const override;
  ModelKind kind() const override { return ModelKind::davies; }
  std::span<const InteractionNote> notes() const override { return notes_; }
  double trusted_ionic_strength() const override { return 0.5; }

 private:
  DaviesModel(Kinds kinds, units::Celsius t);
  std::vector<int> charge_;  ///< per kind
  double slope_ln_;
  std::vector<InteractionNote> notes_;
};

/// log10 g = -A z^2 sqrt(I) / (1 + B a sqrt(I)) with the ion sizes of Kielland 1937 (J. Am. Chem. Soc.
/// 59:1675); an ion without a size gets 400 pm (a note says so); neutral: exactly 0. Trusted to 0.1 mol/kg.
/// With individual sizes this is not the gradient of a Gibbs energy; water's activity sums each ion's own
/// osmotic term.
class DebyeHueckelModel final : public ActivityModel {
 public:
  DebyeHueckelModel(std::span<const Solute> solutes, units::Celsius t);
  double evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma) const override;
  double evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma,
                        std::span<double> derivative) const override;
  ModelKind kind() const override { return ModelKind::debye_huckel; }
  std::span<const InteractionNote> notes() const override { return notes_; }
  double trusted_ionic_strength() const override { return 0.1; }

 private:
  struct Sizes {
    std::vector<double> pm;  ///< per solute
    std::vector<InteractionNote> notes;
  };
  static Sizes sizes(std::span<const Solute> solutes);
  DebyeHueckelModel(const Kinds& kinds, Sizes sizes, units::Celsius t);

  std::vector<int> charge_;  ///< per kind
  std::vector<double> ba_;   ///< per kind: B times the size, kg^0.5 mol^-0.5
  double slope_ln_;
  std::vector<InteractionNote> notes_;
};

}  // namespace bathwright::activity
