// Splits "14,3 g/L" into its number and its unit. Private to units.
#pragma once

#include <bathwright/base/result.hpp>
#include <optional>
#include <string>
#include <string_view>

namespace bathwright::units {

struct NumberAndUnit {
  double number = 0;
  /// The other way to read it, where a single comma stands before exactly three digits: "1,250" may be 1250.
  std::optional<double> with_thousands;
  std::string_view unit;  ///< the rest of the text, trimmed; may be empty
};

/// Decimal point or decimal comma, an optional exponent. Fails on no number, on more than one separator, on
/// digits after a space or an apostrophe, and on a number too large for a double.
Result<NumberAndUnit> split_number(std::string_view text, std::string_view where);

/// The text in quotes, shortened, for messages.
std::string quoted(std::string_view text);

}  // namespace bathwright::units
