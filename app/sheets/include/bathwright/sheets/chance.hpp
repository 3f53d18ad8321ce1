// How sure a plan is, in the words of a sheet.
#pragma once

#include <bathwright/dosing/plan.hpp>
#include <bathwright/sheets/shown_units.hpp>
#include <string>

namespace bathwright::sheets {

/// "97 % chance of ending inside every window."
/// "Only 72 % chance of ending inside every window: nickel is the doubtful one; a second nickel analysis
/// would make it 93 %."
[[nodiscard]] std::string chance_of_ending_inside(const bath::BathType& type, const dosing::Plan& plan);

/// What might not stay dissolved at the working temperature; empty where everything surely does.
[[nodiscard]] std::string chance_of_staying_dissolved(const bath::Tank& tank, const dosing::Plan& plan,
                                                      const Units& units);

}  // namespace bathwright::sheets
