// One judge for all: recomputes from the task, the tables and the activity model what an answer must meet.
#pragma once

#include "equations.hpp"

namespace bathwright::benchmark {

/// The worst of: mass balances and water relative to their throughput; mass action, saturation of a solid
/// present and supersaturation of one that may form (ln units); a negative amount of solid (mol). Infinite
/// for an answer with a value that is not finite.
double worst_residual(const speciation::Solver& solver, const speciation::Constants& ln_K,
                      const speciation::Task& task, const Answer& answer);

/// An answer further off than this counts as a failure.
inline constexpr double accepted = 1e-8;

}  // namespace bathwright::benchmark
