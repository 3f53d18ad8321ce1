#include <bathwright/sheets/chance.hpp>
#include <bathwright/sheets/names.hpp>

#include "parts.hpp"

namespace bathwright::sheets::slip {

Section promise(const AdditionSlip& slip, const dosing::Plan& plan) {
  Section section{"How sure", {}};
  for (const std::string& words :
       {chance_of_ending_inside(slip.type, plan), chance_of_staying_dissolved(slip.tank, plan)})
    if (!words.empty()) section.blocks.push_back(Paragraph{words});
  return section;
}

Section not_at_its_aim(const dosing::Plan& plan) {
  Section section{"Not at its aim", {}};
  for (const auto* said : {&plan.unmet, &plan.left_alone})
    for (const std::string& words : *said) section.blocks.push_back(Paragraph{words});
  for (const std::string& conflict : plan.conflicts) section.blocks.push_back(Paragraph{"Why: " + conflict});
  return section;
}

Section other_plans(const AdditionSlip& slip) {
  Section section{"Other plans", {}};
  for (std::size_t i = 1; i < slip.sheet.plans.size(); ++i) {
    const dosing::Plan& plan = slip.sheet.plans[i];
    std::string what;
    if (plan.decant_L > 0) what = "take out " + figure(plan.decant_L, 3) + " L";
    for (const auto& addition : plan.additions)
      what += (what.empty() ? "" : ", ") + measured(addition.amount, addition.unit) + " " + addition.name;
    section.blocks.push_back(Paragraph{plan.kind + ", " + money(plan.cost, slip.tank) + ": " + plan.reason +
                                       (plan.feasible ? "" : ". Not to be carried out as it stands") + ". " +
                                       (what.empty() ? "Nothing goes in." : "In all: " + what + ".")});
  }
  return section;
}

Section bringing_down(const dosing::Plan& plan) {
  Section section{"Too high when that is done", {}};
  for (const auto& removal : plan.removals)
    section.blocks.push_back(Paragraph{
        removal.label + " goes down as " + pretty(removal.solid) + ": " + measured(removal.whole_kg, "kg") +
        " " + removal.name + " for all of it. Only once the steps are in and mixed: first half, " +
        measured(removal.first_kg, "kg") + ", settle, filter, analyse again."});
  return section;
}

Section refused(const AdditionSlip& slip) {
  Section section{"Refused", {}};
  for (const auto& refusal : slip.sheet.refused)
    section.blocks.push_back(Paragraph{refusal.reason + " (" + refusal.rule + ")"});
  return section;
}

}  // namespace bathwright::sheets::slip
