// Rules that a set of readings and what follows from it should keep. What breaks one is a suspect, not an
// error. Not for: headroom of solids, which is a finding of the tank's view.
#pragma once

#include <bathwright/analysis/analysis.hpp>

namespace bathwright::analysis {

/// A level more than half its aim away from it, where no book says what to expect; a salt view below zero; a
/// pH outside 0 to 14; a volume above the mark and freeboard.
[[nodiscard]] std::vector<Suspect> misfits(const Analysis& analysis, const bath::Tank& tank);

/// A hydrometer reading more than 1 % from the density that follows from the levels: about what a shop
/// hydrometer and the model make together (common practice).
[[nodiscard]] std::vector<Suspect> density_misfit(const Analysis& analysis);

}  // namespace bathwright::analysis
