// From the solver's state to an answer over the whole system, checked.
#pragma once

#include "workspace.hpp"

namespace bathwright::speciation {

/// Everything but `iterations`; uses the storage of `answer` again.
void read_answer(Workspace& w, const Solver& solver, const Constants& ln_K, const Task& task,
                 Equilibrium& answer);

}  // namespace bathwright::speciation
