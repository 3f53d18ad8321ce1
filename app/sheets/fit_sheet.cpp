#include <algorithm>
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

using activity::Interaction;
using regression::OfConstant;
using regression::Parameter;

int decimals(const regression::Unknown& unknown) {
  const auto* of = std::get_if<OfConstant>(&unknown.what);
  return !of ? 5 : of->parameter == Parameter::log10_K ? 4 : 2;
}

/// Of the table that holds it.
std::string column_of(const regression::Unknown& unknown) {
  const std::string parameter(parameter_name(unknown));
  if (const auto* of = std::get_if<OfConstant>(&unknown.what)) {
    if (of->parameter == Parameter::dH_kJ_per_mol) return "dH_kJ_mol";
    if (of->parameter == Parameter::dCp_J_per_molK) return "dCp_J_molK";
    return parameter;
  }
  const bool mixing = parameter == "theta" || parameter == "lambda" || parameter == "psi" ||
                      parameter == "zeta" || parameter == "mu";
  return mixing ? "value" : parameter;
}

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

/// The row that serves the same solutes now, in whatever set comes first, or a new one. What is found is for
/// 25 degC; a row that is one of a table against temperature cannot take it.
std::pair<std::string, Row> row_of(const Interaction& interaction) {
  const bool sit = interaction.parameter == activity::InteractionParameter::epsilon;
  const bool pair = !sit && interaction.parameter <= activity::InteractionParameter::cphi;
  const std::string path = sit    ? "activity/sit.csv"
                           : pair ? "activity/pitzer_binary.csv"
                                  : "activity/pitzer_mixing.csv";
  const std::vector<std::string> columns =
      sit || pair ? std::vector<std::string>{"cation", "anion"} : std::vector<std::string>{"i", "j", "k"};
  std::vector<std::string> solutes = interaction.solutes;
  solutes.resize(columns.size());
  if (sit || pair)  // cation first
    std::stable_sort(solutes.begin(), solutes.end(), [](const std::string& a, const std::string& b) {
      return activity::charge_in_name(a) > activity::charge_in_name(b);
    });
  const std::string parameter(activity::name(interaction.parameter));
  const std::multiset<std::string> members(solutes.begin(), solutes.end());
  const data::CsvTable table = data::built_in_table(path, {});
  for (std::size_t k = 0; k < table.size(); ++k) {
    std::multiset<std::string> here;
    for (const std::string& column : columns) here.emplace(table[k][column]);
    if (here != members) continue;
    if (!sit && !pair && table[k]["kind"] != parameter) continue;
    if (!sit && table[k]["t_C"] != "25") continue;
    Row row;
    for (const std::string& name : table.columns()) row[name] = table[k][name];
    return {path, row};
  }
  Row row;
  for (std::size_t k = 0; k < columns.size(); ++k) row[columns[k]] = solutes[k];
  if (sit) return {path, row};
  row["set"] = "main";
  row["t_C"] = "25";
  if (!pair) row["kind"] = parameter;
  if (pair) {
    const bool both_divalent =
        activity::charge_in_name(solutes[0]) == 2 && activity::charge_in_name(solutes[1]) == -2;
    for (const char* value : {"beta0", "beta1", "beta2", "cphi"}) row[value] = "0";
    row["alpha1"] = both_divalent ? "1.4" : "2";
    if (both_divalent) row["alpha2"] = "12";
  }
  return {path, row};
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

std::string table_row(const regression::Task& task, const regression::Fit& fit,
                      const regression::Unknown& unknown) {
  if (!task.fitted_by.empty()) return "";
  const auto* interaction = std::get_if<Interaction>(&unknown.what);
  auto [path, row] =
      interaction ? row_of(*interaction) : row_of(task, std::get<OfConstant>(unknown.what).constant);
  if (path.empty()) return "";
  const std::vector<std::string> columns = data::built_in_table(path, {}).columns();
  const auto has = [&](const char* column) {
    return std::find(columns.begin(), columns.end(), column) != columns.end();
  };
  std::string errors;  // where the table has no column for them
  for (const auto& found : fit.found) {
    if (owner(found.unknown) != owner(unknown)) continue;
    const std::string parameter(parameter_name(found.unknown));
    row[column_of(found.unknown)] = fixed(found.value, decimals(found.unknown));
    if (has("uncertainty") && (parameter == "log10_K" || parameter == "epsilon"))
      row["uncertainty"] = fixed(found.standard_error, decimals(found.unknown));
    else
      errors += parameter + " +/- " + fixed(found.standard_error, decimals(found.unknown)) + ", ";
  }
  if (has("quality")) row["quality"] = "regressed";
  if (has("epsilon1")) row["epsilon1"] = row["epsilon2"] = "";  // what is found does not vary with I
  row["source"] = provenance(task);
  row["from_memory"] = interaction ? "no" : row["from_memory"];
  if (has("max_molality") && row["max_molality"].empty())
    errors += "max_molality to be filled in: where the measurements end, ";
  row["note"] = errors + "fit error " + percent(fit.fit_error) +
                (fit.test_error ? ", error of what was held out " + percent(*fit.test_error) : "");
  return path + ": " + csv(data::built_in_table(path, {}), row);
}

Lines fit_sheet(const regression::Task& task, const regression::Fit& fit, std::string_view name) {
  Lines lines;
  title(lines, name, std::string(activity::name(task.model)));
  lines.emplace_back();
  say(lines, "Numbers " + provenance(task) + ".");
  Table table(
      {{"of"}, {"what"}, {"before", Align::number}, {"found", Align::number}, {"+/-", Align::number}});
  for (const auto& found : fit.found) {
    const int digits = decimals(found.unknown);
    table.add({pretty(owner(found.unknown)), std::string(parameter_name(found.unknown)),
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
            "  correlation of " + pretty(owner(fit.found[i].unknown)) + " " +
                std::string(parameter_name(fit.found[i].unknown)) + " with " +
                pretty(owner(fit.found[k].unknown)) + " " +
                std::string(parameter_name(fit.found[k].unknown)) + ": " +
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
      fit.test_error
          ? "  Error of what was held out " + percent(*fit.test_error) +
                (fit.test_error_before ? ", before the fit " + percent(*fit.test_error_before) : "") + "."
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
    if (shown.insert(owner(found.unknown)).second)
      if (const std::string row = table_row(task, fit, found.unknown); !row.empty())
        lines.push_back(row);  // not broken: it is to be copied
  return lines;
}

}  // namespace bathwright::sheets
