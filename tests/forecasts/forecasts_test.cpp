// Every policy is judged, and says what a plater expects. The whole table takes two seconds.
#include <algorithm>
#include <catch2/catch.hpp>

#include "forecast_table.hpp"

TEST_CASE("every demonstration policy has an expectation, and every expectation a policy", "[unit]") {
  const auto names = forecast_table::policies();
  const auto all = forecast_table::expected();
  for (const std::string& name : names) {
    INFO(name);
    CHECK(std::ranges::count(all, name, &forecast_table::Expected::policy) > 0);
  }
  for (const auto& one : all) {
    INFO(one.policy);
    CHECK(std::ranges::count(names, one.policy) == 1);
    CHECK_FALSE(one.reason.empty());
    CHECK(one.from_day.has_value() == one.to_day.has_value());
  }
}

TEST_CASE("by-products meet their limits when a plater expects it", "[reference]") {
  for (const std::string& policy : forecast_table::policies())
    for (const auto& row : forecast_table::rows_of(policy)) {
      INFO(policy << ", " << row.label << ", day " << row.day.value_or(-1) << ' ' << row.ended);
      CHECK(row.believed());
    }
}
