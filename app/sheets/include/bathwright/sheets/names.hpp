// Names and numbers as people see them.
#pragma once

#include <bathwright/units/quantity.hpp>
#include <optional>
#include <string>
#include <string_view>

namespace bathwright::sheets {

/// Ni^2+ as Ni²⁺, "NiSO4.6H2O (alpha)" as NiSO₄·6H₂O (alpha); what is no formula stays as it is.
[[nodiscard]] std::string pretty(std::string_view name);

/// To so many decimals, zero without a sign; "" for NaN.
[[nodiscard]] std::string fixed(double value, int decimals);

/// To four significant digits; "" for NaN.
[[nodiscard]] std::string figure(double value, int digits = 4);

/// "391.20 EUR"; the figure alone where no currency is stated.
[[nodiscard]] std::string money(double amount, const std::string& currency);

/// "45 min", "2.0 h".
[[nodiscard]] std::string waiting(double hours);

/// "± 0.05", a standard uncertainty to two decimals; "" where there is none.
[[nodiscard]] std::string give_or_take(const std::optional<double>& u);

}  // namespace bathwright::sheets
