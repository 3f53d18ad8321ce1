#include "model_doubt.hpp"

#include <algorithm>
#include <bathwright/speciation/sensitivity.hpp>

namespace bathwright::dosing {
namespace {

using bath::Chemistry;
using bath::TankState;
using Eigen::Index;
using speciation::Change;
using speciation::Doubt;
using speciation::Sensitivity;
using speciation::Shift;
using speciation::Solver;

struct AcidMoved {
  Doubt doubt;
  double mol;  ///< of H^+ that came with the counter-ion
};

/// What each doubt makes of the acid that the pH of the tank stands for.
Result<std::vector<AcidMoved>> acid_moved(const Chemistry& chemistry, const TankState& before) {
  std::vector<AcidMoved> moved;
  if (!chemistry.type().acid_by_pH()) return moved;
  speciation::Task task = bath::task_of(before);
  const auto now = chemistry.working().solve(task);
  if (!now) return now.problems();
  task.pH = speciation::HeldPh{now->pH(), chemistry.found_by_charge()};
  const auto held = chemistry.working().solve(task);
  if (!held) return held.problems();
  const auto sensitivity = Sensitivity::at(chemistry.working(), task, *held);
  if (!sensitivity) return sensitivity.problems();
  for (Doubt& doubt : speciation::doubts(chemistry.working(), *held)) {
    const double mol = sensitivity->respond(doubt.change).held_ph_mol;
    moved.push_back({std::move(doubt), mol});
  }
  return moved;
}

struct EndMoved {
  Doubt doubt;
  Shift shift;
};

Result<std::vector<EndMoved>> end_moved(const Chemistry& chemistry, const Solver& solver,
                                        const TankState& end, const std::vector<AcidMoved>& acid,
                                        double kept_share) {
  const speciation::Task task = bath::task_of(end);
  const auto answer = solver.solve(task);
  if (!answer) return answer.problems();
  const auto sensitivity = Sensitivity::at(solver, task, *answer);
  if (!sensitivity) return sensitivity.problems();
  const std::size_t by_charge = chemistry.found_by_charge();
  std::vector<EndMoved> moved;
  for (Doubt& doubt : speciation::doubts(solver, *answer)) {
    Change change = doubt.change;
    const auto same = std::ranges::find_if(acid, [&](const AcidMoved& a) { return a.doubt.same_as(doubt); });
    if (same != acid.end()) {
      change.component_mol.assign(end.component_mol.size(), 0);
      change.component_mol[0] = kept_share * same->mol;
      change.component_mol[by_charge] -= kept_share * same->mol / solver.system().species()[by_charge].charge;
    }
    moved.push_back({std::move(doubt), sensitivity->respond(change)});
  }
  return moved;
}

}  // namespace

Result<Eigen::MatrixXd> model_doubt(const Chemistry& chemistry, const TankState& before, double kept_share,
                                    const TankState& end, const std::vector<std::size_t>& solids) {
  const auto acid = acid_moved(chemistry, before);
  if (!acid) return acid.problems();
  const auto working = end_moved(chemistry, chemistry.working(), end, *acid, kept_share);
  if (!working) return working.problems();
  const auto idle = end_moved(chemistry, chemistry.idle(), end, *acid, kept_share);
  if (!idle) return idle.problems();
  const auto watched = static_cast<Index>(solids.size());
  Eigen::MatrixXd shifts =
      Eigen::MatrixXd::Zero(1 + 2 * watched, static_cast<Index>(working->size() + idle->size()));
  const auto put = [&](Index column, Index first, const Shift& shift) {
    for (Index s = 0; s < watched; ++s)
      shifts(first + s, column) = shift.saturation_index[solids[static_cast<std::size_t>(s)]];
  };
  Index column = 0;
  for (const EndMoved& hot : *working) {
    shifts(0, column) = hot.shift.pH();
    put(column, 1, hot.shift);
    const auto cold =
        std::ranges::find_if(*idle, [&](const EndMoved& other) { return other.doubt.same_as(hot.doubt); });
    if (cold != idle->end()) put(column, 1 + watched, cold->shift);
    ++column;
  }
  for (const EndMoved& cold : *idle)
    if (std::ranges::none_of(*working,
                             [&](const EndMoved& other) { return other.doubt.same_as(cold.doubt); }))
      put(column++, 1 + watched, cold.shift);
  return Eigen::MatrixXd(shifts.leftCols(column));
}

}  // namespace bathwright::dosing
