// bathwright sources SPECIES: every constant used for a species or solid, and where it came from.
#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <bathwright/data/tables.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/speciation/equilibria.hpp>

#include "context.hpp"

namespace bathwright::command {
namespace {

/// One constant with its source.
struct Row {
  std::string table, what, values, quality, source, note;
};

/// A table of constants: which columns name what a row is about, and which hold its numbers.
struct TableOfConstants {
  const char* path;
  const char* title;
  std::vector<std::string> subjects, values;
};

const std::vector<TableOfConstants>& tables() {
  static const std::vector<TableOfConstants> all{
      {"equilibria/species.csv",
       "formation",
       {"species"},
       {"reaction", "log10_K", "dH_kJ_mol", "uncertainty"}},
      {"equilibria/solids.csv",
       "dissolution of a solid",
       {"solid", "formula"},
       {"reaction", "log10_K", "dH_kJ_mol", "uncertainty", "min_C", "max_C"}},
      {"equilibria/gases.csv",
       "solubility of a gas",
       {"gas"},
       {"reaction", "log10_K", "dH_kJ_mol", "uncertainty"}},
      {"activity/pitzer_binary.csv",
       "Pitzer pair",
       {"cation", "anion"},
       {"t_C", "beta0", "beta1", "beta2", "cphi", "max_molality"}},
      {"activity/pitzer_mixing.csv", "Pitzer mixing", {"i", "j", "k"}, {"kind", "t_C", "value"}},
      {"activity/ion_size.csv", "ion size", {"ion"}, {"size_pm"}},
      {"matter/laliberte_density.csv", "density", {"formula"}, {"c0", "c1", "c2", "c3", "c4"}},
      {"matter/apparent_volume.csv", "apparent volume", {"formula"}, {"cm3_per_mol"}},
  };
  return all;
}

bool has(const data::CsvTable& table, std::string_view column) {
  return std::find(table.columns().begin(), table.columns().end(), column) != table.columns().end();
}

std::string field(const data::CsvTable& table, std::size_t row, const std::string& column) {
  return has(table, column) ? std::string(table[row][column]) : "";
}

std::vector<Row> rows_about(const std::string& subject, std::vector<std::string>& names) {
  std::vector<Row> found;
  for (const TableOfConstants& kind : tables()) {
    const data::CsvTable table = data::built_in_table(kind.path, {});
    for (std::size_t i = 0; i < table.size(); ++i) {
      bool about = false;
      std::string what;
      for (const std::string& column : kind.subjects) {
        const std::string name = field(table, i, column);
        if (name.empty()) continue;
        names.push_back(name);
        about = about || name == subject;
        if (column != "formula" || what.empty()) what += (what.empty() ? "" : " - ") + name;
      }
      if (!about) continue;
      std::string values;
      if (const std::string set = field(table, i, "set"); !set.empty()) values = "set " + set;
      for (const std::string& column : kind.values)
        if (const std::string value = field(table, i, column); !value.empty())
          values += (values.empty() ? "" : ", ") + column + " " + value;
      std::string note = field(table, i, "note");
      if (field(table, i, "from_memory") == "yes") note = "from memory" + (note.empty() ? "" : "; " + note);
      found.push_back(
          {kind.title, what, values, field(table, i, "quality"), field(table, i, "source"), note});
    }
  }
  return found;
}

bool is_basis(const std::string& name) {
  for (const auto convention : {activity::Convention::interaction, activity::Convention::association}) {
    const auto& basis = speciation::Equilibria::built_in(convention).basis();
    if (std::find(basis.begin(), basis.end(), name) != basis.end()) return true;
  }
  return false;
}

int run(const Context& context, const std::string& subject) {
  std::vector<std::string> names;
  const std::vector<Row> rows = rows_about(subject, names);
  if (rows.empty()) {
    const auto close = nearest(subject, names);
    return fail(context,
                {{Fault::bad_input, subject, "no constant is about it",
                  "an ion, solid, gas or salt, as Ni^2+", close ? "Did you mean " + *close + "?" : ""}});
  }
  if (context.json) {
    Json doc = document({});
    doc["subject"] = subject;
    doc["basis"] = is_basis(subject);
    doc["constants"] = Json::array();
    for (const Row& row : rows)
      doc["constants"].push_back({{"kind", row.table},
                                  {"about", row.what},
                                  {"values", row.values},
                                  {"quality", row.quality},
                                  {"source", row.source},
                                  {"note", row.note}});
    print(doc);
    return Exit::all_well;
  }
  sheets::Lines lines;
  sheets::title(lines, sheets::pretty(subject), std::to_string(rows.size()) + " constants");
  if (is_basis(subject)) sheets::say(lines, "Totals are counted in it: no constant forms it.");
  std::string table;
  for (const Row& row : rows) {
    if (row.table != table) sheets::heading(lines, row.table);
    table = row.table;
    sheets::say(lines, row.what + ": " + row.values, 4);
    sheets::say(lines, "    " + (row.quality.empty() ? "" : row.quality + ". ") + row.source);
    if (!row.note.empty()) sheets::say(lines, "    (" + row.note + ")");
  }
  print(lines);
  return Exit::all_well;
}

}  // namespace

void add_sources(CLI::App& program, Context& context, Action& action) {
  auto* verb = program.add_subcommand("sources", "every constant used for a species, and where it came from");
  verb->fallthrough();
  auto subject = std::make_shared<std::string>();
  verb->add_option("SPECIES", *subject, "an ion, solid, gas or salt: Ni^2+, H3BO3, CaSO4.2H2O")->required();
  verb->footer("Example: bathwright sources HSO4^-\n");
  verb->callback(
      [&context, &action, subject] { action = [&context, subject] { return run(context, *subject); }; });
}

}  // namespace bathwright::command
