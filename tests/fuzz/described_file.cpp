#include <bathwright/described/bath_type_file.hpp>
#include <cmath>

#include "promises.hpp"

using namespace bathwright;

namespace {

/// Every quantity at 10 g/L and every species at 0.1 mol/kg: a value, or a reason in words.
fuzz::BrokenPromise evaluated(const bath::BathType& type, std::string_view input) {
  const std::vector<double> levels(type.quantities.size(), 10);
  const std::vector<std::string> names = {"H^+", "Cu^2+", "Ni^2+", "H3BO3"};
  const std::vector<double> numbers(names.size(), 0.1);
  for (const bath::Indicator& indicator : type.indicators) {
    const auto value =
        indicator.evaluate({25, 1000, 3, 1, levels, numbers, numbers, names, 950, names, numbers});
    if (!value) {
      if (fuzz::BrokenPromise broken = fuzz::in_words(value.problems(), type.id, input); !broken.empty())
        return broken;
    } else if (!std::isfinite(*value)) {
      return "an indicator that is no number: " + indicator.id;
    }
  }
  return {};
}

}  // namespace

fuzz::BrokenPromise fuzz::described_file(std::string_view input) {
  const auto type = described::read_bath_type_text("file.toml", input);
  if (!type) return in_words(type.problems(), "file.toml", input);
  if (type->id.empty() || type->sources.empty() || type->components.empty())
    return "a bath type without its tables";
  for (const bath::Quantity& quantity : type->quantities)
    if (!(quantity.formula.molar_mass().v > 0)) return "a quantity without a molar mass: " + quantity.id;
  return evaluated(*type, input);
}
