#include "number.hpp"

#include <algorithm>
#include <bathwright/base/letters.hpp>
#include <charconv>
#include <cmath>

namespace bathwright::units {
namespace {

constexpr std::string_view minus_sign = "\u2212";

bool is_digit(char c) { return c >= '0' && c <= '9'; }
bool is_blank(char c) { return c == ' ' || c == '\t' || c == '\r' || c == '\n'; }

std::string_view trimmed(std::string_view text) {
  while (!text.empty() && is_blank(text.front())) text.remove_prefix(1);
  while (!text.empty() && is_blank(text.back())) text.remove_suffix(1);
  return text;
}

Problem thousands_separator(std::string_view text, std::string_view where) {
  return {Fault::bad_input, std::string(where),
          quoted(text) + " has a thousands separator or more than one comma or point",
          "one decimal point or comma and no other mark between digits", "Write 1234.5 or 1234,5."};
}

}  // namespace

std::string quoted(std::string_view text) {
  constexpr std::size_t longest = 60;  // a message is one line
  const std::string_view shown = whole_letters(text, longest);
  return '"' + std::string(shown) + (shown.size() < text.size() ? "...\"" : "\"");
}

Result<NumberAndUnit> split_number(std::string_view text, std::string_view where) {
  const std::string_view whole = trimmed(text);
  std::string_view rest = whole;
  std::string plain;  // the number as from_chars wants it
  if (rest.starts_with('+')) {
    rest.remove_prefix(1);
  } else if (rest.starts_with('-') || rest.starts_with(minus_sign)) {
    rest.remove_prefix(rest.front() == '-' ? 1 : minus_sign.size());
    plain = "-";
  }

  std::size_t i = 0, digits_before = 0, digits_after = 0;
  char separator = 0;
  for (; i < rest.size(); ++i) {
    const char c = rest[i];
    if (is_digit(c)) {
      ++(separator ? digits_after : digits_before);
      plain += c;
    } else if (c == '.' || c == ',') {
      if (separator) return thousands_separator(whole, where);
      separator = c;
      plain += '.';
    } else {
      break;
    }
  }
  if (digits_before + digits_after == 0) {
    return Problem{Fault::bad_input, std::string(where),
                   whole.empty() ? "nothing is written" : quoted(whole) + " does not begin with a number",
                   "a number and its unit", ""};
  }
  const bool one_comma_before_three = separator == ',' && digits_after == 3 && digits_before >= 1 &&
                                      digits_before <= 3 && rest.front() != '0';
  if (i < rest.size() && (rest[i] == 'e' || rest[i] == 'E')) {
    const std::size_t sign = i + 1 < rest.size() && (rest[i + 1] == '-' || rest[i + 1] == '+') ? 1 : 0;
    std::size_t end = i + 1 + sign;
    while (end < rest.size() && is_digit(rest[end])) ++end;
    if (end > i + 1 + sign) {
      plain += 'e';
      if (rest[i + 1] == '-') plain += '-';
      plain.append(rest.substr(i + 1 + sign, end - i - 1 - sign));
      i = end;
    }
  }
  NumberAndUnit found;
  found.unit = trimmed(rest.substr(i));
  if (!found.unit.empty() && (is_digit(found.unit.front()) || found.unit.front() == '\'')) {
    return thousands_separator(whole, where);
  }
  const auto [end, error] = std::from_chars(plain.data(), plain.data() + plain.size(), found.number);
  if (error == std::errc::result_out_of_range) {
    return Problem{Fault::bad_input, std::string(where),
                   quoted(whole) + " is too large or too small to be a reading", "a number and its unit", ""};
  }
  if (one_comma_before_three) found.with_thousands = 1000 * found.number;
  return found;
}

}  // namespace bathwright::units
