#include <algorithm>
#include <bathwright/speciation/coverage.hpp>
#include <bathwright/units/show.hpp>
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

std::vector<double> largest_share(const Solver& solver, const Equilibrium& answer) {
  const auto& species = solver.system().species();
  const std::size_t n = solver.system().components().size();
  std::vector<double> held(n, 0.0), share(species.size(), 0.0);
  for (std::size_t j = 0; j < species.size(); ++j)
    for (std::size_t i = 0; i < n; ++i) held[i] += std::abs(species[j].made_of[i]) * answer.molality[j];
  for (std::size_t j = 0; j < species.size(); ++j)
    for (std::size_t i = 0; i < n; ++i)
      if (held[i] >= (i == 0 ? acid_traces_end : traces_end))
        share[j] = std::max(share[j], std::abs(species[j].made_of[i]) * answer.molality[j] / held[i]);
  return share;
}

namespace {

using Note = activity::InteractionNote;

/// Whether there is more than the parameters of a pair were fitted to. A fit that ends below 0.1 mol/kg ended
/// where the salt alone saturates (gypsum at 0.016), not where its parameters do.
bool beyond_fit(const Solver& solver, const Equilibrium& answer, const Note& note) {
  constexpr double margin = 1.05, saturation_limited = 0.1;
  double counted = 0;
  for (const auto& [solute, weight] : note.counted) counted += weight * answer.molality[solute];
  if (note.counted.empty()) counted = salt_molality(solver, answer, note.solutes);
  return note.limit_molal >= saturation_limited && counted > margin * note.limit_molal;
}

/// Standard uncertainty of ln gamma of one of the note's solutes: what is said per mol/kg of the others,
/// times their molalities.
double effect_on(std::uint32_t solute, const Note& note, const Equilibrium& answer) {
  double product = note.u_ln_gamma;
  bool self = false;
  for (const std::uint32_t other : note.solutes) {
    if (other == solute && !self)
      self = true;
    else
      product *= answer.molality[other];
  }
  return self ? product : 0;
}

}  // namespace

std::vector<double> ln_gamma_uncertainty(const Solver& solver, const Equilibrium& answer) {
  std::vector<double> u(answer.molality.size(), 0.0);
  for (const Note& note : solver.model().notes())
    for (const std::uint32_t i : note.solutes) u[i] = std::hypot(u[i], effect_on(i, note, answer));
  return u;
}

Coverage coverage(const Solver& solver, const Equilibrium& answer) {
  using Kind = Note::Kind;
  constexpr double told = 0.01;             // ln units
  constexpr double stand_in_trusted = 0.5;  // mol/kg, the range of Davies
  const auto& species = solver.system().species();
  const std::vector<double> share = largest_share(solver, answer);
  const auto matters = [&](std::uint32_t i) { return share[i] >= least_share; };
  Coverage found;
  for (const Note& note : solver.model().notes()) {
    double effect = 0;
    for (const std::uint32_t i : note.solutes)
      if (matters(i)) effect = std::max(effect, effect_on(i, note, answer));
    switch (note.kind) {
      case Kind::missing:
        if (effect >= told) found.missing.push_back(note.text);
        break;
      case Kind::estimated:
      case Kind::no_temperature_data:
        if (effect >= told) found.warnings.push_back(note.text);
        break;
      case Kind::stated:
        if (std::all_of(note.solutes.begin(), note.solutes.end(), matters))
          found.warnings.push_back(note.text);
        break;
      case Kind::accuracy:
        break;
      case Kind::above_range:
        // Both must be there: a fit says nothing of a solution without one of its ions.
        if (!std::all_of(note.solutes.begin(), note.solutes.end(), matters)) break;
        if (!beyond_fit(solver, answer, note)) break;
        found.warnings.push_back(note.text);
        found.valid = false;
        break;
      case Kind::outside_model:
        if (!matters(note.solutes[0])) break;
        found.warnings.push_back(note.text);
        if (answer.ionic_strength > stand_in_trusted) found.valid = false;
        break;
    }
  }
  const std::vector<double> u = ln_gamma_uncertainty(solver, answer);
  std::uint32_t worst = 0;
  for (std::uint32_t i = 0; i < u.size(); ++i)
    if (matters(i) && u[i] > found.u_ln_gamma) found.u_ln_gamma = u[worst = i];
  if (found.u_ln_gamma > most_u_ln_gamma) {
    const auto notes = solver.model().notes();
    const auto most = std::max_element(notes.begin(), notes.end(), [&](const Note& a, const Note& b) {
      return effect_on(worst, a, answer) < effect_on(worst, b, answer);
    });
    found.warnings.push_back("the activity coefficient of " + species[worst].name + " is uncertain by " +
                             units::significant(100 * std::expm1(found.u_ln_gamma), 2) +
                             " %, most of it from " + most->text);
    found.valid = false;
  }
  constexpr double near_C = 5;
  if (std::abs(solver.temperature().v - 25) > near_C)
    for (std::size_t j = 0; j < answer.molality.size(); ++j)
      if (matters(static_cast<std::uint32_t>(j)) && !solver.system().species()[j].constant.has_dH)
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
