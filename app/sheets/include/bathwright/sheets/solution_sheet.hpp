// A speciated free solution on a page.
#pragma once

#include <bathwright/sheets/text.hpp>
#include <bathwright/solution/solution.hpp>

namespace bathwright::sheets {

/// Species below 1e-9 mol/kg and solids more than three decades from saturation are left out, and it says so.
[[nodiscard]] Lines solution_sheet(const solution::Solution& solution, std::string_view name);

}  // namespace bathwright::sheets
