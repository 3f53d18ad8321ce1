#include "refusal.hpp"

#include <cmath>
#include <cstdio>

namespace bathwright::speciation {
namespace {

Problem not_converged(const std::string& what) {
  return {Fault::not_converged, "", what, "", "Check the amounts; report the input if they are right."};
}

/// Whether holding the pH would take more of the counter-ion out than there is.
bool taken_out(const Workspace& w) {
  for (const Phase& phase : w.phases)
    if (phase.kind == Phase::Kind::ph)
      for (Index i = 0; i < w.components(); ++i)
        if (i != w.proton && phase.supply(i) != 0 && w.total(i) - phase.mol * phase.supply(i) <= 0)
          return true;
  return false;
}

Problem cannot_hold(const std::vector<std::string>& components, const HeldPh& held) {
  const std::string& ion = components[held.counter_ion];
  char pH[32];
  std::snprintf(pH, sizeof pH, "%.3g", held.pH);
  return {Fault::out_of_range, "pH",
          std::string("pH ") + pH + " cannot be held with " + ion +
              ": more of it would have to leave than is there",
          ion.ends_with('-') ? "a pH at or below that of the solution as given"
                             : "a pH at or above that of the solution as given",
          ion.ends_with('-') ? "Name a cation such as Na^+ as the counter-ion."
                             : "Name an anion such as Cl^- as the counter-ion."};
}

/// Why no answer exists where the solution could be followed only down to `reached`.
Problem beyond_reach(const Workspace& reached, const Task& task) {
  constexpr double concentrated = 6;  // ionic strength, mol/kg: most parameters were fitted to less
  SpeciesVector m;
  reached.molality(m);
  double I = 0;
  for (Index j = 0; j < reached.count(); ++j) I += 0.5 * m(j) * reached.charge(j) * reached.charge(j);
  const double total_kg = reached.total_water / water_mol_per_kg;
  // Not even the most dilute solution of the last route was found: nothing is known about the strength.
  if (total_kg > 50 * task.water_kg) return not_converged("the equilibrium did not converge");
  char text[240];
  if (reached.water_kg < 0.05 * total_kg) {
    std::snprintf(
        text, sizeof text,
        "no liquid is left: with %.3g kg of water, %.2g kg stay liquid and the rest is bound in crystals",
        total_kg, reached.water_kg);
    return {Fault::out_of_range, "", text, "a solution", "Use less salt or more water."};
  }
  if (I < concentrated) return not_converged("the equilibrium did not converge");
  std::snprintf(text, sizeof text,
                "the activity model has no equilibrium at this strength: it follows the solution from the "
                "dilute side to %.4g kg of "
                "water (given: %.4g kg), ionic strength %.1f mol/kg, water activity %.2f",
                total_kg, task.water_kg, I, std::exp(reached.ln_aw));
  return {Fault::out_of_range, "", text, "a solution within the range of the interaction parameters",
          "Use less salt or more water."};
}

}  // namespace

Problem refusal(const Workspace& reached, const ChemicalSystem& system, const Task& task) {
  return task.pH && taken_out(reached) ? cannot_hold(system.components(), *task.pH)
                                       : beyond_reach(reached, task);
}

Problem failed_check(const Residuals& r) {
  char text[200];
  std::snprintf(text, sizeof text,
                "the answer does not pass its check: mass balance %.2g, mass action %.2g, saturation %.2g, "
                "negative solid %.2g",
                r.mass_balance, r.mass_action, r.saturation, r.negative_solid);
  return not_converged(text);
}

}  // namespace bathwright::speciation
