// The scenarios through the program, and the report of them as it stands in the tree.
#include <catch2/catch.hpp>

#include "scenario_table.hpp"

using scenario_table::Figure;

TEST_CASE("the program finds every figure of the scenarios", "[reference][scenarios]") {
  int told = 0;
  for (const Figure& figure : scenario_table::figures()) {
    if (figure.run.empty()) continue;
    INFO(figure.scenario << ", " << figure.label << ": " << figure.found << " " << figure.unit << ", by hand "
                         << figure.by_hand << ", better " << figure.better);
    CHECK(figure.ok());
    ++told;
  }
  CHECK(told >= 25);
}

TEST_CASE("a place in a document is found, or nothing is", "[unit][scenarios]") {
  const auto document = nlohmann::json::parse(R"({"a": [{"id": "x", "v": 1}, {"id": "y", "v": [2, 3]}]})");
  CHECK(scenario_table::at(document, "a/id=x/v") == 1);
  CHECK(scenario_table::at(document, "a/id=y/v/last") == 3);
  CHECK(scenario_table::at(document, "a/#") == 2);
  CHECK(scenario_table::at(document, "a/id=z/v").is_null());
  CHECK(scenario_table::at(document, "a/7").is_null());
}
