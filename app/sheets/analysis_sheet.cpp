#include <algorithm>
#include <bathwright/sheets/analysis_sheet.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>
#include <cmath>
#include <limits>

namespace bathwright::sheets {

std::vector<Judged> judge(const bath::Tank& tank, const bath::BathType& type,
                          const analysis::Analysis& analysis) {
  std::vector<double> levels(type.quantities.size(), std::numeric_limits<double>::quiet_NaN());
  for (const auto& level : analysis.reconciled)
    for (std::size_t i = 0; i < type.quantities.size(); ++i)
      if (type.quantities[i].id == level.quantity) levels[i] = level.value.v;
  return judge(tank, type, levels, analysis.pH);
}

namespace {

/// Lab, book and both together, side by side.
void reconciled(Lines& lines, const analysis::Analysis& a) {
  if (a.expected.empty()) return;
  heading(lines, "Lab, book, and both together");
  Table table({{"quantity"},
               {"lab g/L", Align::number},
               {"+/-", Align::number},
               {"book g/L", Align::number},
               {"+/-", Align::number},
               {"taken", Align::number},
               {"+/-", Align::number},
               {"apart"}});
  for (std::size_t i = 0; i < a.results.size(); ++i) {
    const auto& lab = a.results[i];
    const auto book = std::ranges::find(a.expected, lab.quantity, &analysis::LevelFound::quantity);
    if (book == a.expected.end()) continue;
    const bool read = lab.from == analysis::Origin::titration || lab.from == analysis::Origin::found;
    const auto residual = std::ranges::find_if(
        a.misfit.residuals, [&](const analysis::Residual& r) { return r.what == lab.quantity && !r.entry; });
    std::string apart;
    if (residual != a.misfit.residuals.end())
      apart =
          fixed(residual->studentised, 1) + " u" + (std::abs(residual->studentised) > 3 ? " <- look" : "");
    const auto& taken = a.reconciled[i];
    table.add({pretty(lab.quantity), read ? fixed(lab.value.v, 2) : "",
               read ? fixed(lab.standard_uncertainty.v, 2) : "", fixed(book->value.v, 2),
               fixed(book->standard_uncertainty.v, 2), fixed(taken.value.v, 2),
               fixed(taken.standard_uncertainty.v, 2), apart});
  }
  append(lines, table.lines());
  say(lines,
      "  Volume: " + fixed(a.volume.v, 0) + " L read, " + fixed(a.volume_reconciled.v, 0) + " L taken.");
  if (a.misfit.alarm)
    say(lines, "  Lab and book do not fit (below): what is taken is a compromise between the two.", 2);
  else
    say(lines,
        "  Lab and book fit (chi-square " + fixed(a.misfit.chi_square, 1) + " of " +
            std::to_string(a.misfit.degrees_of_freedom) +
            " readings). apart: lab against all else, in standard uncertainties u.",
        2);
}

}  // namespace

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
  reconciled(lines, a);
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
    say(lines, "Next: take a second sample and repeat the analysis before adding anything.");
  else
    say(lines, in ? "Every level is in its window. Nothing to add."
                  : "Next: bathwright dose works out what to add.");
  return lines;
}

}  // namespace bathwright::sheets
