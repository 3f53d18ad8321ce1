#include <algorithm>
#include <bathwright/data/csv.hpp>
#include <charconv>
#include <cmath>
#include <limits>

namespace bathwright::data {
namespace {

/// Splits one logical line (quotes may hold commas; "" is a quote). False on an unclosed quote.
bool split(std::string_view line, std::vector<std::string>& fields) {
  fields.assign(1, {});
  bool quoted = false;
  for (std::size_t i = 0; i < line.size(); ++i) {
    const char c = line[i];
    if (quoted && c == '"' && i + 1 < line.size() && line[i + 1] == '"') {
      fields.back() += '"';
      ++i;
    } else if (c == '"') {
      quoted = !quoted;
    } else if (c == ',' && !quoted) {
      fields.emplace_back();
    } else {
      fields.back() += c;
    }
  }
  return !quoted;
}

bool reads_as_number(std::string_view text, double& value) {
  if (text.starts_with('+')) text.remove_prefix(1);
  const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), value);
  return error == std::errc{} && end == text.data() + text.size() && std::isfinite(value);
}

}  // namespace

std::string_view CsvRow::operator[](std::string_view column) const {
  const auto found = std::find(table_->columns_.begin(), table_->columns_.end(), column);
  if (found == table_->columns_.end()) return {};
  return table_->rows_[index_].fields[static_cast<std::size_t>(found - table_->columns_.begin())];
}

double CsvRow::number(std::string_view column) const {
  double value = 0;
  return reads_as_number((*this)[column], value) ? value : std::numeric_limits<double>::quiet_NaN();
}

std::vector<std::string> CsvRow::list(std::string_view column) const {
  std::string_view field = (*this)[column];
  std::vector<std::string> parts;
  while (!field.empty()) {
    const std::size_t bar = field.find('|');
    parts.emplace_back(field.substr(0, bar));
    field.remove_prefix(bar == field.npos ? field.size() : bar + 1);
  }
  return parts;
}

std::string CsvRow::where() const { return table_->name_ + ":" + std::to_string(table_->rows_[index_].line); }

Result<CsvTable> CsvTable::read(std::string name, std::string_view content,
                                std::span<const std::string_view> numeric) {
  CsvTable table;
  table.name_ = std::move(name);
  Problems problems;
  std::size_t line_number = 0;
  while (!content.empty()) {
    const std::size_t end = content.find('\n');
    std::string_view line = content.substr(0, end);
    content.remove_prefix(end == std::string_view::npos ? content.size() : end + 1);
    ++line_number;
    if (line.ends_with('\r')) line.remove_suffix(1);
    if (line.empty() || line.starts_with('#')) continue;
    const std::string where = table.name_ + ":" + std::to_string(line_number);
    std::vector<std::string> fields;
    if (!split(line, fields)) {
      problems.push_back({Fault::bad_input, where, "a quote is opened and not closed", "\"...\"", ""});
      continue;
    }
    if (table.columns_.empty()) {
      table.columns_ = std::move(fields);
      for (const std::string_view column : numeric)
        if (std::find(table.columns_.begin(), table.columns_.end(), column) == table.columns_.end())
          problems.push_back(
              {Fault::bad_input, where, "the column " + std::string(column) + " is missing", "", ""});
      continue;
    }
    if (fields.size() != table.columns_.size()) {
      problems.push_back({Fault::bad_input, where, std::to_string(fields.size()) + " fields",
                          std::to_string(table.columns_.size()) + " as in the header",
                          "Quote fields that hold a comma."});
      continue;
    }
    table.rows_.push_back({line_number, std::move(fields)});
    for (const std::string_view column : numeric) {
      const std::string_view field = CsvRow(table, table.rows_.size() - 1)[column];
      double value = 0;
      if (!field.empty() && !reads_as_number(field, value))
        problems.push_back({Fault::bad_input, where, std::string(column) + " is '" + std::string(field) + "'",
                            "a number or nothing", ""});
    }
  }
  if (table.columns_.empty())
    problems.push_back({Fault::bad_input, table.name_, "the table is empty", "a header row", ""});
  if (!problems.empty()) return problems;
  return table;
}

}  // namespace bathwright::data
