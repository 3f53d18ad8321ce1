// Checks an answer by plain sums over the chemical system; shares nothing with the code that found it.
#pragma once

#include <bathwright/speciation/solver.hpp>

namespace bathwright::speciation {

[[nodiscard]] Residuals verify(const Solver& solver, const Constants& ln_K, const Task& task,
                               const Equilibrium& answer);

}  // namespace bathwright::speciation
