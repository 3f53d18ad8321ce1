// Helpers of the checks on the tables of constants: numbers in range, no row twice, words from a list.
#pragma once

#include <algorithm>
#include <bathwright/data/tables.hpp>
#include <catch2/catch.hpp>
#include <charconv>
#include <cmath>
#include <initializer_list>
#include <map>
#include <string>

namespace rows {

using bathwright::data::CsvRow;
using bathwright::data::CsvTable;

template <class Visit>
void each(const CsvTable& table, Visit visit) {
  for (std::size_t i = 0; i < table.size(); ++i) {
    INFO(table[i].where());
    visit(table[i]);
  }
}

/// The column, where it is filled, lies in [low, high].
inline void check_range(const CsvRow& row, std::string_view column, double low, double high) {
  const double value = row.number(column);
  if (std::isnan(value)) return;
  INFO(column << " = " << value);
  CHECK(value >= low);
  CHECK(value <= high);
}

inline void check_filled(const CsvRow& row, std::initializer_list<std::string_view> columns) {
  for (const std::string_view column : columns) {
    INFO(column);
    CHECK_FALSE(row[column].empty());
  }
}

inline void check_word(const CsvRow& row, std::string_view column,
                       std::initializer_list<std::string_view> words) {
  INFO(column << " = '" << row[column] << "'");
  CHECK(std::find(words.begin(), words.end(), row[column]) != words.end());
}

/// No two rows have the same key.
template <class Key>
void check_unique(const CsvTable& table, Key key) {
  std::map<std::string, std::string> seen;
  each(table, [&](const CsvRow& row) {
    const auto [first, fresh] = seen.emplace(key(row), row.where());
    INFO("'" << first->first << "' stands already in " << first->second);
    CHECK(fresh);
  });
}

/// The charge a name ends in: Ni^2+ is 2, Cl^- is -1, NH3 is 0.
inline int charge(std::string_view name) {
  const std::size_t caret = name.rfind('^');
  if (caret == std::string_view::npos) return 0;
  int size = 1;
  std::from_chars(name.data() + caret + 1, name.data() + name.size(), size);
  return name.back() == '-' ? -size : size;
}

}  // namespace rows
