// Reads the comma-separated tables the constants live in: a header row, `#` comment lines, quoted fields.
// Not for: a shop's own CSV with unknown delimiters or decimal commas.
#pragma once

#include <bathwright/base/result.hpp>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::data {

/// One row, with access by column name. Views stay valid as long as the table.
class CsvTable;
class CsvRow {
 public:
  CsvRow(const CsvTable& table, std::size_t index) : table_(&table), index_(index) {}

  /// The field, or an empty view where the column does not exist or the field is empty.
  [[nodiscard]] std::string_view operator[](std::string_view column) const;
  /// The field as a number; NaN where it is empty. A field that is not a number was refused by CsvTable::read.
  [[nodiscard]] double number(std::string_view column) const;
  /// The parts of a field that holds a list, "a|b|c"; none where it is empty.
  [[nodiscard]] std::vector<std::string> list(std::string_view column) const;
  [[nodiscard]] std::string where() const;  ///< "file:line"

 private:
  const CsvTable* table_;
  std::size_t index_;
};

class CsvTable {
 public:
  /// Parses a whole table.
  ///   name     what to call it in messages ("pitzer_binary.csv")
  ///   content  the text
  ///   numeric  columns that must hold a finite number or nothing
  /// Fails with file and line on: no header, a row with too many or too few fields, an open quote, a missing
  /// numeric column, a numeric field that does not read as a finite number.
  static Result<CsvTable> read(std::string name, std::string_view content, std::span<const std::string_view> numeric = {});

  [[nodiscard]] std::size_t size() const { return rows_.size(); }
  [[nodiscard]] CsvRow operator[](std::size_t i) const { return {*this, i}; }
  [[nodiscard]] const std::vector<std::string>& columns() const { return columns_; }
  [[nodiscard]] const std::string& name() const { return name_; }

 private:
  friend class CsvRow;
  struct Row {
    std::size_t line;
    std::vector<std::string> fields;
  };
  std::string name_;
  std::vector<std::string> columns_;
  std::vector<Row> rows_;
};

}  // namespace bathwright::data
