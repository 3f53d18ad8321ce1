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
};

/// Water first (the fill), then by the bath type's order; each chemical in equal portions none of which
/// breaks its single-addition rule; every portion speciated and checked.
Result<Steps> make_steps(const bath::Tank& tank, const bath::Chemistry& chemistry, bath::TankState state,
                         std::vector<Portioned> amounts);

/// What must be said before anybody opens a bag: the bath type's cautions, then each chemical's, then who
/// decides.
[[nodiscard]] std::vector<std::string> cautions_for(const bath::Tank& tank, const bath::BathType& type,
                                                    const Plan& plan);

}  // namespace bathwright::dosing
