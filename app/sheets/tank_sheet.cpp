#include <algorithm>
#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/doubts.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/sheets/tank_sheet.hpp>

namespace bathwright::sheets {
namespace {

/// A row each, and under it what it says: labels and figures stay in line, however long the words.
Lines indicators(const bath::BathType& type, const std::vector<bath::IndicatorValue>& values) {
  Table table({{"indicator"}, {"value", Align::number}, {"unit"}, {"state"}});
  for (const auto& v : values)
    table.add({v.label, v.value ? figure(*v.value) : "", v.unit,
               v.value ? std::string(words(standing(type, v.id, *v.value))) : "not available"});
  const Lines rows = table.lines();
  if (rows.size() != values.size() + 1) return rows;  // a label so long that the table itself had to wrap
  Lines lines = {rows.front()};
  for (std::size_t i = 0; i < values.size(); ++i) {
    lines.push_back(rows[i + 1]);
    say(lines, "    " + (values[i].value ? values[i].meaning : values[i].note));
  }
  return lines;
}

/// What a nose or a lung would meet at the surface if nothing moved the air. Carbon dioxide, oxygen and
/// hydrogen harm nobody here.
Lines over_the_tank(const std::vector<bath::GasView>& gases) {
  constexpr double atm_bar = 1.01325, shown_ppm = 0.01;
  Table table({{"gas"}, {"ppm", Align::number}});
  for (const auto& gas : gases) {
    const double ppm = 1e6 * gas.bar / atm_bar;
    if (ppm >= shown_ppm && gas.name != "CO2" && gas.name != "O2" && gas.name != "H2")
      table.add({pretty(gas.name), figure(ppm, 2)});
  }
  return table.lines();
}

}  // namespace

Lines tank_sheet(const bath::Tank& tank, const bath::BathType& type, const bath::TankView& view,
                 const StateRead& read, const Units& units) {
  Lines lines;
  tank_title(lines, tank, view.volume_L, read.temperature, units);
  say(lines, deferral);
  say(lines, "State: " + read.from + ".");
  stops(lines, read.changed_since);
  say(lines, "At " + units.degrees(tank.temperature) + ": pH " + fixed(view.pH, 2) + ", density " +
                 units.density(view.density_kg_per_L, 4) + ", ionic strength " +
                 fixed(view.ionic_strength, 2) + " mol/kg, water activity " + fixed(view.water_activity, 4) +
                 ".");
  const auto judged = judge(tank, type, view.quantity_g_per_L, read.pH);
  if (!view.valid)
    say(lines,
        "Indicative only: the solution lies outside what the model was tested for; see what is doubtful.");
  const auto in_units = units_of(judged, type, units, units.medium_of(view));
  heading(lines, levels_heading("Levels", common_unit(in_units)));
  append(lines, levels(judged, in_units));
  heading(lines, "In solution");
  append(lines, free_ions(type, view.species));
  if (!view.headroom.empty()) {
    heading(lines, "Headroom");
    append(lines, headroom(tank, view.headroom, units));
  }
  const auto uncertain = [](const bath::SpeciesView& s) { return s.u_log10_activity.has_value(); };
  if (std::any_of(view.species.begin(), view.species.end(), uncertain))
    say(lines,
        "  ±: one standard uncertainty, of the constants and of interactions that are missing or estimated; "
        "levels and pH count as exact.");
  if (!view.indicators.empty()) {
    heading(lines, "Indicators");
    append(lines, indicators(type, view.indicators));
  }
  if (const Lines gases = over_the_tank(view.gases); gases.size() > 1) {
    heading(lines, "Over the tank, in still air");
    append(lines, gases);
  }
  const auto of_the_tank =
      [&](const bath::Caution& caution) {  // those of a chemical stand on the addition sheet
        return caution.subject.empty() || type.quantity(caution.subject);
      };
  std::vector<std::string> texts;
  for (const auto& caution : type.cautions)
    if (of_the_tank(caution)) texts.push_back(caution.text);
  append(lines, cautions(texts));
  append(lines, doubts(view.warnings));
  lines.emplace_back();
  const auto over = crystallising(tank, view.headroom, units);
  for (const std::string& solid : over) say(lines, solid + ".", 2);
  const bool all_in = std::all_of(judged.begin(), judged.end(),
                                  [](const Judged& j) { return j.standing == Standing::in_window; });
  if (!read.changed_since.empty())
    say(lines, "Next: a new analysis; the levels above are no longer those of the tank.");
  else if (!all_in)
    say(lines, "Next: out of window; bathwright dose works out what to add.");
  else if (!over.empty())
    say(lines, "Next: keep it warm, or bring down what crystallises before it idles.");
  else
    say(lines, "Every level is in its window and nothing crystallises.");
  return lines;
}

}  // namespace bathwright::sheets
