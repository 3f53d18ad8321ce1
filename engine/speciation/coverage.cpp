#include <algorithm>
#include <bathwright/speciation/coverage.hpp>
#include <cmath>
#include <cstdio>
#include <numeric>

namespace bathwright::speciation {

double salt_molality(const Solver& solver, const Equilibrium& answer,
                     const std::vector<std::uint32_t>& pair) {
  const auto charge = [&](std::uint32_t i) { return std::abs(solver.system().species()[i].charge); };
  const int common = std::gcd(charge(pair[0]), charge(pair[1]));
  // One formula unit holds as many of an ion as the other has charges, over the common divisor.
  return std::min(answer.molality[pair[0]] * common / charge(pair[1]),
                  answer.molality[pair[1]] * common / charge(pair[0]));
}

namespace {

/// Whether there is more than the parameters of a pair were fitted to. A fit that ends below 0.1 mol/kg ended
/// where the salt alone saturates (gypsum at 0.016), not where its parameters do.
bool beyond_fit(const Solver& solver, const Equilibrium& answer, const activity::InteractionNote& note) {
  constexpr double margin = 1.05, saturation_limited = 0.1;
  double counted = 0;
  for (const auto& [solute, weight] : note.counted) counted += weight * answer.molality[solute];
  if (note.counted.empty()) counted = salt_molality(solver, answer, note.solutes);
  return note.limit_molal >= saturation_limited && counted > margin * note.limit_molal;
}

}  // namespace

Coverage coverage(const Solver& solver, const Equilibrium& answer) {
  using Kind = activity::InteractionNote::Kind;
  constexpr double noticed = 1e-3, significant = 0.01;  // mol/kg
  Coverage found;
  for (const activity::InteractionNote& note : solver.model().notes()) {
    double least = std::numeric_limits<double>::infinity();
    double sign = 1;
    for (const std::uint32_t i : note.solutes) {
      least = std::min(least, answer.molality[i]);
      sign *= solver.system().species()[i].charge;
    }
    const bool counter_ions = note.solutes.size() == 2 && sign < 0;
    if (!(least > noticed)) continue;
    switch (note.kind) {
      case Kind::missing:
        found.missing.push_back(note.text);
        if (counter_ions && least > significant) found.valid = false;
        break;
      case Kind::estimated:
        found.warnings.push_back(note.text);
        break;
      case Kind::no_temperature_data:
        found.warnings.push_back(note.text);
        if (least > significant && std::abs(solver.temperature().v - 25) > 10) found.valid = false;
        break;
      case Kind::above_range:
        if (!beyond_fit(solver, answer, note)) break;
        found.warnings.push_back(note.text);
        found.valid = false;
        break;
      case Kind::outside_model:
        found.warnings.push_back(note.text);
        found.valid = false;
        break;
    }
  }
  constexpr double near_C = 5;
  if (std::abs(solver.temperature().v - 25) > near_C)
    for (std::size_t j = 0; j < answer.molality.size(); ++j)
      if (answer.molality[j] > noticed && !solver.system().species()[j].constant.has_dH)
        found.warnings.push_back(solver.system().species()[j].name +
                                 ": no enthalpy of formation published; its constant at 25 degC taken");
  if (!answer.stable) {
    found.warnings.emplace_back(
        "the activity model is outside its range here: its Gibbs energy no longer curves upward");
    found.valid = false;
  }
  const double trusted = solver.model().trusted_ionic_strength();
  if (answer.ionic_strength > trusted) {
    char text[160];
    std::snprintf(text, sizeof text,
                  "ionic strength %.2f mol/kg is beyond the %.1f mol/kg up to which the model %s is trusted",
                  answer.ionic_strength, trusted, std::string(activity::name(solver.model().kind())).c_str());
    found.warnings.emplace_back(text);
    found.valid = false;
  }
  return found;
}

}  // namespace bathwright::speciation
