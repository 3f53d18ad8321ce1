#include "take_out.hpp"

#include <bathwright/bath/taken_out.hpp>
#include <bathwright/units/show.hpp>

namespace bathwright::dosing {

Result<TakenOut> take_out(const bath::Chemistry& chemistry, const bath::TankState& state, double litres) {
  const double holds = chemistry.volume_L(state);
  if (!(litres >= 0) || litres >= holds)
    return Problem{Fault::bad_input, "bath taken out", units::significant(litres, 4) + " L",
                   "0 or more, less than the " + units::significant(holds, 4) + " L in the tank", ""};
  TakenOut out{bath::without(state, litres / holds), {}};
  auto view = chemistry.quick_view(out.left);
  if (!view) return view.problems();
  Step& step = out.step;
  step.number = 1;
  step.takes_out = true;
  step.name = "bath";
  step.unit = "L";
  step.amount = litres;
  step.kg = litres * view->density_kg_per_L;
  step.how = "To the waste treatment, before anything is added.";
  step.why_here = "what is taken out afterwards takes the additions with it";
  step.predicted = *std::move(view);
  return out;
}

void put_first(Plan& plan, Step step) {
  for (Step& later : plan.steps) ++later.number;
  plan.steps.insert(plan.steps.begin(), std::move(step));
}

}  // namespace bathwright::dosing
