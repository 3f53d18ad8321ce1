// What the shelf can take out of the tank as a solid where a plan leaves too much of it. Private to dosing.
#pragma once

#include <bathwright/dosing/plan.hpp>

namespace bathwright::dosing {

/// For each level of `plan` that ends above its aim: the shelf chemicals whose partner ion forms one of the
/// bath type's watched solids with it, barium for sulfate. Amounts by the formula of the solid, of the excess
/// at the plan's end: strength first, then the ratio. Only what is really beyond saturation once the whole
/// amount is in counts; interlocked chemicals do not.
[[nodiscard]] std::vector<Removal> removals(const bath::Tank& tank, const bath::Chemistry& chemistry,
                                            const Plan& plan);

}  // namespace bathwright::dosing
