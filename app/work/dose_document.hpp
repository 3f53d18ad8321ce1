// The document of `dose`, which is also what the log keeps of a plan.
#pragma once

#include <bathwright/dosing/plan.hpp>

#include "documents.hpp"
#include "shop.hpp"

namespace bathwright::work {

/// `changed_since`: what the log has of the tank after the readings, a warning each.
[[nodiscard]] Json dose_document(const Shop& shop, const dosing::AdditionSheet& sheet,
                                 const std::vector<std::string>& changed_since);

}  // namespace bathwright::work
