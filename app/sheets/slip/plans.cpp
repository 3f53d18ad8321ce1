#include <algorithm>
#include <bathwright/sheets/names.hpp>

#include "parts.hpp"

namespace bathwright::sheets::slip {

namespace {

std::string waiting(const dosing::Wait& wait) {
  return "Wait, nothing to add: the work " + std::string(wait.takes ? "takes " : "brings ") + wait.label +
         " (" + wait.use + "), about " + figure(wait.units, 2) + " " + wait.unit +
         " to its aim, at the rates of the bath type.";
}

/// What does not go in today.
std::string later(const dosing::Rest& rest, const Units& units) {
  const auto& what = rest.addition;
  return "The rest next shift, once " + units.volume(rest.evaporate_L, 2) +
         " have evaporated: " + units.amount(what.amount, what.unit) + " " + what.name + ".";
}

}  // namespace

Section not_at_its_aim(const AdditionSlip& slip, const dosing::Plan& plan) {
  Section section{"Not at its aim", {}};
  for (const auto* said : {&plan.unmet, &plan.left_alone})
    for (const std::string& words : *said) section.blocks.emplace_back(Paragraph{words});
  for (const dosing::Rest& rest : plan.rest) section.blocks.emplace_back(Paragraph{later(rest, slip.units)});
  for (const dosing::Wait& wait : plan.waits) section.blocks.emplace_back(Paragraph{waiting(wait)});
  for (const std::string& conflict : plan.conflicts)
    section.blocks.emplace_back(Paragraph{"Why: " + conflict});
  return section;
}

Section other_plans(const AdditionSlip& slip) {
  Section section{"Other plans", {}};
  if (slip.signature.slip) return section;  // somebody has chosen
  for (std::size_t i = 1; i < slip.sheet.plans.size(); ++i) {
    const dosing::Plan& plan = slip.sheet.plans[i];
    std::string what;
    if (plan.decant_L > 0) what = "take out " + slip.units.volume(plan.decant_L, 3);
    for (const auto& addition : plan.additions)
      if (addition.chemical != "water")
        what += (what.empty() ? "" : ", ") + slip.units.amount(addition.amount, addition.unit) + " " +
                addition.name;
    section.blocks.emplace_back(
        Paragraph{plan.kind + ", " + money(plan.cost, slip.tank.currency) + ": " + plan.reason +
                  (plan.feasible ? "" : ". Not to be carried out as it stands") + ". " +
                  (what.empty() ? "Nothing goes in." : "In all: " + what + ".")});
  }
  return section;
}

Section bringing_down(const AdditionSlip& slip, const dosing::Plan& plan) {
  Section section{"Too high when that is done", {}};
  for (const auto& removal : plan.removals)
    section.blocks.emplace_back(
        Paragraph{removal.label + " goes down as " + pretty(removal.solid) + ": " +
                  slip.units.amount(removal.whole_kg, "kg") + " " + removal.name +
                  " for all of it. Only once the steps are in and mixed: first half, " +
                  slip.units.amount(removal.first_kg, "kg") + ", settle, filter, analyse again."});
  return section;
}

Section refused(const AdditionSlip& slip) {
  Section section{"Refused", {}};
  for (const auto& refusal : slip.sheet.refused)
    section.blocks.emplace_back(Paragraph{refusal.reason + " (" + refusal.rule + ")"});
  return section;
}

}  // namespace bathwright::sheets::slip
