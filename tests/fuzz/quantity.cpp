#include <bathwright/units/read.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

#include "promises.hpp"

using namespace bathwright;

namespace {

constexpr int all_digits = 17;

// What show() writes with all digits must read back as the same, to a rounding of each way.
bool same(double a, double b) { return std::abs(a - b) <= 1e-12 * std::max(std::abs(a), std::abs(b)); }

template <class Quantity>
fuzz::BrokenPromise holds(Result<Quantity> (*read)(std::string_view, std::string_view),
                          std::string_view input) {
  const auto quantity = read(input, "here");
  if (!quantity) return fuzz::in_words(quantity.problems(), "here", input);
  if (!std::isfinite(quantity->v)) return "a quantity that is not finite";
  const std::string shown = units::show(*quantity, {}, all_digits);
  const auto again = read(shown, "shown");
  if (!again) return "what was shown is refused: " + text(again.problems());
  if (!same(again->v, quantity->v)) return "what was shown reads as something else: " + shown;
  return {};
}

fuzz::BrokenPromise concentration_holds(std::string_view input) {
  const auto read = units::read_concentration(input, "here");
  if (!read) return fuzz::in_words(read.problems(), "here", input);
  if (!std::isfinite(read->value) || read->value < 0) return "a concentration that is not one";
  if (!(read->equivalents > 0 && read->equivalents <= 12)) return "equivalents that cannot be";
  const std::string shown = units::show(*read, all_digits);
  const auto again = units::read_concentration(shown, "shown");
  if (!again) return "what was shown is refused: " + text(again.problems());
  if (again->unit != read->unit || !same(again->value, read->value) ||
      !same(again->equivalents, read->equivalents))
    return "what was shown reads as something else: " + shown;
  return {};
}

fuzz::BrokenPromise fraction_holds(std::string_view input) {
  const auto read = units::read_fraction(input, "here");
  if (!read) return fuzz::in_words(read.problems(), "here", input);
  return *read >= 0 && *read <= 1 ? "" : "a share that is not one";
}

}  // namespace

fuzz::BrokenPromise fuzz::quantity(std::string_view input) {
  for (const BrokenPromise& broken :
       {holds(units::read_volume, input), holds(units::read_mass, input),
        holds(units::read_temperature, input), holds(units::read_density, input),
        holds(units::read_length, input), holds(units::read_area, input),
        holds(units::read_current_density, input), holds(units::read_duration, input),
        holds(units::read_molarity, input), concentration_holds(input), fraction_holds(input)}) {
    if (!broken.empty()) return broken;
  }
  return {};
}
