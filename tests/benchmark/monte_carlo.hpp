// Ten thousand samples of one bath over two threads, as an uncertainty by sampling needs them.
#pragma once

#include <vector>

#include "method.hpp"

namespace bathwright::benchmark {

struct SampledRun {
  double seconds = 0;  ///< processor time of the thread that needed most: the wall clock of a quiet machine
  std::size_t failures = 0;
  double worst_residual = 0;  ///< among the answers that count
};

/// Every thread has a method of its own and an equal share of the samples.
SampledRun run_samples(const NamedMethod& method, const speciation::Solver& solver,
                       const std::vector<Sample>& samples, std::size_t threads);

}  // namespace bathwright::benchmark
