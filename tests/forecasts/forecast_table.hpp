// The demonstration policies run as they stand, and what a plater would say to their dates.
#pragma once

#include <optional>
#include <string>
#include <vector>

namespace forecast_table {

/// A row of believed.csv: when a by-product should reach its limit. Both days empty: not within the horizon.
struct Expected {
  std::string policy, subject;
  std::optional<double> from_day, to_day;
  std::string reason;
};
[[nodiscard]] std::vector<Expected> expected();

/// Names of baths/policies/*.toml, sorted.
[[nodiscard]] std::vector<std::string> policies();

/// What the forecast says of one of them.
struct Row {
  Expected expected;
  std::string tank, label, date, brought_by;
  double start_g_per_L = 0, end_g_per_L = 0, limit_g_per_L = 0;  ///< limit NaN: none
  std::optional<double> day, turnovers;                          ///< it is met, and how old the bath is then
  int horizon_days = 0;
  std::string ended;  ///< why the run ended before its horizon
  [[nodiscard]] bool believed() const;
};

/// Rows of one policy. Throws std::runtime_error where one of the project's own files cannot be used.
[[nodiscard]] std::vector<Row> rows_of(const std::string& policy);

[[nodiscard]] std::string markdown(const std::vector<Row>& rows);

}  // namespace forecast_table
