// In how much water, or bath drawn off, a portion is dissolved or thinned before it goes in.
#pragma once

#include <bathwright/bath/chemistry.hpp>

#include "order.hpp"

namespace bathwright::dosing {

/// What a kg of a product needs, and what it comes from.
struct DissolvingNeed {
  bool apart = false;                    ///< false: goes in as it is
  bool slurry = false;                   ///< dissolves only in the bath itself
  std::optional<double> water_L_per_kg;  ///< nothing: not in water
  std::optional<double> bath_L_per_kg;   ///< nothing: the bath takes no more of it
  double at_C = 20;                      ///< of the liquid it is stirred into
  std::string from;                      ///< "at 80 % of what dissolves at 55 degC"
};

/// Solids: four fifths of the solubility that the engine finds for them in water and in the bath, at the
/// working temperature; what heats strongly goes into cold liquid, so much that it warms by no more than 40
/// degC; at least 2 L a kg (common practice). What the tables have no solid for is taken as freely soluble,
/// and said to be. Cyanide never goes into plain water. Liquids: as the rule of addition says, ten times
/// their volume for a trim of the pH, else as they are.
[[nodiscard]] DissolvingNeed dissolving_need(const bath::Chemistry& chemistry, const bath::TankState& state,
                                             const matter::StockChemical& stock, const bath::Brings& brings,
                                             const bath::AdditionRule* rule, Role role);

}  // namespace bathwright::dosing
