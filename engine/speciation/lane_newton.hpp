// The coupled Newton of coupled_newton.hpp for eight variants of a problem at once, each with its own phases.
#pragma once

#include <array>

#include "lanes.hpp"
#include "workspace.hpp"

namespace bathwright::speciation {

/// Eight problems over the basis of one workspace, and where their solutions stand.
struct LaneProblem {
  LaneArray total, ln_K, phase_ln_K;  ///< per component; species; phase of the workspace
  Lanes total_water;
  LaneArray x, ln_m, ln_gamma, phase_mol;  ///< per component; species; kind; phase
  LaneArray active;                        ///< per phase: 1 where its condition holds, else 0
  Lanes ln_aw, water_kg;

  explicit LaneProblem(const Workspace& w);
  /// Amounts and constants of the workspace as those of one lane.
  void set_amounts(std::size_t lane, const Workspace& w);
  /// The state of the workspace as the start of one lane.
  void set_start(std::size_t lane, const Workspace& w);
  /// The state of one lane, for the answer.
  void copy_state(std::size_t lane, Workspace& w) const;
};

/// Room for lane_newton; grows to the size of the workspace once.
struct LaneTables {
  LaneArray U, gamma, X, system, kinds, H, m, defect;
  explicit LaneTables(const Workspace& w);

 private:
  LaneTables(std::size_t components, std::size_t species, std::size_t kinds_count, std::size_t phases);
};

/// One change of a lane's phases, as after coupled_newton: the most negative precipitate leaves, else the
/// most supersaturated solid enters. False where there is nothing to change.
bool change_phases(const Workspace& w, LaneProblem& p, std::size_t lane);

/// Takes the lanes that have not `arrived` to the tolerance of solve_coupled, and marks those that do.
void lane_newton(Workspace& w, LaneProblem& p, LaneTables& t, std::array<bool, lanes>& arrived);

}  // namespace bathwright::speciation
