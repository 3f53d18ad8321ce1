// Order, portions and the checks of every step on the way.
#pragma once

#include <bathwright/dosing/plan.hpp>

namespace bathwright::dosing {

struct Portioned {
  const bath::ShelfItem* item;
  const bath::Brings* brings;
  double kg;
};

struct Steps {
  std::vector<Addition> additions;
  std::vector<Step> steps;
  bath::TankState final_state;
  std::vector<Refusal> refused;         ///< by an interlock; what they name has no step
  std::vector<std::string> keep_apart;  ///< as Plan::keep_apart
};

enum class Sequence : std::uint8_t {
  by_rule,  ///< as order.hpp has it
  as_given  ///< somebody's own; a check of each step says where the rule has it otherwise
};

/// Each chemical in equal portions none of which breaks its single-addition rule or warms the tank too much,
/// dissolved or thinned apart in water taken from the fill, in bath drawn off where that is used up; every
/// portion speciated in the whole tank and where it goes in, and checked. What an interlock forbids is
/// refused.
Result<Steps> make_steps(const bath::Tank& tank, const bath::Chemistry& chemistry, bath::TankState state,
                         std::vector<Portioned> amounts, Sequence sequence = Sequence::by_rule);

/// So many kg of something on the shelf, as a line of a plan.
[[nodiscard]] Addition addition_of(const bath::ShelfItem& item, double kg);

/// What must be said before anybody opens a bag: the bath type's cautions, then each chemical's, then who
/// decides.
[[nodiscard]] std::vector<std::string> cautions_for(const bath::Tank& tank, const bath::BathType& type,
                                                    const Plan& plan);

}  // namespace bathwright::dosing
