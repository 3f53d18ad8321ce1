#include <algorithm>
#include <bathwright/sheets/analysis_sheet.hpp>
#include <bathwright/sheets/chance.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/tank_parts.hpp>

#include "parts.hpp"

namespace bathwright::sheets::slip {
namespace {

constexpr double coverage = 2;  // standard uncertainties: about 95 %

/// "263.4 ± 4.2"
std::string with_uncertainty(double value, const std::optional<double>& u, const LevelUnit& unit,
                             int decimals) {
  return fixed(unit.of(value), decimals) + (u ? " ± " + fixed(unit.of(*u), decimals) : "");
}

std::optional<double> uncertainty(const analysis::Analysis& analysis, const std::string& quantity) {
  for (const auto& level : analysis.results)
    if (level.quantity == quantity) return coverage * level.standard_uncertainty.v;
  return std::nullopt;
}

Medium medium_of(const AdditionSlip& slip) {
  return sheets::medium_of(slip.analysis, slip.units.medium_of(slip.sheet.now).water_kg_per_L);
}

std::string name_of(const Judged& judged) { return pretty(judged.aim->quantity); }

/// In g/L where the chosen unit needs what the log does not have of one of them.
Table earlier(const AdditionSlip& slip, const std::vector<Judged>& now, const std::string& common) {
  const bool told = std::ranges::all_of(slip.before, [&](const Before& analysis) {
    return std::ranges::all_of(now, [&](const Judged& one) {
      return unit_of(one, slip.type, slip.units, {analysis.density_kg_per_L}).symbol ==
             unit_of(one, slip.type, slip.units, medium_of(slip)).symbol;
    });
  });
  const Units units = told ? slip.units : Units();
  std::vector<Column> heads{{"before"}};
  for (const Judged& one : now)
    heads.push_back(
        {named(name_of(one), unit_of(one, slip.type, units, medium_of(slip)), common), Align::number});
  Table table(std::move(heads));
  for (const Before& analysis : slip.before) {
    std::vector<std::string> row{analysis.when};
    for (const Judged& one : now) {
      const LevelUnit unit = unit_of(one, slip.type, units, {analysis.density_kg_per_L});
      const auto level = analysis.level.find(one.aim->quantity);
      row.push_back(level == analysis.level.end() ? ""
                                                  : fixed(unit.of(level->second), decimals_of(one, unit)));
    }
    table.add(std::move(row));
  }
  return table;
}

/// What lab and book come to together, where that is another figure than the lab's; "" where it is not.
std::string used_instead(const analysis::Analysis& analysis, const std::vector<Judged>& now,
                         const std::vector<LevelUnit>& units) {
  std::string text;
  for (std::size_t i = 0; i < now.size(); ++i)
    for (const auto& level : analysis.reconciled)
      if (level.quantity == now[i].aim->quantity) {
        const int decimals = decimals_of(now[i], units[i]);
        const std::string used = fixed(units[i].of(level.value.v), decimals);
        if (used == fixed(units[i].of(now[i].found), decimals)) continue;
        text += (text.empty() ? "" : ", ") + name_of(now[i]) + " " + used;
      }
  return text;
}

}  // namespace

Section levels(const AdditionSlip& slip) {
  const auto now = judge(slip.tank, slip.type, slip.analysis);
  const dosing::Plan* plan = slip.sheet.plans.empty() ? nullptr : &slip.sheet.plans.front();
  const bool doses = plan && !plan->additions.empty();
  const auto end = doses ? judge(slip.tank, slip.type, plan->final_view.quantity_g_per_L, plan->final_view.pH)
                         : std::vector<Judged>{};
  const auto units = units_of(now, slip.type, slip.units, medium_of(slip));
  const std::string common = common_unit(units);
  std::vector<Column> heads{{level_head(common)},    {"low", Align::number},        {"aim", Align::number},
                            {"high", Align::number}, {"found ± 2u", Align::number}, {"state"}};
  if (doses) heads.push_back({"expected ± 2u", Align::number});
  Table table(std::move(heads));
  for (std::size_t i = 0; i < now.size(); ++i) {
    const Judged& one = now[i];
    const int decimals = decimals_of(one, units[i]);
    const auto u = uncertainty(slip.analysis, one.aim->quantity);
    const auto shown = [&](double level) { return fixed(units[i].of(level), decimals); };
    std::vector<std::string> row{named(name_of(one), units[i], common),
                                 shown(one.aim->low),
                                 shown(one.aim->aim),
                                 shown(one.aim->high),
                                 with_uncertainty(one.found, u, units[i], decimals),
                                 std::string(words(one.standing))};
    if (doses) {
      // What was uncertain of the amounts stays so; additions count as exact.
      const double share = slip.analysis.volume.v / plan->final_view.volume_L;
      const auto u_end = u ? std::optional(*u * share) : std::nullopt;
      const LevelUnit then = unit_of(end[i], slip.type, slip.units, slip.units.medium_of(plan->final_view));
      row.push_back(with_uncertainty(end[i].found, u_end, then, decimals));
    }
    table.add(std::move(row));
  }
  Section section{levels_heading("Levels", common), {}};
  section.blocks.emplace_back(std::move(table));
  if (!slip.before.empty()) section.blocks.emplace_back(earlier(slip, now, common));
  if (const std::string used = used_instead(slip.analysis, now, units); !used.empty())
    section.blocks.push_back(
        Paragraph{"Lab and book weighed against each other, as the plan starts: " + used + "."});
  if (fixed(slip.sheet.now.pH, 2) != fixed(slip.analysis.pH, 2))
    section.blocks.emplace_back(Paragraph{"At " + slip.units.degrees(slip.tank.temperature) +
                                          ", for which the steps are worked out, the pH is " +
                                          fixed(slip.sheet.now.pH, 2) + "."});
  if (plan)
    for (const std::string& words : {chance_of_ending_inside(slip.type, *plan),
                                     chance_of_staying_dissolved(slip.tank, *plan, slip.units)})
      if (!words.empty()) section.blocks.emplace_back(Paragraph{words});
  return section;
}

}  // namespace bathwright::sheets::slip
