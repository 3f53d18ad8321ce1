// The growth rule of the plugin interface: both sides may know longer structs than the other.
#pragma once

#include <bathwright_plugin.h>

#include <algorithm>
#include <cstring>
#include <vector>

#include "report.hpp"

namespace bathwright::plugin_host {

/// How many rows a table may have, and how long a row was in version 1.0.
struct RowLimits {
  std::size_t smallest_row;  ///< bytes
  std::uint32_t least = 0, most = 64;
};

inline constexpr std::size_t largest_row = 4096;

/// The first min(stated_size, sizeof(Row)) bytes over a row of "not given".
template <class Row>
Row copy_row(const void* stated, std::size_t stated_size, const Row& not_given) {
  Row row = not_given;
  std::memcpy(&row, stated, std::min(stated_size, sizeof(Row)));
  return row;
}

/// A plugin's table in the host's rows; empty, with a problem reported, where its sizes cannot be right.
template <class Row>
std::vector<Row> copy_rows(const char* table, const bw_rows& stated, const RowLimits& limits, Report& report,
                           const Row& not_given = {}) {
  const auto wrong = [&](std::string what, std::string expected) {
    report.add({table, 0, table}, std::move(what), std::move(expected));
    return std::vector<Row>{};
  };
  if (stated.count < limits.least || stated.count > limits.most)
    return wrong(std::to_string(stated.count) + " rows",
                 std::to_string(limits.least) + " to " + std::to_string(limits.most));
  if (stated.count == 0) return {};
  if (!stated.first) return wrong(std::to_string(stated.count) + " rows, but none are there", "a pointer");
  if (stated.row_size < limits.smallest_row || stated.row_size > largest_row || stated.row_size % 8 != 0)
    return wrong("rows of " + std::to_string(stated.row_size) + " bytes",
                 "sizeof(row): at least " + std::to_string(limits.smallest_row) + " bytes, a multiple of 8");
  std::vector<Row> rows(stated.count);
  const auto* first = static_cast<const std::byte*>(stated.first);
  for (std::size_t i = 0; i < rows.size(); ++i)
    rows[i] = copy_row<Row>(first + i * stated.row_size, stated.row_size, not_given);
  return rows;
}

}  // namespace bathwright::plugin_host
