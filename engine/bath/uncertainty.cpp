#include <bathwright/bath/uncertainty.hpp>
#include <bathwright/speciation/sensitivity.hpp>
#include <cmath>
#include <numbers>

namespace bathwright::bath {
namespace {

using speciation::SolidRule;
using speciation::Solver;
using speciation::Task;
using speciation::Uncertainty;

std::optional<Uncertainty> uncertainty_of(const Solver& solver, const Task& task) {
  const auto answer = solver.solve(task);
  if (!answer) return std::nullopt;
  const auto u = speciation::uncertainty(solver, task, *answer);
  return u ? std::optional(*u) : std::nullopt;
}

std::optional<Uncertainty> at_pH(const Solver& solver, const TankState& state, double pH,
                                 std::size_t counter_ion) {
  Task task = task_of(state);
  task.pH = speciation::HeldPh{pH, counter_ion};
  return uncertainty_of(solver, task);
}

/// As analysed: at the pH the tank has at the solver's temperature where that was measured, else of its
/// amounts.
std::optional<Uncertainty> as_it_is(const Chemistry& chemistry, const Solver& solver,
                                    const TankState& state) {
  if (!chemistry.type().acid_by_pH()) return uncertainty_of(solver, task_of(state));
  const auto now = solver.solve(task_of(state));
  return now ? at_pH(solver, state, now->pH(), chemistry.counter_ion()) : std::nullopt;
}

/// Of the mol of a solid that would still dissolve or would crystallise.
std::optional<double> u_room_mol(const Solver& solver, const TankState& state, std::size_t solid) {
  Task task = task_of(state);
  task.solids.assign(solver.system().solids().size(), SolidRule::report_only);
  task.solids[solid] = SolidRule::in_excess;
  const auto u = uncertainty_of(solver, task);
  return u ? std::optional(u->solid_mol[solid]) : std::nullopt;
}

void fill(Headroom& room, const Chemistry& chemistry, const TankState& state) {
  const speciation::ChemicalSystem& system = chemistry.working().system();
  const std::size_t solid = *system.solid(room.solid);
  if (!std::isnan(room.forms_above_pH)) {
    const double hydroxides = -system.solids()[solid].made_of[0];
    if (const auto u = at_pH(chemistry.working(), state, room.forms_above_pH, chemistry.counter_ion()))
      room.u_forms_above_pH = u->saturation_index[solid] / hydroxides;
  }
  const auto formula = matter::Formula::parse(room.formula);
  const auto u_kg = [&](const Solver& solver, double kg) -> std::optional<double> {
    if (std::isnan(kg) || !formula) return std::nullopt;
    const auto u = u_room_mol(solver, state, solid);
    return u ? std::optional(*u * formula->molar_mass().v / 1000) : std::nullopt;
  };
  room.u_working_kg = u_kg(chemistry.working(), room.working_kg);
  room.u_idle_kg = u_kg(chemistry.idle(), room.idle_kg);
}

}  // namespace

Result<TankView> view_with_uncertainty(const Chemistry& chemistry, const TankState& state) {
  auto found = chemistry.view(state);
  if (!found) return found;
  TankView view = *std::move(found);
  const speciation::ChemicalSystem& system = chemistry.working().system();
  const auto now = as_it_is(chemistry, chemistry.working(), state);
  const auto cold = as_it_is(chemistry, chemistry.idle(), state);
  for (SpeciesView& species : view.species)
    if (now)
      species.u_log10_activity = now->ln_activity[*system.species_index(species.name)] / std::numbers::ln10;
  if (now && !chemistry.type().acid_by_pH()) view.u_pH = now->pH;
  for (Headroom& room : view.headroom) {
    const std::size_t solid = *system.solid(room.solid);
    if (now && room.covers_working) room.u_working_log10 = now->saturation_index[solid];
    if (cold && room.covers_idle) room.u_idle_log10 = cold->saturation_index[solid];
    fill(room, chemistry, state);
  }
  return view;
}

}  // namespace bathwright::bath
