#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/tank_parts.hpp>
#include <cctype>
#include <cmath>
#include <map>
#include <span>

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
  const auto at_most = [&](double g_per_L) {
    const LevelUnit unit = slip.units.any_level();
    return "at most " + plain(g_per_L, unit.per_g_per_L) + " " + unit.symbol;
  };
  const bath::ShelfItem* item = slip.tank.on_shelf(chemical);
  if (item && item->largest_rise_g_per_L)
    return at_most(*item->largest_rise_g_per_L) + " at once (tank file)";
  const auto rule = std::ranges::find(slip.type.additions, chemical, &bath::AdditionRule::supply);
  if (rule == slip.type.additions.end()) return "";
  if (rule->largest_rise_g_per_L > 0) return at_most(rule->largest_rise_g_per_L) + " at once (bath type)";
  return rule->largest_pH_step > 0 ? "at most pH " + plain(rule->largest_pH_step) + " at once (bath type)"
                                   : "";
}

std::string wait(const dosing::Step& step) {
  if (!(step.wait_h > 0)) return "";
  return "then wait " + waiting(step.wait_h) + ", stirred" + (step.portions > 1 ? ", after each" : "");
}

std::string sentence(std::string text) {
  if (text.empty()) return text;
  text[0] = static_cast<char>(std::toupper(static_cast<unsigned char>(text[0])));
  if (text.back() != '.') text += '.';
  return text;
}

/// Portions of one chemical that go in one after the other in one shift.
using Together = std::span<const dosing::Step>;

std::vector<Together> together(const std::vector<dosing::Step>& steps) {
  std::vector<Together> groups;
  for (std::size_t i = 0; i < steps.size();) {
    std::size_t end = i + 1;
    while (end < steps.size() && steps[end].chemical == steps[i].chemical &&
           steps[end].takes_out == steps[i].takes_out && steps[end].shift == steps[i].shift)
      ++end;
    groups.emplace_back(steps.data() + i, end - i);
    i = end;
  }
  return groups;
}

double amount_of(Together portions) {
  double amount = 0;
  for (const dosing::Step& step : portions) amount += step.amount;
  return amount;
}

std::string numbers(Together portions) {
  const int first = portions.front().number, last = portions.back().number;
  return std::to_string(first) + (last > first ? "-" + std::to_string(last) : "") + ". ";
}

/// How all portions go in, as one run of sentences.
std::string how(const AdditionSlip& slip, Together portions) {
  const dosing::Step& step = portions.front();
  std::string text;
  const auto say = [&](const std::string& words) {
    if (!words.empty()) text += (text.empty() ? "" : " ") + sentence(words);
  };
  if (step.dissolve_in_L)
    say((portions.size() > 1 ? "each in " : "in ") + slip.units.liquid(*step.dissolve_in_L, 3) + " of " +
        step.dissolve_in + " first");
  say(step.how);
  std::string rules;
  for (const std::string& rule : {largest_at_once(slip, step.chemical), wait(step)})
    if (!rule.empty()) rules += (rules.empty() ? "" : "; ") + rule;
  say(rules);
  constexpr double felt_C = 0.5;
  if (step.warms_C > felt_C) say("warms the tank by " + slip.units.warming(step.warms_C));
  // Where all of it goes in at one place, the order speaks for itself.
  if (!step.why_here.empty() && static_cast<std::size_t>(step.portions) > portions.size())
    say("here: " + step.why_here);
  return text;
}

/// What is taken of which lot, told where a chemical first goes in.
std::vector<std::string> taken(const AdditionSlip& slip, const dosing::Plan& plan, Together portions) {
  const dosing::Step& first = portions.front();
  const bath::ShelfItem* item = slip.tank.on_shelf(first.chemical);
  if (first.takes_out || first.portion != 1) return {};
  const auto addition = std::ranges::find(plan.additions, first.chemical, &dosing::Addition::chemical);
  const double all = addition == plan.additions.end() ? amount_of(portions) : addition->amount;
  std::string in_all;
  constexpr double rounding = 1e-6;
  if (all > amount_of(portions) * (1 + rounding)) in_all = slip.units.amount(all, first.unit) + " in all";
  if (!item || item->stock.formula == "H2O")
    return in_all.empty() ? std::vector<std::string>{} : std::vector{in_all + ", with what others go in."};
  std::vector<std::string> lines{label_of(*item) + "; weighed ____ left ____"};
  const std::string whole = containers(*item, all, first.unit, slip.units);
  if (!in_all.empty()) in_all += whole.empty() ? "" : ": ";
  if (!in_all.empty() || !whole.empty()) lines.push_back(in_all + whole + ".");
  return lines;
}

std::string name_of(Together portions) {
  const dosing::Step& step = portions.front();
  return step.takes_out ? "of bath, taken out" : step.name;
}

Task task_of(const AdditionSlip& slip, const dosing::Plan& plan, Together portions) {
  const dosing::Step& first = portions.front();
  std::string title =
      numbers(portions) + slip.units.amount(amount_of(portions), first.unit) + " " + name_of(portions);
  std::string times;
  for (std::size_t i = 0; i < portions.size(); ++i) times += portions.size() > 2 ? " __" : " ____";
  if (portions.size() > 1)
    title += ", " + std::to_string(portions.size()) + " x " + slip.units.amount(first.amount, first.unit);
  Task task{title, "done" + times + (portions.size() > 2 ? " by __" : " by ____"), {}, {}};
  for (const dosing::Step& step : portions)
    for (const auto& check : step.checks)
      if (!check.ok && check.stops) task.stops.push_back(pretty_check(check.name) + ": " + check.detail);
  const auto known = std::ranges::unique(task.stops);
  task.stops.erase(known.begin(), known.end());
  task.lines = taken(slip, plan, portions);
  std::string words = how(slip, portions);
  for (const dosing::Step& step : portions)
    if (step.analyse_after)
      words += " Analyse again after step " + std::to_string(step.number) + ", before the rest goes in.";
  if (!words.empty()) {
    // Containers and instructions share lines.
    if (task.lines.size() > 1)
      task.lines.back() += " " + words;
    else
      task.lines.push_back(words);
  }
  return task;
}

/// What is left for later shifts, told before the first of its steps.
std::string for_the_next_shift(std::span<const Together> left, const Units& units) {
  std::string what;
  for (const Together& portions : left)
    what += (what.empty() ? "" : ", ") + units.amount(amount_of(portions), portions.front().unit) + " " +
            name_of(portions);
  return "The rest next shift, the waits fill this one: " + what + ".";
}

std::vector<std::string> what_it_takes(const AdditionSlip& slip, const dosing::Plan& plan) {
  std::vector<std::string> lines{"Cost " + money(plan.cost, slip.tank.currency) + ". Salt brought in " +
                                 figure(plan.salt_load_mol) + " mol."};
  for (const std::string& apart : plan.keep_apart) lines.push_back("Keep apart: " + apart);
  return lines;
}

}  // namespace

Section order(const AdditionSlip& slip, const dosing::Plan& plan) {
  Section section{"In this order", {}};
  const auto groups = together(plan.steps);
  int shift = 0;
  for (std::size_t g = 0; g < groups.size(); ++g) {
    if (groups[g].front().shift > shift) {
      shift = groups[g].front().shift;
      section.blocks.emplace_back(Paragraph{for_the_next_shift(std::span(groups).subspan(g), slip.units)});
    }
    section.blocks.emplace_back(task_of(slip, plan, groups[g]));
  }
  for (const std::string& words : what_it_takes(slip, plan)) section.blocks.emplace_back(Paragraph{words});
  return section;
}

Section expected_after_each(const AdditionSlip& slip, const dosing::Plan& plan) {
  const auto judged_after = [&](const dosing::Step& step) {
    return judge(slip.tank, slip.type, step.predicted.quantity_g_per_L, step.predicted.pH);
  };
  const auto units_after = [&](const dosing::Step& step) {
    return units_of(judged_after(step), slip.type, slip.units, slip.units.medium_of(step.predicted));
  };
  const auto units = units_after(plan.steps.front());
  const std::string common = common_unit(units);
  std::vector<Column> heads{{"after", Align::number}};
  for (std::size_t i = 0; i < units.size(); ++i)
    heads.push_back({named(pretty(slip.tank.aims[i].quantity), units[i], common), Align::number});
  heads.push_back({slip.units.volume_symbol(), Align::number});
  heads.push_back({"checks"});
  Table table(std::move(heads));
  for (const Together& portions : together(plan.steps)) {
    const dosing::Step& step = portions.back();
    std::vector<std::string> row{std::to_string(step.number)};
    const auto judged = judged_after(step);
    const auto then = units_after(step);
    for (std::size_t i = 0; i < judged.size(); ++i)
      row.push_back(fixed(then[i].of(judged[i].found), decimals_of(judged[i], then[i])));
    row.push_back(slip.units.volume_figure(step.predicted.volume_L));
    const auto some = [&](bool stops) {
      return std::ranges::any_of(portions, [&](const dosing::Step& portion) {
        return std::ranges::any_of(portion.checks, [&](const auto& c) { return !c.ok && c.stops == stops; });
      });
    };
    row.push_back(some(true) ? "STOP" : some(false) ? "watch" : "passed");
    table.add(std::move(row));
  }
  Section section{"Expected after each step" + (common.empty() ? "" : ", " + common + " or pH"), {}};
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
    section.blocks.emplace_back(Paragraph{pretty_check(name) + ": " + detail});
  return section;
}

}  // namespace bathwright::sheets::slip
