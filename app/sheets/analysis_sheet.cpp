#include <algorithm>
#include <bathwright/sheets/analysis_sheet.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>
#include <limits>

namespace bathwright::sheets {

std::vector<Judged> judge(const bath::Tank& tank, const bath::BathType& type,
                          const analysis::Analysis& analysis) {
  std::vector<double> levels(type.quantities.size(), std::numeric_limits<double>::quiet_NaN());
  for (const auto& level : analysis.results)
    for (std::size_t i = 0; i < type.quantities.size(); ++i)
      if (type.quantities[i].id == level.quantity) levels[i] = level.value.v;
  return judge(tank, type, levels, analysis.pH);
}

Lines analysis_sheet(const bath::Tank& tank, const bath::BathType& type, const analysis::Analysis& a) {
  Lines lines;
  tank_title(lines, tank, a.volume.v, a.temperature);
  say(lines, "Volume: " + a.volume_from + ".");
  heading(lines, "Found");
  Table found({{"quantity"}, {"g/L", Align::number}, {"+/-", Align::number}, {"how"}});
  for (const auto& level : a.results)
    found.add({pretty(level.quantity), fixed(level.value.v, 2), fixed(level.standard_uncertainty.v, 2),
               level.how.empty() ? std::string(analysis::name(level.from)) : level.how});
  append(lines, found.lines());
  say(lines, "  +/- is one standard uncertainty.");
  for (const auto& level : a.results)
    if (!level.interferences.empty())
      say(lines, "  " + pretty(level.quantity) + ", interferences: " + level.interferences, 4);
  heading(lines, "Against the window");
  const auto judged = judge(tank, type, a);
  append(lines, levels(judged));
  lines.emplace_back();
  std::string density = "Density " + fixed(a.density_predicted.v, 4) + " kg/L from these levels";
  if (a.density_measured) density += ", " + a.density_read + " by hydrometer";
  say(lines, density + ".");
  for (const std::string& note : a.notes) say(lines, "Note: " + note, 2);
  if (!a.suspects.empty()) {
    heading(lines, "What does not fit");
    for (const auto& suspect : a.suspects) {
      say(lines, "  " + suspect.what + ": " + suspect.reason, 2);
      if (!suspect.try_this.empty()) say(lines, "    " + suspect.try_this);
    }
  }
  lines.emplace_back();
  const bool in = std::all_of(judged.begin(), judged.end(),
                              [](const Judged& j) { return j.standing == Standing::in_window; });
  if (!a.suspects.empty())
    say(lines, "Next: take a second sample before adding anything.");
  else
    say(lines, in ? "Every level is in its window. Nothing to add."
                  : "Next: bathwright dose works out what to add.");
  return lines;
}

}  // namespace bathwright::sheets
