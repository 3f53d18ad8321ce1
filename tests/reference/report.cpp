#include "report.hpp"

#include <algorithm>
#include <bathwright/data/csv.hpp>
#include <cmath>
#include <cstdio>
#include <fstream>
#include <map>
#include <sstream>

#include "mixture.hpp"

namespace bathwright::reference {

namespace {

/// A column of fitted.csv or doubtful.csv by the id of the row.
std::map<std::string, std::string> by_row(const std::string& table, std::string_view column) {
  std::ifstream file(REFERENCE_DIR "/" + table);
  std::stringstream content;
  content << file.rdbuf();
  std::map<std::string, std::string> found;
  if (const auto rows = data::CsvTable::read(table, content.str()))
    for (std::size_t i = 0; i < rows->size(); ++i) found.emplace((*rows)[i]["id"], (*rows)[i][column]);
  return found;
}

}  // namespace

std::vector<Figure> read_figures(std::string_view table) {
  const std::string name(table);
  std::ifstream file(REFERENCE_DIR "/" + name + ".csv");
  std::stringstream content;
  content << file.rdbuf();
  constexpr std::string_view numeric[] = {"T_C", "value", "tolerance"};
  const auto rows = data::CsvTable::read(name + ".csv", content.str(), numeric);
  const auto doubtful = by_row("doubtful.csv", "reason");
  std::vector<Figure> figures;
  if (!rows) return figures;
  for (std::size_t i = 0; i < rows->size(); ++i) {
    const data::CsvRow row = (*rows)[i];
    figures.push_back({name, std::string(row["id"]), std::string(row["system"]),
                       std::string(row["conditions"]), std::string(row["quantity"]), std::string(row["unit"]),
                       row.number("T_C"), row.number("value"), row.number("tolerance"),
                       row["from_memory"] == "yes", doubtful.contains(std::string(row["id"]))});
  }
  return figures;
}

bool Line::inside() const { return covered() && error_in_tolerances() <= 1; }

double Line::error_in_tolerances() const {
  return std::abs(*computed.value - figure.published) / figure.tolerance;
}

bool Line::silent() const {
  if (!covered() || error_in_tolerances() <= silent_from) return false;
  return std::abs(*computed.value - figure.published) > silent_from * computed.u.value_or(0);
}

namespace {

bool dilute(const Figure& figure) {
  const Recipe recipe = read_recipe(figure.conditions, figure.system);
  const auto mixture = mix(recipe, figure.t_C, activity::ModelKind::davies);
  if (recipe.empty() || !mixture) return false;
  const auto answer = mixture->solver->solve(mixture->task);
  return answer && answer->ionic_strength <= dilute_molal;
}

}  // namespace

std::vector<Line> compare_all() {
  using activity::ModelKind;
  struct Table {
    const char* name;
    Computed (*compute)(const Figure&, ModelKind);
    bool with_davies;
  };
  constexpr Table tables[] = {
      {"mean_activity", compute_activity, true},
      {"osmotic", compute_activity, true},
      {"mixed", compute_activity, false},
      {"isopiestic", compute_isopiestic, false},
      {"vapour", compute_vapour, false},
      {"ph", compute_pH, true},
      {"supplement_ph", compute_pH, true},
      {"solubility", compute_solubility, false},
      {"supplement_solubility", compute_solubility, false},
  };
  std::vector<Line> lines;
  for (const Table& table : tables)
    for (const Figure& figure : read_figures(table.name)) {
      lines.push_back({figure, ModelKind::pitzer, table.compute(figure, ModelKind::pitzer)});
      if (table.with_davies && dilute(figure))
        lines.push_back({figure, ModelKind::davies, table.compute(figure, ModelKind::davies)});
    }
  const auto fitted = by_row("fitted.csv", "number");
  for (Line& line : lines)
    if (const auto number = fitted.find(line.figure.id); number != fitted.end())
      line.computed.not_covered = "fitted: " + number->second + " was regressed from this row";
  return lines;
}

namespace {

std::string number(double value) {
  char text[32];
  std::snprintf(text, sizeof text, "%.5g", value);
  return text;
}

std::string two_digits(double value) {
  char text[32];
  std::snprintf(text, sizeof text, "%.2g", value);
  return text;
}

std::string verdict(const Line& line) {
  if (!line.covered()) return "not covered: " + line.computed.not_covered;
  if (line.silent()) return line.figure.advisory() ? "outside, silent, advisory" : "outside, silent";
  return line.inside() ? "inside" : "outside";
}

void write_row(std::ostringstream& out, const Line& line) {
  const Figure& f = line.figure;
  out << "| " << f.id << " | " << f.system << " | " << f.conditions << " | " << f.t_C << " | " << f.quantity
      << " | " << number(f.published) << " | ";
  if (line.computed.value)
    out << number(*line.computed.value) << " | "
        << number(100 * (*line.computed.value - f.published) / std::abs(f.published)) << " | ";
  else
    out << " | | ";
  if (line.computed.value && line.computed.u) out << two_digits(*line.computed.u);
  out << " | " << number(f.tolerance) << " | " << verdict(line) << " | " << activity::name(line.model)
      << " | " << line.computed.note << " |\n";
}

constexpr std::string_view head =
    "| id | system | conditions | degC | quantity | published | computed | error % | u | tolerance | verdict | model "
    "| note |\n|---|---|---|---|---|---|---|---|---|---|---|---|---|\n";

}  // namespace

std::string markdown(const std::vector<Line>& lines) {
  std::ostringstream out;
  out << "# Computed against published figures\n\nWritten by the target `reference_report`; do not edit. The "
         "sources stand in the tables, the reasons of the misses in `README.md`. \"Not covered\" rows are not "
         "judged; a value among them is shown for interest.\n\n"
         "| table | model | rows | inside | outside | not covered |\n|---|---|---|---|---|---|\n";
  struct Count {
    int rows = 0, inside = 0, outside = 0;
  };
  std::map<std::pair<std::string, std::string_view>, Count> counts;
  std::vector<const Line*> outside;
  for (const Line& line : lines) {
    Count& count = counts[{line.figure.table, activity::name(line.model)}];
    ++count.rows;
    count.inside += line.inside();
    if (line.covered() && !line.inside()) ++count.outside, outside.push_back(&line);
  }
  for (const auto& [key, c] : counts)
    out << "| " << key.first << " | " << key.second << " | " << c.rows << " | " << c.inside << " | "
        << c.outside << " | " << c.rows - c.inside - c.outside << " |\n";
  std::stable_sort(outside.begin(), outside.end(), [](const Line* a, const Line* b) {
    return a->error_in_tolerances() > b->error_in_tolerances();
  });
  const auto count = [&](auto which) { return std::count_if(outside.begin(), outside.end(), which); };
  const auto far = count([](const Line* line) { return line->error_in_tolerances() > silent_from; });
  const auto silent = count([](const Line* line) { return line->silent(); });
  const auto advisory = count([](const Line* line) { return line->silent() && line->figure.advisory(); });
  out << "\n`u` is the standard uncertainty that the engine states of the value. Called valid and more than "
      << silent_from << " tolerances outside: " << far << ". Silent wrong answers, of these more than "
      << silent_from << " u outside as well: " << silent - advisory << "; and " << advisory
      << " against rows that are advisory, recalled or doubtful themselves (`doubtful.csv`).\n";
  out << "\n## Outside the tolerance, worst first\n\n" << head;
  for (const Line* line : outside) write_row(out, *line);
  out << "\n## All rows\n\n" << head;
  for (const Line& line : lines) write_row(out, line);
  return std::move(out).str();
}

}  // namespace bathwright::reference
