#include <array>
#include <bathwright/matter/formula.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/units/show.hpp>
#include <charconv>
#include <cmath>

namespace bathwright::sheets {

std::string pretty(std::string_view name) {
  const std::size_t label = std::min(name.find(" ("), name.size());
  const auto formula = matter::Formula::parse(name.substr(0, label));
  return formula ? formula->pretty() + std::string(name.substr(label)) : std::string(name);
}

std::string fixed(double value, int decimals) {
  if (std::isnan(value)) return "";
  std::array<char, 400> buffer;  // the largest double has 309 digits before the mark
  const auto end =
      std::to_chars(buffer.data(), buffer.data() + buffer.size(), value, std::chars_format::fixed, decimals)
          .ptr;
  const std::string text(buffer.data(), end);
  const bool rounds_to_zero = text.find_first_not_of("-0.") == std::string::npos;
  return rounds_to_zero && text.starts_with('-') ? text.substr(1) : text;
}

std::string figure(double value, int digits) {
  return std::isnan(value) ? "" : units::significant(value, digits);
}

std::string money(double amount, const std::string& currency) {
  return fixed(amount, 2) + (currency.empty() ? "" : " " + currency);
}

std::string waiting(double hours) {
  constexpr double minutes = 60;
  return hours < 1 ? fixed(minutes * hours, 0) + " min" : figure(hours, 2) + " h";
}

std::string give_or_take(const std::optional<double>& u) { return u ? "± " + fixed(*u, 2) : ""; }

}  // namespace bathwright::sheets
