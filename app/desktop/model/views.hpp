// From what was worked out to what the panels show, in words.
#pragma once

#include "../panels/view.hpp"
#include "reading_draft.hpp"
#include "tank_work.hpp"

namespace bathwright::desktop {

[[nodiscard]] ReadingsView readings_view(const Draft& draft, const std::vector<int>& line_of_row,
                                         const Worked* worked);
[[nodiscard]] StateView state_view(const Worked& worked, const dosing::Plan* plan);
[[nodiscard]] AdditionsView additions_view(const Worked& worked, int plan,
                                           const std::vector<std::pair<std::string, double>>& edited);
[[nodiscard]] ChemistryView chemistry_view(const Worked& worked);

/// The plan that is shown: the edited one, else the chosen one; nullptr where there is none.
[[nodiscard]] const dosing::Plan* shown_plan(const Worked& worked, int plan);

}  // namespace bathwright::desktop
