// What a task must fulfil before anything is computed.
#pragma once

#include <bathwright/speciation/solver.hpp>

namespace bathwright::speciation {

/// Fails with every amount, pressure and pH that is not a number or out of its range (bad_input).
Outcome check(const ChemicalSystem& system, const Task& task);

}  // namespace bathwright::speciation
