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

/// To 0.01 g/L, or as fine in another unit.
std::string hundredths(units::GramsPerLitre level, const LevelUnit& unit) {
  return fixed(unit.of(level.v), unit.decimals(2));
}

/// Lab, book and both together, side by side.
void reconciled(Lines& lines, const analysis::Analysis& a, const std::vector<LevelUnit>& unit,
                const Units& units) {
  if (a.expected.empty()) return;
  heading(lines, "Lab, book, and both together");
  const std::string common = common_unit(unit), in_head = common.empty() ? "" : " " + common;
  Table table({{"quantity"},
               {"lab" + in_head, Align::number},
               {"+/-", Align::number},
               {"book" + in_head, Align::number},
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
    const auto shown = [&](units::GramsPerLitre level) { return hundredths(level, unit[i]); };
    table.add({named(pretty(lab.quantity), unit[i], common), read ? shown(lab.value) : "",
               read ? shown(lab.standard_uncertainty) : "", shown(book->value),
               shown(book->standard_uncertainty), shown(taken.value), shown(taken.standard_uncertainty),
               apart});
  }
  append(lines, table.lines());
  say(lines, "  Volume: " + units.volume_figure(a.volume.v) + " " + units.volume_symbol() + " read, " +
                 units.volume_figure(a.volume_reconciled.v) + " " + units.volume_symbol() + " taken.");
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

Medium medium_of(const analysis::Analysis& analysis, std::optional<double> water_kg_per_L) {
  return {analysis.density_measured.value_or(analysis.density_predicted).v, water_kg_per_L};
}

Lines analysis_sheet(const bath::Tank& tank, const bath::BathType& type, const analysis::Analysis& a,
                     const Units& units, std::optional<double> water_kg_per_L) {
  const Medium in = medium_of(a, water_kg_per_L);
  std::vector<LevelUnit> unit;
  for (const auto& level : a.results) {
    const bath::Quantity* quantity = type.quantity(level.quantity);
    unit.push_back(quantity ? units.level(*quantity, in) : LevelUnit{});
  }
  const std::string common = common_unit(unit);
  Lines lines;
  tank_title(lines, tank, a.volume.v, a.temperature, units);
  say(lines, "Volume: " + a.volume_from + ".");
  heading(lines, "Found");
  Table found({{"quantity"}, {common, Align::number}, {"+/-", Align::number}, {"how"}});
  for (std::size_t i = 0; i < a.results.size(); ++i) {
    const auto& level = a.results[i];
    found.add({named(pretty(level.quantity), unit[i], common), hundredths(level.value, unit[i]),
               hundredths(level.standard_uncertainty, unit[i]),
               level.how.empty() ? std::string(analysis::name(level.from)) : level.how});
  }
  append(lines, found.lines());
  say(lines, "  +/- is one standard uncertainty.");
  for (const auto& level : a.results)
    if (!level.interferences.empty())
      say(lines, "  " + pretty(level.quantity) + ", interferences: " + level.interferences, 4);
  reconciled(lines, a, unit, units);
  const auto judged = judge(tank, type, a);
  const auto in_units = units_of(judged, type, units, in);
  heading(lines, levels_heading("Against the window", common_unit(in_units)));
  append(lines, levels(judged, in_units));
  lines.emplace_back();
  std::string density = "Density " + units.density(a.density_predicted.v, 4) + " from these levels";
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
  const bool all_in = std::all_of(judged.begin(), judged.end(),
                                  [](const Judged& j) { return j.standing == Standing::in_window; });
  if (!a.suspects.empty())
    say(lines, "Next: take a second sample and repeat the analysis before adding anything.");
  else
    say(lines, all_in ? "Every level is in its window. Nothing to add."
                      : "Next: bathwright dose works out what to add.");
  return lines;
}

}  // namespace bathwright::sheets
