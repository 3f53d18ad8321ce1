#include <algorithm>
#include <bathwright/sheets/analysis_sheet.hpp>
#include <bathwright/sheets/chance.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/tank_parts.hpp>
#include <bathwright/units/show.hpp>

#include "parts.hpp"

namespace bathwright::sheets::slip {
namespace {

constexpr double coverage = 2;  // standard uncertainties: about 95 %

/// "263.4 ± 4.2"
std::string with_uncertainty(double value, const std::optional<double>& u, int decimals) {
  return fixed(value, decimals) + (u ? " ± " + fixed(*u, decimals) : "");
}

std::optional<double> uncertainty(const analysis::Analysis& analysis, const std::string& quantity) {
  for (const auto& level : analysis.results)
    if (level.quantity == quantity) return coverage * level.standard_uncertainty.v;
  return std::nullopt;
}

std::string name_of(const Judged& judged) { return pretty(judged.aim->quantity); }

Table earlier(const AdditionSlip& slip, const std::vector<Judged>& now) {
  std::vector<Column> heads{{"before"}};
  for (const Judged& one : now) heads.push_back({name_of(one), Align::number});
  Table table(std::move(heads));
  for (const Before& analysis : slip.before) {
    std::vector<std::string> row{analysis.when};
    for (const Judged& one : now) {
      const auto level = analysis.level.find(one.aim->quantity);
      row.push_back(level == analysis.level.end() ? "" : fixed(level->second, decimals_of(one)));
    }
    table.add(std::move(row));
  }
  return table;
}

/// What lab and book come to together, where that is another figure than the lab's; "" where it is not.
std::string used_instead(const analysis::Analysis& analysis, const std::vector<Judged>& now) {
  std::string text;
  for (const Judged& one : now)
    for (const auto& level : analysis.reconciled)
      if (level.quantity == one.aim->quantity) {
        const std::string used = fixed(level.value.v, decimals_of(one));
        if (used == fixed(one.found, decimals_of(one))) continue;
        text += (text.empty() ? "" : ", ") + name_of(one) + " " + used;
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
  std::vector<Column> heads{{"g/L, or pH"},          {"low", Align::number},        {"aim", Align::number},
                            {"high", Align::number}, {"found ± 2u", Align::number}, {"state"}};
  if (doses) heads.push_back({"expected ± 2u", Align::number});
  Table table(std::move(heads));
  for (std::size_t i = 0; i < now.size(); ++i) {
    const Judged& one = now[i];
    const int decimals = decimals_of(one);
    const auto u = uncertainty(slip.analysis, one.aim->quantity);
    std::vector<std::string> row{name_of(one),
                                 fixed(one.aim->low, decimals),
                                 fixed(one.aim->aim, decimals),
                                 fixed(one.aim->high, decimals),
                                 with_uncertainty(one.found, u, decimals),
                                 std::string(words(one.standing))};
    if (doses) {
      // What was uncertain of the amounts stays so; additions count as exact.
      const double share = slip.analysis.volume.v / plan->final_view.volume_L;
      const auto u_end = u ? std::optional(*u * share) : std::nullopt;
      row.push_back(with_uncertainty(end[i].found, u_end, decimals));
    }
    table.add(std::move(row));
  }
  Section section{"Levels", {}};
  section.blocks.emplace_back(std::move(table));
  if (!slip.before.empty()) section.blocks.emplace_back(earlier(slip, now));
  if (const std::string used = used_instead(slip.analysis, now); !used.empty())
    section.blocks.push_back(
        Paragraph{"Lab and book weighed against each other, as the plan starts: " + used + "."});
  if (fixed(slip.sheet.now.pH, 2) != fixed(slip.analysis.pH, 2))
    section.blocks.emplace_back(Paragraph{"At " + units::show(slip.tank.temperature, "degC", 3) +
                                       ", for which the steps are worked out, the pH is " +
                                       fixed(slip.sheet.now.pH, 2) + "."});
  if (plan)
    for (const std::string& words :
         {chance_of_ending_inside(slip.type, *plan), chance_of_staying_dissolved(slip.tank, *plan)})
      if (!words.empty()) section.blocks.emplace_back(Paragraph{words});
  return section;
}

}  // namespace bathwright::sheets::slip
