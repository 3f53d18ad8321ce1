#include <algorithm>
#include <bathwright/sheets/addition_sheet.hpp>
#include <bathwright/sheets/analysis_sheet.hpp>
#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/doubts.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/sheets/tank_parts.hpp>
#include <bathwright/units/show.hpp>
#include <map>

namespace bathwright::sheets {
namespace {

std::string money(double cost, const bath::Tank& tank) {
  return fixed(cost, 2) + (tank.currency.empty() ? "" : " " + tank.currency);
}

std::string chance(const dosing::Plan& plan) {
  if (!plan.probability_in_window) return "not known: no uncertainty given";
  const double per_cent = 100 * *plan.probability_in_window;
  return per_cent > 99 ? "above 99 %" : fixed(per_cent, 0) + " %";
}

/// An amount as one would weigh or measure it: grams below a kilogram, millilitres below a litre.
struct Measured {
  std::string figure, unit;
};
Measured measured(double amount, const std::string& unit) {
  if (amount < 1 && unit == "kg") return {figure(1000 * amount), "g"};
  if (amount < 1 && unit == "L") return {figure(1000 * amount), "mL"};
  return {figure(amount), unit};
}

std::string counted(int count, const std::string& word) {
  return std::to_string(count) + " " + word + (count == 1 ? "" : "s");
}

/// "H3BO3 at 18 degC" with its formula as people write it.
std::string pretty_check(const std::string& name) {
  const std::size_t first = std::min(name.find(' '), name.size());
  return pretty(name.substr(0, first)) + name.substr(first);
}

void weigh_out(Lines& lines, const bath::Tank& tank, const dosing::Plan& plan) {
  heading(lines, "Weigh out");
  Table table(
      {{"chemical"}, {"amount", Align::number}, {"unit"}, {"cost", Align::number}, {"lot, weighed by"}});
  for (const auto& addition : plan.additions) {
    const Measured amount = measured(addition.amount, addition.unit);
    table.add({addition.name, amount.figure, amount.unit, fixed(addition.cost, 2), "________________"});
  }
  append(lines, table.lines());
  say(lines, "  Cost " + money(plan.cost, tank) + ". Salt brought in " + figure(plan.salt_load_mol) +
                 " mol. Chance of ending in every window, from the analysis' uncertainty alone: " +
                 chance(plan) + ". pH, volume, assay and weighing are taken as exact.");
}

/// What stops the step in full; the rest as a count. What is only to be watched stands once, under the steps.
void checks(Lines& lines, const std::vector<dosing::Check>& asked) {
  int stopping = 0, to_watch = 0;
  for (const auto& check : asked) {
    if (check.ok) continue;
    ++(check.stops ? stopping : to_watch);
    if (check.stops) say(lines, "   STOP " + pretty_check(check.name) + ": " + check.detail, 3);
  }
  std::string count = counted(static_cast<int>(asked.size()), "check");
  if (stopping > 0) count += ", " + std::to_string(stopping) + (stopping == 1 ? " stops" : " stop");
  if (to_watch > 0) count += ", " + std::to_string(to_watch) + " to watch";
  if (!asked.empty()) say(lines, "   " + count + (stopping + to_watch == 0 ? ", all passed" : ""));
}

void watch(Lines& lines, const dosing::Plan& plan) {
  std::map<std::string, std::string> last_detail;
  for (const auto& step : plan.steps)
    for (const auto& check : step.checks)
      if (!check.ok && !check.stops) last_detail[check.name] = check.detail;
  if (last_detail.empty()) return;
  heading(lines, "Watch");
  for (const auto& [name, detail] : last_detail) say(lines, "  " + pretty_check(name) + ": " + detail, 2);
}

void step_lines(Lines& lines, const bath::Tank& tank, const bath::BathType& type, const dosing::Step& step) {
  const Measured amount = measured(step.amount, step.unit);
  std::string what = std::to_string(step.number) + ". " + amount.figure + " " + amount.unit + " " + step.name;
  if (step.portions > 1) what += ", " + std::to_string(step.portion) + " of " + std::to_string(step.portions);
  title(lines, what, "done ____ by ______");
  if (step.dissolve_in_L) say(lines, "   in " + figure(*step.dissolve_in_L, 3) + " L of water first");
  if (!step.how.empty()) say(lines, "   " + step.how);
  std::string then;
  for (const Judged& j : judge(tank, type, step.predicted.quantity_g_per_L, step.predicted.pH))
    then +=
        j.label + " " + fixed(j.found, j.unit.empty() ? 2 : 1) + (j.unit.empty() ? "" : " " + j.unit) + ", ";
  say(lines, "   then: " + then + fixed(step.predicted.volume_L, 0) + " L", 3);
  checks(lines, step.checks);
  if (step.wait_h > 0) say(lines, "   wait " + figure(step.wait_h, 2) + " h, stirred, before the next step");
}

void handling(Lines& lines, const bath::Tank& tank, const dosing::Plan& plan) {
  heading(lines, "Hazard statements");
  for (const auto& addition : plan.additions) {
    const bath::ShelfItem* item = tank.on_shelf(addition.chemical);
    if (!item || item->stock.hazard_statements.empty()) continue;
    std::string codes;
    for (const std::string& code : item->stock.hazard_statements) codes += (codes.empty() ? "" : ", ") + code;
    say(lines, "  " + addition.name + ": " + codes, 2);
  }
}

void best_plan(Lines& lines, const bath::Tank& tank, const bath::BathType& type, const dosing::Plan& plan) {
  if (plan.additions.empty()) {
    heading(lines, "Additions");
    say(lines, "  Nothing to add.");
  } else {
    weigh_out(lines, tank, plan);
    heading(lines, "In this order");
    for (const auto& step : plan.steps) step_lines(lines, tank, type, step);
    watch(lines, plan);
    heading(lines, "Expected at the end");
    append(lines, levels(judge(tank, type, plan.final_view.quantity_g_per_L, plan.final_view.pH)));
    handling(lines, tank, plan);
  }
  if (!plan.unmet.empty()) heading(lines, "Not at its aim");
  for (const std::string& unmet : plan.unmet) say(lines, "  " + unmet, 2);
}

}  // namespace

Lines addition_sheet(const bath::Tank& tank, const bath::BathType& type, const analysis::Analysis& analysis,
                     const dosing::AdditionSheet& sheet, const std::vector<std::string>& changed_since,
                     const Signature& signature) {
  Lines lines;
  tank_title(lines, tank, analysis.volume.v, analysis.temperature);
  say(lines, (signature.slip ? "Slip " + std::to_string(*signature.slip) : std::string("Addition sheet")) +
                 ". Volume: " + analysis.volume_from + ".");
  say(lines, deferral);
  std::vector<std::string> stopping = changed_since;
  for (const auto& suspect : analysis.suspects)
    stopping.push_back(suspect.what + ": " + suspect.reason + " " + suspect.try_this);
  stops(lines, stopping);
  heading(lines, "Found");
  append(lines, levels(judge(tank, type, analysis)));
  if (fixed(sheet.now.pH, 2) != fixed(analysis.pH, 2))
    say(lines, "  At " + units::show(tank.temperature, "degC", 3) +
                   ", for which the steps are worked out, the pH is " + fixed(sheet.now.pH, 2) + ".");
  for (const std::string& note : analysis.notes) say(lines, "  Note: " + note, 2);
  if (!sheet.plans.empty()) best_plan(lines, tank, type, sheet.plans.front());
  if (sheet.plans.size() > 1) heading(lines, "Other plans");
  for (std::size_t i = 1; i < sheet.plans.size(); ++i) {
    const dosing::Plan& plan = sheet.plans[i];
    say(lines,
        "  " + plan.kind + ": " + money(plan.cost, tank) + (plan.feasible ? "" : ", not every aim met"), 2);
  }
  if (!sheet.refused.empty()) heading(lines, "Refused");
  for (const auto& refusal : sheet.refused) say(lines, "  " + refusal.reason + " (" + refusal.rule + ")", 2);
  cautions(lines, sheet.cautions);
  doubts(lines, sheet.now.warnings);
  lines.emplace_back();
  const bool ready = !sheet.plans.empty() && sheet.plans.front().feasible && stopping.empty();
  if (!changed_since.empty())
    say(lines, "Next: do not add. Analyse the tank as it is now.");
  else if (!ready)
    say(lines, "Next: do not add yet. A second sample, or a second opinion, comes first.");
  else if (sheet.plans.front().additions.empty())
    say(lines, "Next: nothing. Every aim is met.");
  else
    say(lines, "Next: a second person approves this sheet; then step 1.");
  lines.emplace_back();
  say(lines, "prepared  " + signature.prepared_by +
                 (signature.shift.empty() ? "" : ", shift " + signature.shift) + ", with " +
                 signature.program);
  lines.emplace_back("approved  ____________________    witness  ____________________");
  return lines;
}

}  // namespace bathwright::sheets
