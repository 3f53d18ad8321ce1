// Where a plan may end: every sample's levels, pH and headroom. Read next: chance.hpp, which counts them.
#pragma once

#include <bathwright/dosing/plan.hpp>

namespace bathwright::dosing {

struct SampledEnds {
  struct Solid {
    std::string name;
    bool covers_working, covers_idle;
    std::vector<double> working_log10, idle_log10;  ///< headroom per sample
  };
  std::vector<std::vector<double>> level;  ///< per aim of the tank, per sample: g/L, or pH; NaN: not solved
  std::vector<Solid> solids;
  int unsolved = 0;
};

/// Fails as chance_of.
Result<SampledEnds> sampled_ends(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                 const bath::TankState& now, const Plan& plan, const Spread& spread,
                                 const Sampling& sampling, const std::function<bool(double)>& progress);

}  // namespace bathwright::dosing
