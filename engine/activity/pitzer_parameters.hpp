// Looks up the ion-interaction parameters for a list of solutes at a temperature: which published or
// regressed set serves a pair, interpolation in temperature, and the named rules for what is missing.
#pragma once

#include <bathwright/activity/make_model.hpp>
#include <bathwright/activity/model.hpp>

namespace bathwright::activity {

struct BinaryTerm {
  std::uint32_t cation, anion;
  double beta0, beta1, beta2, c;  ///< c = C_phi / (2 sqrt|z+ z-|)
  double alpha1, alpha2;
};
struct LikePair {  ///< two cations or two anions, i < j in the solute list
  std::uint32_t i, j;
  double theta;
};
struct NeutralPair {
  std::uint32_t neutral, other;
  double lambda;
};
struct Triplet {  ///< psi (two like ions and one of opposite sign) or zeta (neutral, cation, anion)
  std::uint32_t i, j, k;
  double value;
};

/// Everything the model needs, in solute order, and what a user must be told about it.
struct PitzerParameters {
  std::vector<BinaryTerm> binary;
  std::vector<LikePair> like_pairs;  ///< only pairs with a theta or of unequal charge
  std::vector<NeutralPair> neutral_pairs;
  std::vector<Triplet> triplets;
  /// Ions the set says nothing about and whose charge type is too rare for an estimate: Davies' coefficient,
  /// with the ionic strength held at 1 mol/kg, stands in for them.
  std::vector<std::uint32_t> outside;
  std::vector<InteractionNote> notes;
};

/// Rules for what is not published, each listed in the notes, with a standard uncertainty of ln gamma per
/// mol/kg taken from the spread (68 %) of what is published:
///   cation - anion   of 2 B at 1 mol/kg among the pairs of the same charges; with fewer than five of them
///                    |z+ z-| times that of the 1-1 pairs
///   theta, lambda    twice the spread of the published values; psi and zeta: their spread, per mol2/kg2
///   published fits   of ln gamma at the end of their range, where two exist: what they differ by at 25 degC
///                    over |z+ z-|; less in proportion to molality below. A fit whose range nobody states is
///                    taken to end where 68 % of the others of its charges still hold
///   temperature      no slope: of the published slopes over |z+ z-|, times |z+ z- (t - 25)|
///                    a slope, or a table below 25 degC: of what the published tables add to the slopes of
///                    the same pairs at 0 and 50 degC, per K^2, times |z+ z-| (t - 25)^2; of a pair that has
///                    both, what they differ by
///   half of it for an estimate or analogy, a quarter where weakly tested or transferred, a twentieth where
///                    regressed or tested on data
/// The rules:
///   cation - anion   median beta0, beta1, beta2 of the published pairs of the same charge type, C_phi = 0
///   ion without any published pair, of a charge type with fewer than three published pairs: outside the
///   model like - like      theta = 0 (the electrostatic E-theta stays) triplets, neutral - anything    0; a
///   psi that is not published is noted where the pairs of its triplet are
/// What is stated comes before all of this (activity/interaction.hpp) and counts as regressed.
PitzerParameters pitzer_parameters(std::span<const Solute> solutes, units::Celsius t, ParameterSets sets,
                                   std::span<const Interaction> stated);

}  // namespace bathwright::activity
