#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/tank_parts.hpp>
#include <cmath>
#include <map>

#include "parts.hpp"

namespace bathwright::sheets::slip {
namespace {

/// "H3BO3 at 18 degC" with its formula as people write it.
std::string pretty_check(const std::string& name) {
  const std::size_t first = std::min(name.find(' '), name.size());
  return pretty(name.substr(0, first)) + name.substr(first);
}

/// The single-addition rule of a chemical, by which it was portioned; "" where there is none.
std::string largest_at_once(const AdditionSlip& slip, const std::string& chemical) {
  const bath::ShelfItem* item = slip.tank.on_shelf(chemical);
  if (item && item->largest_rise_g_per_L)
    return "at most " + plain(*item->largest_rise_g_per_L) + " g/L at once (tank file)";
  const auto rule = std::ranges::find(slip.type.additions, chemical, &bath::AdditionRule::supply);
  if (rule == slip.type.additions.end()) return "";
  if (rule->largest_rise_g_per_L > 0)
    return "at most " + plain(rule->largest_rise_g_per_L) + " g/L at once (bath type)";
  return rule->largest_pH_step > 0 ? "at most pH " + plain(rule->largest_pH_step) + " at once (bath type)"
                                   : "";
}

std::string wait(const dosing::Step& step) {
  if (!(step.wait_h > 0)) return "";
  constexpr double minutes = 60;
  const std::string time =
      step.wait_h < 1 ? fixed(minutes * step.wait_h, 0) + " min" : figure(step.wait_h, 2) + " h";
  return "then wait " + time + ", stirred" + (step.portions > 1 ? ", after each" : "");
}

/// What holds for every portion of a chemical, told with its first.
std::vector<std::string> how(const AdditionSlip& slip, const dosing::Step& step) {
  std::vector<std::string> lines;
  if (step.dissolve_in_L)
    lines.push_back("in " + figure(*step.dissolve_in_L, 3) + " L of " + step.dissolve_in + " first");
  if (!step.how.empty()) lines.push_back(step.how);
  std::string rules;
  for (const std::string& rule : {largest_at_once(slip, step.chemical), wait(step)})
    if (!rule.empty()) rules += (rules.empty() ? "" : "; ") + rule;
  if (!rules.empty()) lines.push_back(rules);
  if (!step.why_here.empty()) lines.push_back("here, because: " + step.why_here);
  constexpr double felt_C = 0.5;
  if (step.warms_C > felt_C) lines.push_back("warms the tank by " + figure(step.warms_C, 2) + " degC");
  return lines;
}

Task task_of(const AdditionSlip& slip, const dosing::Step& step) {
  Task task{std::to_string(step.number) + ". " + measured(step.amount, step.unit) + " " + step.name,
            "done _____ by _______",
            {},
            {}};
  if (step.portions > 1)
    task.title += ", " + std::to_string(step.portion) + " of " + std::to_string(step.portions);
  for (const auto& check : step.checks)
    if (!check.ok && check.stops) task.stops.push_back(pretty_check(check.name) + ": " + check.detail);
  if (step.portion == 1) task.lines = how(slip, step);
  if (step.analyse_after) task.lines.push_back("then analyse again before the rest goes in");
  return task;
}

}  // namespace

Section order(const AdditionSlip& slip, const dosing::Plan& plan) {
  Section section{"In this order", {}};
  for (const auto& step : plan.steps) section.blocks.emplace_back(task_of(slip, step));
  return section;
}

Section expected_after_each(const AdditionSlip& slip, const dosing::Plan& plan) {
  std::vector<Column> heads{{"after", Align::number}};
  for (const bath::Aim& aim : slip.tank.aims) heads.push_back({pretty(aim.quantity), Align::number});
  heads.push_back({"L", Align::number});
  heads.push_back({"checks"});
  Table table(std::move(heads));
  for (const auto& step : plan.steps) {
    std::vector<std::string> row{std::to_string(step.number)};
    for (const Judged& one : judge(slip.tank, slip.type, step.predicted.quantity_g_per_L, step.predicted.pH))
      row.push_back(fixed(one.found, decimals_of(one)));
    row.push_back(fixed(step.predicted.volume_L, 0));
    const auto stops = std::ranges::count_if(step.checks, [](const auto& c) { return !c.ok && c.stops; });
    const auto warns = std::ranges::count_if(step.checks, [](const auto& c) { return !c.ok && !c.stops; });
    row.push_back(stops > 0 ? "STOP" : warns > 0 ? "watch" : "passed");
    table.add(std::move(row));
  }
  Section section{"Expected after each step, g/L or pH", {}};
  section.blocks.emplace_back(std::move(table));
  return section;
}

Section watch(const dosing::Plan& plan) {
  std::map<std::string, std::string> last_detail;
  for (const auto& step : plan.steps)
    for (const auto& check : step.checks)
      if (!check.ok && !check.stops) last_detail[check.name] = check.detail;
  Section section{"Watch", {}};
  for (const auto& [name, detail] : last_detail)
    section.blocks.push_back(Paragraph{pretty_check(name) + ": " + detail});
  return section;
}

}  // namespace bathwright::sheets::slip
