#include <fmt/format.h>

#include <algorithm>
#include <bathwright/shifts/time_zone.hpp>
#include <bathwright/shopfiles/analysis_columns.hpp>
#include <bathwright/units/read.hpp>
#include <set>

#include "delimited_text.hpp"
#include "level_unit.hpp"
#include "replace_file.hpp"
#include "sampled_time.hpp"
#include "schema.hpp"

namespace bathwright::shopfiles {
namespace {

/// Asks for one of a few words; nothing where it is not there or not good.
template <class Value>
std::optional<Value> choice(Table& table, const Key& key,
                            const std::vector<std::pair<std::string, Value>>& choices) {
  const std::string written = table.text(key);
  if (table.reported(key.name) || !table.has(key.name)) return {};
  std::vector<std::string> words;
  for (const auto& [word, value] : choices) {
    if (word == written) return value;
    words.push_back('"' + word + '"');
  }
  table.report(key.name, "is \"" + printable(written) + '"', fmt::format("{}", fmt::join(words, " or ")));
  return {};
}

std::string read_heading(Table& table, const Key& key) { return on_one_line(table.text(key)); }

std::optional<UnitColumn> read_unit_column(Table& root, const Key& key) {
  auto table = root.table(key);
  if (!table) return {};
  return UnitColumn{read_heading(*table, {"column", required, "\"Temp\""}),
                    table->text({"unit", required, "\"degC\""})};
}

/// Whether a number in this unit is one the reader takes.
template <class T>
void check_unit(const std::optional<UnitColumn>& column,
                Result<T> (*read)(std::string_view, std::string_view), Problems& problems) {
  if (!column) return;
  const auto one = read("1 " + column->unit, "column '" + column->heading + "': unit");
  if (!one) problems.insert(problems.end(), one.problems().begin(), one.problems().end());
}

/// A text of TOML: quotes and backslashes escaped. Headings and units are on one line.
std::string quoted(std::string_view text) {
  std::string written = "\"";
  for (const char c : text) {
    if (c == '"' || c == '\\') written += '\\';
    written += c;
  }
  return written + '"';
}

}  // namespace

Problems check(const AnalysisColumns& columns) {
  Problems problems;
  const auto report = [&](std::string where, std::string what, std::string expected, std::string mend = {}) {
    problems.push_back(
        {Fault::bad_input, std::move(where), std::move(what), std::move(expected), std::move(mend)});
  };
  const auto add = [&](const Problems& more) { problems.insert(problems.end(), more.begin(), more.end()); };

  if (const auto zone = shifts::TimeZone::find(columns.zone, "zone"); !zone) add(zone.problems());
  if (columns.delimiter && std::ranges::count(delimiters, *columns.delimiter) == 0)
    report("delimiter", "is none that is known", "comma, semicolon or tab");
  if (columns.decimal_sign != '.' && columns.decimal_sign != ',')
    report("decimal", "is no decimal sign", "a point or a comma");

  std::set<std::string> headings, quantities;
  const auto use = [&](const std::string& heading, const char* role, bool is_required) {
    if (heading.empty() && is_required) report(role, "has no column", "a heading of the file");
    if (!heading.empty() && !headings.insert(heading).second)
      report(role, "is read from the column '" + printable(heading) + "', as something else is",
             "a column for each");
  };
  use(columns.tank, "tank", true);
  use(columns.sampled, "sampled", true);
  use(columns.time, "time", false);
  use(columns.pH, "pH", false);
  if (columns.temperature) use(columns.temperature->heading, "temperature", true);
  if (columns.volume) use(columns.volume->heading, "volume", true);
  check_unit(columns.temperature, units::read_temperature, problems);
  check_unit(columns.volume, units::read_volume, problems);
  for (const QuantityColumn& column : columns.quantities) {
    const std::string where = "column '" + printable(column.heading) + '\'';
    use(column.heading, "quantity", true);
    if (column.quantity.empty()) {
      report(where + ": quantity", "is missing", "as the bath type names it, such as Ni^2+");
    } else if (!quantities.insert(column.quantity).second) {
      report(where + ": quantity", "is " + printable(column.quantity) + ", which another column gives",
             "one column for each quantity");
    }
    if (const auto unit = LevelUnit::of(column.quantity, column.unit, where + ": unit"); !unit)
      add(unit.problems());
  }
  if (columns.quantities.empty() && columns.pH.empty() && !columns.temperature && !columns.volume)
    report("", "no column holds anything measured", "at least one quantity, or pH, temperature or volume");
  return problems;
}

Result<AnalysisColumns> read_columns_text(std::string_view name, std::string_view text) {
  auto tree = parse_toml(name, text);
  if (!tree) return tree.problems();
  Document file(name, *std::move(tree));
  Table root = file.root();
  AnalysisColumns columns;
  std::vector<std::pair<std::string, DateOrder>> orders;
  for (const DateOrder order :
       {DateOrder::day_month_year, DateOrder::month_day_year, DateOrder::year_month_day})
    orders.emplace_back(shopfiles::name(order), order);
  columns.dates = choice(root, {"dates", required, R"("d.m.y")"}, orders).value_or(columns.dates);
  columns.decimal_sign =
      choice<char>(root, {"decimal", required, R"(",")"}, {{".", '.'}, {",", ','}}).value_or('.');
  columns.delimiter =
      choice<char>(root, {"delimiter", optional, R"(";")"}, {{",", ','}, {";", ';'}, {"tab", '\t'}});
  columns.zone = root.text({"zone", required, R"("Europe/Berlin")"});
  columns.tank = read_heading(root, {"tank", required, R"("Tank")"});
  columns.sampled = read_heading(root, {"sampled", required, R"("Date")"});
  columns.time = read_heading(root, {"time", optional, R"("Time")"});
  columns.pH = read_heading(root, {"pH", optional, R"("pH")"});
  columns.temperature =
      read_unit_column(root, {"temperature", optional, R"({ column = "Temp", unit = "degC" })"});
  columns.volume = read_unit_column(root, {"volume", optional, R"({ column = "Volume", unit = "L" })"});
  for (Table& entry : root.tables({"quantity", optional, "[[quantity]]"})) {
    columns.quantities.push_back({read_heading(entry, {"column", required, R"("Ni g/L")"}),
                                  entry.text({"quantity", required, R"("Ni^2+")"}),
                                  entry.text({"unit", required, R"("g/L")"})});
  }
  auto read = file.conclude(std::move(columns));
  if (!read) return read;
  Problems problems = check(*read);
  for (Problem& problem : problems)
    problem.where = std::string(name) + (problem.where.empty() ? "" : ": " + problem.where);
  if (!problems.empty()) return problems;
  return read;
}

Result<AnalysisColumns> read_columns(const std::string& path) {
  const auto text = read_text_file(path);
  if (!text) return text.problems();
  return read_columns_text(path, *text);
}

std::string columns_text(const AnalysisColumns& columns) {
  std::string text = "# How a laboratory's CSV file of analyses is read; baths/README.md lists the keys.\n";
  const auto line = [&](const char* key, const std::string& value) {
    if (!value.empty()) text += fmt::format("{} = {}\n", key, quoted(value));
  };
  const auto with_unit = [&](const char* key, const std::optional<UnitColumn>& column) {
    if (column)
      text += fmt::format("{} = {{ column = {}, unit = {} }}\n", key, quoted(column->heading),
                          quoted(column->unit));
  };
  line("dates", std::string(name(columns.dates)));
  line("decimal", std::string(1, columns.decimal_sign));
  if (columns.delimiter)
    line("delimiter", *columns.delimiter == '\t' ? "tab" : std::string(1, *columns.delimiter));
  line("zone", columns.zone);
  line("tank", columns.tank);
  line("sampled", columns.sampled);
  line("time", columns.time);
  line("pH", columns.pH);
  with_unit("temperature", columns.temperature);
  with_unit("volume", columns.volume);
  for (const QuantityColumn& column : columns.quantities)
    text += fmt::format("\n[[quantity]]\ncolumn = {}\nquantity = {}\nunit = {}\n", quoted(column.heading),
                        quoted(column.quantity), quoted(column.unit));
  return text;
}

Outcome write_columns(const std::string& path, const AnalysisColumns& columns) {
  const std::string text = columns_text(columns);
  const auto back = read_columns_text(path, text);  // what cannot be read again is not written
  if (!back) return back.problems();
  return replace_file(path, text);
}

}  // namespace bathwright::shopfiles
