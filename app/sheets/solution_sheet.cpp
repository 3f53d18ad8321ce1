#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/solution_sheet.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/units/show.hpp>

namespace bathwright::sheets {
namespace {

constexpr double trace_molality = 1e-9;
constexpr double trace_pressure_atm = 1e-8;  // a hundredth of a part per million of the air
constexpr double far_below_saturation = -3;

std::string solid_state(const solution::SolidFound& solid) {
  if (solid.dissolved_mol > 0)
    return "dissolves " + figure(solid.dissolved_mol) +
           (solid.u_dissolved_mol ? " ± " + units::significant(*solid.u_dissolved_mol, 1) : "");
  if (solid.precipitated_mol > 0) return "precipitates " + figure(solid.precipitated_mol);
  if (!solid.covers_temperature) return "no data at this temperature";
  if (solid.saturation_index > 0) return solid.slow ? "supersaturated, forms slowly" : "supersaturated";
  return "stays dissolved";
}

void species(Lines& lines, const solution::Solution& s) {
  Table table({{"species"},
               {"mol/kg", Align::number},
               {"mol/L", Align::number},
               {"gamma", Align::number},
               {"log10 a", Align::number},
               {""}});
  std::size_t traces = 0;
  for (const auto& line : s.species) {
    if (line.molality < trace_molality && line.name != "H^+") {
      ++traces;
      continue;
    }
    table.add({pretty(line.name), figure(line.molality), figure(line.molarity), figure(line.gamma),
               fixed(line.log10_activity, 3), give_or_take(line.u_log10_activity)});
  }
  heading(lines, "In solution");
  append(lines, table.lines());
  if (traces > 0)
    say(lines, "  and " + std::to_string(traces) + " species below 1e-9 mol/kg (--json lists them)");
}

void solids(Lines& lines, const solution::Solution& s) {
  Table table({{"solid"}, {"log10(Q/K)", Align::number}, {""}, {"state, mol/kg"}});
  for (const auto& solid : s.solids)
    if (solid.saturation_index > far_below_saturation || solid.in_excess)
      table.add({pretty(solid.name), fixed(solid.saturation_index, 2), give_or_take(solid.u_saturation_index),
                 solid_state(solid)});
  if (table.empty()) return;
  heading(lines, "Solids within three decades of saturation");
  append(lines, table.lines());
}

void small_tables(Lines& lines, const solution::Solution& s) {
  if (!s.mean_activity.empty()) {
    Table table({{"salt, acid or base"}, {"mean activity coefficient, stoichiometric", Align::number}});
    for (const auto& [formula, gamma] : s.mean_activity) table.add({pretty(formula), figure(gamma)});
    heading(lines, "Mean activity");
    append(lines, table.lines());
  }
  Table gases({{"gas"}, {"partial pressure atm", Align::number}});
  for (const auto& gas : s.gases)
    if (gas.partial_pressure_atm > trace_pressure_atm)
      gases.add({pretty(gas.name), figure(gas.partial_pressure_atm)});
  if (!gases.empty()) {
    heading(lines, "Gases over it");
    append(lines, gases.lines());
  }
}

}  // namespace

Lines solution_sheet(const solution::Solution& s, std::string_view name) {
  Lines lines;
  title(lines, name, units::show(s.temperature));
  lines.emplace_back();
  Table facts({{""}, {"", Align::number}, {""}});
  facts.add({"pH", fixed(s.pH, 3), give_or_take(s.u_pH)});
  facts.add({"ionic strength", figure(s.ionic_strength), "mol/kg"});
  facts.add({"water activity", fixed(s.water_activity, 4), ""});
  facts.add({"osmotic coefficient", fixed(s.osmotic_coefficient, 4), ""});
  facts.add({"density", fixed(s.density_kg_per_L, 4), "kg/L"});
  Lines rows = facts.lines();
  lines.insert(lines.end(), rows.begin() + 1, rows.end());
  lines.emplace_back();
  say(lines, "Model " + std::string(activity::name(s.model)) + ": " + s.model_reason + ".");
  if (s.pH_held_with)
    say(lines, "pH is held by " + figure(s.pH_held_with->proton_mol) + " mol/kg H⁺ with " +
                   pretty(s.pH_held_with->counter_ion) + " as counter-ion.");
  if (s.u_pH)
    say(lines,
        "±: one standard uncertainty, of the constants and of interactions that are missing or estimated; the "
        "amounts count as exact.");
  species(lines, s);
  solids(lines, s);
  small_tables(lines, s);
  if (!s.missing_interactions.empty() || !s.warnings.empty()) heading(lines, "What is doubtful");
  for (const auto& text : s.warnings) say(lines, "  " + text, 2);
  for (const auto& text : s.missing_interactions) say(lines, "  " + text, 2);
  lines.emplace_back();
  say(lines, s.valid ? "Within what the model and its parameters cover."
                     : "Indicative only: the doubts above move the answer. Measure before relying on it.");
  return lines;
}

}  // namespace bathwright::sheets
