// Amounts of chemicals as somebody types them.
#pragma once

#include <bathwright/dosing/check_plan.hpp>

#include "shop.hpp"

namespace bathwright::work {

/// So much of a chemical, as typed.
struct WantedAmount {
  dosing::Wanted wanted;
  double amount = 0;
  std::string unit;  ///< "kg", or "L" for a liquid measured by volume
};

/// "12 kg" of "nickel-sulfate", on the tank's shelf or in the catalogue. `where` names the place in messages.
/// Fails on a chemical nobody knows, on what is no mass or volume, on litres of a solid.
Result<WantedAmount> read_wanted(const Shop& shop, const std::string& amount, const std::string& id,
                                 const std::string& where);

/// What an interlock refuses, as problems of this place.
[[nodiscard]] Problems problems_of(const std::vector<dosing::Refusal>& refused, const std::string& where);

}  // namespace bathwright::work
