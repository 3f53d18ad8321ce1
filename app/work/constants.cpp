#include "constants.hpp"

#include <algorithm>
#include <bathwright/data/tables.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/speciation/equilibria.hpp>
#include <cmath>

namespace bathwright::work {
namespace {

/// A table of constants: which columns name what a row is about, and which hold its numbers.
struct TableOfConstants {
  const char* path;
  const char* title;
  std::vector<std::string> subjects, values;
  bool interaction = false;  ///< of solutes with each other: many rows, shown grouped
};

const std::vector<TableOfConstants>& tables() {
  static const std::vector<TableOfConstants> all{
      {"equilibria/species.csv",
       "formation",
       {"species"},
       {"reaction", "log10_K", "dH_kJ_mol", "dCp_J_molK", "uncertainty"}},
      {"equilibria/solids.csv",
       "dissolution of a solid",
       {"solid", "formula"},
       {"reaction", "log10_K", "dH_kJ_mol", "dCp_J_molK", "uncertainty", "min_C", "max_C"}},
      {"equilibria/gases.csv",
       "solubility of a gas",
       {"gas"},
       {"reaction", "log10_K", "dH_kJ_mol", "uncertainty"}},
      {"equilibria/temperature_functions.csv",
       "temperature function",
       {"of"},
       {"A", "B", "C", "D", "E", "F", "min_C", "max_C"}},
      {"equilibria/heat_capacity.csv",
       "heat capacity",
       {"substance"},
       {"constant_J_molK", "pole_JK_mol", "born_J_mol"}},
      {"activity/ion_size.csv", "ion size", {"ion"}, {"size_pm"}},
      {"matter/laliberte_density.csv", "density", {"formula"}, {"c0", "c1", "c2", "c3", "c4"}},
      {"matter/apparent_volume.csv", "apparent volume", {"formula"}, {"cm3_per_mol"}},
      {"activity/pitzer_binary.csv",
       "Pitzer pairs",
       {"cation", "anion"},
       {"beta0", "beta1", "beta2", "cphi", "max_molality"},
       true},
      {"activity/pitzer_mixing.csv", "Pitzer mixing", {"i", "j", "k"}, {"kind", "value"}, true},
      {"activity/sit.csv", "SIT", {"cation", "anion"}, {"epsilon"}, true},
  };
  return all;
}

bool has(const data::CsvTable& table, std::string_view column) {
  return std::find(table.columns().begin(), table.columns().end(), column) != table.columns().end();
}

std::string field(const data::CsvTable& table, std::size_t row, const std::string& column) {
  return has(table, column) ? std::string(table[row][column]) : "";
}

/// Functions and heat capacities of a solid or gas name its phase: "CO2(g)".
std::string without_phase(std::string name) {
  for (const std::string_view phase : {"(s)", "(g)"})
    if (name.ends_with(phase)) name.resize(name.size() - phase.size());
  return name;
}

}  // namespace

std::vector<Constant> constants_about(const std::string& subject, std::vector<std::string>& names) {
  std::vector<Constant> found;
  for (const TableOfConstants& kind : tables()) {
    const data::CsvTable table = data::built_in_table(kind.path, {});
    for (std::size_t i = 0; i < table.size(); ++i) {
      bool about = false;
      std::string what;
      for (const std::string& column : kind.subjects) {
        const std::string name = field(table, i, column);
        if (name.empty()) continue;
        names.push_back(name);
        about = about || without_phase(name) == subject;
        if (column != "formula" || what.empty()) what += (what.empty() ? "" : " - ") + name;
      }
      if (!about) continue;
      std::string values;
      for (const std::string& column : kind.values)
        if (const std::string value = field(table, i, column); !value.empty())
          values += (values.empty() ? "" : ", ") + column + " " + value;
      std::string note = field(table, i, "note");
      if (field(table, i, "from_memory") == "yes") note = "from memory" + (note.empty() ? "" : "; " + note);
      found.push_back({kind.title, what, field(table, i, "set"), field(table, i, "t_C"), values,
                       field(table, i, "quality"), field(table, i, "source"), note, kind.interaction});
    }
  }
  return found;
}

std::string values_with_set(const Constant& row) {
  return (row.set.empty() ? "" : "set " + row.set + ", ") + (row.t_C.empty() ? "" : "t_C " + row.t_C + ", ") +
         row.values;
}

bool is_basis(const std::string& name) {
  for (const auto convention : {activity::Convention::interaction, activity::Convention::association}) {
    const auto& basis = speciation::Equilibria::built_in(convention).basis();
    if (std::find(basis.begin(), basis.end(), name) != basis.end()) return true;
  }
  return false;
}

namespace {

/// The value of a column of interactions at the temperature nearest 25 degC, with the range of the others.
struct Interaction {
  const Constant* nearest = nullptr;
  double low = 0, high = 0;
  std::size_t rows = 0;
};

/// One line for each pair or triple and set, and a number for each source, which stands once at the end.
void list_interactions(sheets::Lines& lines, const std::vector<Constant>& rows) {
  std::vector<std::pair<std::string, Interaction>> groups;  // in the order of the tables
  for (const Constant& row : rows) {
    if (!row.interaction) continue;
    // Mixing rows of several kinds stand beside each other: the kind is the first word of the values.
    const std::string kind =
        row.values.starts_with("kind ") ? row.values.substr(0, row.values.find(',')) : "";
    const std::string key = row.table + '|' + row.what + '|' + row.set + '|' + kind;
    auto group = std::find_if(groups.begin(), groups.end(), [&](const auto& g) { return g.first == key; });
    if (group == groups.end()) group = groups.insert(groups.end(), {key, {}});
    Interaction& of = group->second;
    const double t = row.t_C.empty() ? 25 : std::stod(row.t_C);
    of.low = of.rows == 0 ? t : std::min(of.low, t);
    of.high = of.rows == 0 ? t : std::max(of.high, t);
    ++of.rows;
    const auto distance = [](const Constant& r) {
      return r.t_C.empty() ? 0 : std::abs(std::stod(r.t_C) - 25);
    };
    if (!of.nearest || distance(row) < distance(*of.nearest)) of.nearest = &row;
  }
  std::vector<std::string> sources;
  std::string table;
  for (const auto& [key, of] : groups) {
    const Constant& row = *of.nearest;
    if (row.table != table) sheets::heading(lines, row.table);
    table = row.table;
    const std::string source = (row.quality.empty() ? "" : row.quality + ". ") + row.source +
                               (row.note.empty() ? "" : " (" + row.note + ")");
    auto known = std::find(sources.begin(), sources.end(), source);
    if (known == sources.end()) known = sources.insert(sources.end(), source);
    std::string temperatures;
    if (of.rows > 1)
      temperatures = ", at " + row.t_C + " degC; " + std::to_string(of.rows) + " rows from " +
                     sheets::figure(of.low) + " to " + sheets::figure(of.high) + " degC";
    sheets::say(lines,
                "  " + row.what + (row.set.empty() ? "" : ", set " + row.set) + ": " + row.values +
                    temperatures + " [" + std::to_string(known - sources.begin() + 1) + "]",
                4);
  }
  if (sources.empty()) return;
  sheets::heading(lines, "Sources of the interactions");
  for (std::size_t k = 0; k < sources.size(); ++k)
    sheets::say(lines, "  [" + std::to_string(k + 1) + "] " + sources[k], 4);
}

}  // namespace

sheets::Lines sources_sheet(const std::string& subject, const std::vector<Constant>& rows) {
  sheets::Lines lines;
  sheets::title(lines, sheets::pretty(subject), std::to_string(rows.size()) + " constants");
  if (is_basis(subject)) sheets::say(lines, "Totals are counted in it: no constant forms it.");
  std::string table;
  for (const Constant& row : rows) {
    if (row.interaction) continue;
    if (row.table != table) sheets::heading(lines, row.table);
    table = row.table;
    sheets::say(lines, row.what + ": " + values_with_set(row), 4);
    sheets::say(lines, "    " + (row.quality.empty() ? "" : row.quality + ". ") + row.source);
    if (!row.note.empty()) sheets::say(lines, "    (" + row.note + ")");
  }
  list_interactions(lines, rows);
  return lines;
}

}  // namespace bathwright::work
