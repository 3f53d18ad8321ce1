#include <bathwright/data/tables.hpp>
#include <bathwright/sheets/fit_sheet.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <map>
#include <set>

namespace bathwright::sheets {
namespace {

using regression::Parameter;

int decimals(Parameter parameter) { return parameter == Parameter::log10_K ? 4 : 2; }

/// The columns of a row of the tables, as text.
using Row = std::map<std::string, std::string>;

std::string quoted(const std::string& text) {
  if (text.find_first_of(",\"") == std::string::npos) return text;
  std::string all = "\"";
  for (const char c : text) all += c == '"' ? "\"\"" : std::string(1, c);
  return all + '"';
}

std::string csv(const data::CsvTable& table, const Row& row) {
  std::string line;
  for (const std::string& column : table.columns()) {
    const auto field = row.find(column);
    if (!line.empty()) line += ',';
    if (field != row.end()) line += quoted(field->second);
  }
  return line;
}

/// log10 K, dH and dCp as a file states them.
void state(const speciation::Constant& constant, Row& row) {
  row["log10_K"] = fixed(constant.log10_K, 3);
  if (constant.has_dH) row["dH_kJ_mol"] = fixed(constant.dH_kJ_per_mol, 2);
  if (constant.dCp_J_per_molK != 0) row["dCp_J_molK"] = fixed(constant.dCp_J_per_molK, 0);
}

/// The row of the tables with that name, or one begun from what the file states.
std::pair<std::string, Row> row_of(const regression::Task& task, const std::string& constant) {
  for (const auto& solid : task.own_solids) {
    if (solid.name != constant) continue;
    Row row{{"solid", constant}, {"formula", solid.formula}, {"set", "main"}, {"reaction", solid.reaction}};
    state(solid.constant, row);
    return {"equilibria/solids.csv", row};
  }
  for (const auto& species : task.own_species) {
    if (species.name != constant) continue;
    Row row{{"species", constant},
            {"set", "main"},
            {"reaction", species.reaction},
            {"ionic_strength", "0"},
            {"convention", "both"}};
    state(species.constant, row);
    return {"equilibria/species.csv", row};
  }
  for (const auto& [path, column] :
       {std::pair{"equilibria/solids.csv", "solid"}, {"equilibria/species.csv", "species"}}) {
    const data::CsvTable table = data::built_in_table(path, {});
    for (std::size_t i = 0; i < table.size(); ++i) {
      if (table[i][column] != constant) continue;
      Row row;
      for (const std::string& name : table.columns()) row[name] = table[i][name];
      return {path, row};
    }
  }
  return {};
}

std::string percent(double fraction) { return fixed(100 * fraction, 2) + " %"; }

void measurements(Lines& lines, const regression::Fit& fit) {
  Table table({{"measurement"},
               {"measured", Align::number},
               {"+/-", Align::number},
               {"before", Align::number},
               {"fitted", Align::number},
               {"use"}});
  for (const auto& row : fit.measurements)
    table.add({row.label, figure(row.measured), figure(row.uncertainty),
               row.before ? figure(*row.before) : "not solved",
               row.computed ? figure(*row.computed) : "not solved", row.held_out ? "test" : "fit"});
  heading(lines, "Measurements");
  append(lines, table.lines());
}

}  // namespace

std::string table_row(const regression::Task& task, const regression::Fit& fit, const std::string& constant) {
  if (!task.fitted_by.empty()) return "";
  auto [path, row] = row_of(task, constant);
  if (path.empty()) return "";
  for (const auto& found : fit.found) {
    if (found.unknown.constant != constant) continue;
    switch (found.unknown.parameter) {
      case Parameter::log10_K:
        row["log10_K"] = fixed(found.value, 3);
        row["uncertainty"] = fixed(found.standard_error, 3);
        break;
      case Parameter::dH_kJ_per_mol:
        row["dH_kJ_mol"] = fixed(found.value, 2);
        break;
      case Parameter::dCp_J_per_molK:
        row["dCp_J_molK"] = fixed(found.value, 0);
        break;
    }
  }
  row["source"] = provenance(task);
  row["note"] = "fit error " + percent(fit.fit_error) +
                (fit.test_error ? ", error of what was held out " + percent(*fit.test_error) : "");
  return path + ": " + csv(data::built_in_table(path, {}), row);
}

Lines fit_sheet(const regression::Task& task, const regression::Fit& fit, std::string_view name) {
  Lines lines;
  title(lines, name, std::string(activity::name(task.model)));
  lines.emplace_back();
  say(lines, "Constants " + provenance(task) + ".");
  Table table(
      {{"constant"}, {"what"}, {"before", Align::number}, {"found", Align::number}, {"+/-", Align::number}});
  for (const auto& found : fit.found) {
    const int digits = decimals(found.unknown.parameter);
    table.add({pretty(found.unknown.constant), std::string(regression::name(found.unknown.parameter)),
               fixed(found.before, digits), fixed(found.value, digits), fixed(found.standard_error, digits)});
  }
  heading(lines, "Found");
  append(lines, table.lines());
  say(lines,
      "  +/- is one standard error: of the stated uncertainties, widened where the fit is worse than they "
      "allow.",
      2);
  if (fit.found.size() > 1) {
    const std::size_t n = fit.found.size();
    for (std::size_t i = 0; i < n; ++i)
      for (std::size_t k = i + 1; k < n; ++k)
        say(lines,
            "  correlation of " + pretty(fit.found[i].unknown.constant) + " " +
                std::string(regression::name(fit.found[i].unknown.parameter)) + " with " +
                pretty(fit.found[k].unknown.constant) + " " +
                std::string(regression::name(fit.found[k].unknown.parameter)) + ": " +
                fixed(fit.covariance[i * n + k] / fit.found[i].standard_error / fit.found[k].standard_error,
                      3),
            4);
  }
  measurements(lines, fit);
  heading(lines, "How good it is");
  say(lines,
      "  Fit error " + percent(fit.fit_error) + " (root mean square)" +
          (fit.degrees_of_freedom > 0 ? ", reduced chi-square " + figure(fit.reduced_chi2) + " with " +
                                            std::to_string(fit.degrees_of_freedom) + " degrees of freedom."
                                      : ": as many unknowns as measurements, so it says nothing."),
      2);
  say(lines,
      fit.test_error ? "  Error of what was held out " + percent(*fit.test_error) + "."
                     : "  Nothing was held out: how well it predicts is not known.",
      2);
  if (!task.fitted_by.empty()) {
    lines.emplace_back();
    say(lines, "Good for this tank and its range only; not a constant of the tables.");
    return lines;
  }
  heading(lines, "Rows for engine/data");
  std::set<std::string> shown;
  for (const auto& found : fit.found)
    if (shown.insert(found.unknown.constant).second)
      if (const std::string row = table_row(task, fit, found.unknown.constant); !row.empty())
        lines.push_back(row);  // not broken: it is to be copied
  return lines;
}

}  // namespace bathwright::sheets
