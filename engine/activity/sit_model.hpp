// Specific ion interaction theory: one coefficient for each cation and anion, with explicit complexes.
#pragma once

#include <bathwright/activity/interaction.hpp>
#include <bathwright/activity/model.hpp>
#include <bathwright/units/quantity.hpp>

#include "kinds.hpp"

namespace bathwright::activity {

/// What is known of one cation with one anion, kg/mol:  epsilon = constant + log_term log10 I.
struct SitCoefficient {
  double constant = 0, log_term = 0;
  auto operator<=>(const SitCoefficient&) const = default;
};

/// The coefficients for a list of solutes.
struct SitParameters {
  struct Pair {
    std::uint32_t cation, anion;
    SitCoefficient epsilon;
  };
  std::vector<Pair> pairs;
  std::vector<InteractionNote> notes;
};

/// Published coefficients (engine/data/activity/sit.csv), at any temperature those of 25 degC. What is not
/// published is estimated from the charges alone and noted, each +/- 0.1 kg/mol (Hummel 2009, PSI
/// TM-44-09-01; Thoenen et al. 2014, PSI Report 14-04, from memory):
///   a cation of charge z, with a univalent anion as with chloride   -0.05 + 0.10 z   (z >= 2)
///   an anion of charge -z, with a univalent cation as with sodium   -0.05 z
///   two multivalent ions: no rule is published; 0 +/- 0.2
///   a neutral solute: 0, per mol/kg of the cations
/// A stated epsilon comes before all of this, without a term in log10 I.
SitParameters sit_parameters(std::span<const Solute> solutes, units::Celsius t,
                             std::span<const Interaction> stated);

/// log10 gamma_i = -z_i^2 A s / (1 + 1.5 s) + sum_k epsilon(i, k) m_k,  s = sqrt(I), k of opposite charge.
/// Source: Grenthe, Plyasunov & Spahiu 1997, in Modelling in Aquatic Chemistry, OECD, ch. IX; equation from
/// Ciavatta 1980, Ann. Chim. (Rome) 70:551. Trusted to 3.5 mol/kg (the former, from memory). The activity of
/// water integrates Gibbs-Duhem along dilution; where an epsilon has a term in log10 I (sodium sulfate,
/// borate and three nitrates) ln gamma is not exactly the gradient of a Gibbs energy.
class SitModel final : public ActivityModel {
 public:
  SitModel(std::span<const Solute> solutes, units::Celsius t, std::span<const Interaction> stated);
  double evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma) const override;
  double evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma,
                        std::span<double> derivative) const override;
  ModelKind kind() const override { return ModelKind::sit; }
  std::span<const InteractionNote> notes() const override { return notes_; }
  double trusted_ionic_strength() const override { return 3.5; }

 private:
  struct Pair {
    std::uint16_t cation, anion;  ///< kinds
    SitCoefficient epsilon;       ///< times ln 10
  };
  SitModel(std::span<const Solute> solutes, const SitParameters& parameters, units::Celsius t);
  SitModel(const Kinds& kinds, const SitParameters& parameters, units::Celsius t);

  std::vector<int> charge_;  ///< per kind
  std::vector<Pair> pairs_;
  double slope_ln_;
  std::vector<InteractionNote> notes_;
};

}  // namespace bathwright::activity
