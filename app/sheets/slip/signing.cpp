#include <algorithm>
#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/names.hpp>
#include <cmath>

#include "parts.hpp"

namespace bathwright::sheets::slip {
namespace {

std::string next(const AdditionSlip& slip) {
  if (!slip.changed_since.empty()) return "Next: do not add. Analyse the tank as it is now.";
  if (slip.sheet.plans.empty() || !slip.sheet.plans.front().feasible || !slip.analysis.suspects.empty())
    return "Next: do not add yet. A second sample, or a second opinion, comes first.";
  if (!slip.stops.empty()) return "Next: do not add yet. Settle what stops it.";
  if (slip.sheet.plans.front().additions.empty()) return "Next: nothing. Every aim is met.";
  if (slip.signature.slip && !slip.signature.approved_by.empty()) return "Next: step 1.";
  return std::string("Next: a second person approves this ") + (slip.signature.slip ? "slip" : "sheet") +
         "; then step 1.";
}

/// When the tank can tell what the additions did, and when it must have told.
std::string re_analysis(const AdditionSlip& slip, const dosing::Plan& plan) {
  constexpr double least_h = 0.5;  // practice: no sample within half an hour of an addition
  const double mixed_h = std::max(least_h, plan.steps.empty() ? 0 : plan.steps.back().wait_h);
  double within_h = HUGE_VAL;
  for (const bath::Aim& aim : slip.tank.aims) within_h = std::min(within_h, aim.every_h.value_or(HUGE_VAL));
  std::string text = "Re-analyse not before " + figure(mixed_h, 2) + " h after the last step";
  if (within_h < HUGE_VAL) text += ", within " + figure(std::max(within_h, mixed_h), 2) + " h of it";
  return text + ". Outside expected ± 2u: repeat, then look for what was not logged.";
}

std::string units_note(const AdditionSlip& slip) {
  std::string note = slip.units.note();
  if (slip.units.needs_medium())
    note +=
        " Limits and what was found stand by the density found, what is expected by the density then: the "
        "same g/L are a smaller share of a denser tank.";
  return note;
}

}  // namespace

Section signing(const AdditionSlip& slip) {
  const Signature& by = slip.signature;
  Section section;
  const bool doses = !slip.sheet.plans.empty() && !slip.sheet.plans.front().additions.empty();
  section.blocks.push_back(
      Paragraph{next(slip) + (doses ? " " + re_analysis(slip, slip.sheet.plans.front()) : "")});
  std::string prepared = by.prepared_by;
  if (!by.issued.empty()) prepared += ", " + by.issued;
  if (!by.shift.empty()) prepared += ", shift " + by.shift;
  SignatureLines lines{{"prepared", prepared}, {"approved", by.approved_by}};
  if (doses) {
    lines.push_back({"carried out", ""});
    lines.push_back({"witness", ""});
    lines.push_back({"found after", ""});
    lines.push_back({"accept, repeat", ""});
    lines.push_back({"comment", ""});
    lines.push_back({"nonconformance", ""});
  }
  section.blocks.push_back(std::move(lines));
  if (const std::string note = units_note(slip); !note.empty()) section.blocks.emplace_back(Paragraph{note});
  section.blocks.emplace_back(Paragraph{std::string(deferral) + " Computed with " + by.program + "."});
  return section;
}

}  // namespace bathwright::sheets::slip
