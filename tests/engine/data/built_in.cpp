#include <algorithm>
#include <bathwright/data/tables.hpp>
#include <catch2/catch.hpp>

using namespace bathwright::data;

TEST_CASE("every built-in table can be read", "[unit]") {
  REQUIRE_FALSE(built_in_names().empty());
  for (const std::string_view name : built_in_names()) {
    const auto table = CsvTable::read(std::string(name), built_in_text(name));
    INFO((table ? std::string(name) : text(table.problems())));
    REQUIRE(table);
    CHECK(table->size() > 0);
  }
}

TEST_CASE("no built-in table names a column twice", "[unit]") {
  for (const std::string_view name : built_in_names()) {
    auto columns = built_in_table(name, {}).columns();
    std::sort(columns.begin(), columns.end());
    INFO(name);
    CHECK(std::adjacent_find(columns.begin(), columns.end()) == columns.end());
  }
}

TEST_CASE("the names of the built-in tables are sorted and unique", "[unit]") {
  const auto names = built_in_names();
  CHECK(std::adjacent_find(names.begin(), names.end(), std::greater_equal<>{}) == names.end());
}

TEST_CASE("a table that is not built in is empty text", "[unit][failure]") {
  CHECK(built_in_text("activity/no_such_table.csv").empty());
}

TEST_CASE("every row of the constants has a source and says whether it rests on memory", "[unit]") {
  for (const std::string_view name : built_in_names()) {
    if (!name.starts_with("activity/") && !name.starts_with("equilibria/")) continue;
    const CsvTable table = built_in_table(name, {});
    for (std::size_t i = 0; i < table.size(); ++i) {
      const std::string_view memory = table[i]["from_memory"];
      INFO(table[i].where() << ": from_memory '" << memory << "'");
      CHECK_FALSE(table[i]["source"].empty());
      CHECK((memory == "no" || memory == "partly" || memory == "yes"));
    }
  }
}
