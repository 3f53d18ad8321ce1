// A plain table: a head, numbers aligned on the decimal mark, words to the left, the last column of words
// wrapped.
#pragma once

#include <bathwright/sheets/text.hpp>
#include <cassert>

namespace bathwright::sheets {

enum class Align { words, number };

struct Column {
  std::string head;  ///< with the unit: "found g/L"
  Align align = Align::words;
};

class Table {
 public:
  explicit Table(std::vector<Column> columns) : columns_(std::move(columns)) {}

  /// One cell per column; "" leaves it blank.
  void add(std::vector<std::string> cells) {
    assert(cells.size() == columns_.size());
    rows_.push_back(std::move(cells));
  }
  [[nodiscard]] bool empty() const { return rows_.empty(); }
  [[nodiscard]] const std::vector<Column>& heads() const { return columns_; }
  [[nodiscard]] const std::vector<std::vector<std::string>>& rows() const { return rows_; }

  /// Indented by two; wrapped in the last column where the page is too narrow.
  [[nodiscard]] Lines lines() const;

 private:
  std::vector<Column> columns_;
  std::vector<std::vector<std::string>> rows_;
};

}  // namespace bathwright::sheets
