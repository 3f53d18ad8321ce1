#include <array>
#include <bathwright/data/csv.hpp>
#include <cmath>

#include "promises.hpp"

using bathwright::data::CsvRow;
using bathwright::data::CsvTable;

fuzz::BrokenPromise fuzz::csv_table(std::string_view input) {
  constexpr std::array<std::string_view, 1> numeric = {"value"};
  const auto table = CsvTable::read("table.csv", input, numeric);
  if (!table) return in_words(table.problems(), "table.csv", input);
  for (std::size_t i = 0; i < table->size(); ++i) {
    const CsvRow row = (*table)[i];
    if (!row.where().starts_with("table.csv:")) return "a row without its line";
    if (std::isinf(row.number("value")) || std::isnan(row.number("value")) != row["value"].empty())
      return "a value that is neither a number nor nothing, at " + row.where();
    for (const std::string& column : table->columns()) {
      if (row[column].size() > input.size()) return "a field longer than the text, at " + row.where();
    }
    if (!row["no such column"].empty() && input.find("no such column") == input.npos)
      return "a field from nowhere";
  }
  return {};
}
