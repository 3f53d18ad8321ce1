// What may be wrong where readings and book do not fit: each mistake of the trade tried in turn, and how much
// better everything fits without it.
#pragma once

#include <bathwright/analysis/readings.hpp>
#include <bathwright/bath/tank.hpp>

#include "reconcile.hpp"

namespace bathwright::analysis {

/// What is looked at when explanations are sought.
struct Case {
  const Gathered& gathered;
  const Weighed& weighed;  ///< with nothing wrong
  const Readings& readings;
  const bath::Tank& tank;
  const bath::Chemistry& chemistry;
  const std::optional<Carried>& carried;
};

/// The likelihood ratio to "nothing is wrong" and to the next rival from which on one explanation is called
/// clear: 20 to 1.
inline constexpr double clear_ratio = 20;

/// Tries, each by itself: a titration of a sample twice or half as large as written down; any other error of
/// a reading; two burette readings swapped; a level stated for the total that is the free, or the other way
/// round; the level or the sample wrong; of each addition logged: not made, made twice, another amount,
/// another hydrate of it in the bag; an addition from the shelf that was not logged. What has a size that is
/// not known pays for it: its size is normal about 0, with the standard deviations that stand in the code
/// (common practice). Fills `explanations` and `one_is_clear` of a misfit that is an alarm.
void explain(Misfit& misfit, const Case& met);

}  // namespace bathwright::analysis
