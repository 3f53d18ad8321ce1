#include "planning.hpp"

#include <algorithm>
#include <thread>

namespace bathwright::work {

dosing::Request request_for(const analysis::Analysis& analysis, int samples) {
  dosing::Request request;
  for (const auto& level : analysis.reconciled)
    request.uncertainty[level.quantity] = level.standard_uncertainty.v;
  if (samples > 0) request.spread = dosing::Spread{.covariance = analysis.covariance};
  request.sampling = {.samples = samples, .threads = std::max(1u, std::thread::hardware_concurrency())};
  return request;
}

}  // namespace bathwright::work
