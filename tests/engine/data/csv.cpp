#include <array>
#include <bathwright/data/csv.hpp>
#include <catch2/catch.hpp>
#include <cmath>

using bathwright::data::CsvTable;

namespace {

const std::array<std::string_view, 1> value_is_numeric{"value"};

std::string refusal(std::string_view content) {
  const auto table = CsvTable::read("salts.csv", content, value_is_numeric);
  REQUIRE_FALSE(table);
  return text(table.problems());
}

}  // namespace

TEST_CASE("a table gives its fields by column name", "[unit]") {
  const auto table = CsvTable::read("salts.csv", "salt,value\nNaCl,0.0765\nKCl,0.04835\n", value_is_numeric);
  REQUIRE(table);
  REQUIRE(table->size() == 2);
  CHECK(table->columns() == std::vector<std::string>{"salt", "value"});
  CHECK((*table)[1]["salt"] == "KCl");
  CHECK((*table)[1].number("value") == 0.04835);
  CHECK((*table)[1]["no such column"].empty());
}

TEST_CASE("numbers are read with sign and exponent, and an empty one is NaN", "[unit]") {
  const auto table = CsvTable::read("salts.csv", "value\n-6.213e-05\n+2\n1E3\n\"\"\n", value_is_numeric);
  REQUIRE(table);
  CHECK((*table)[0].number("value") == -6.213e-05);
  CHECK((*table)[1].number("value") == 2);
  CHECK((*table)[2].number("value") == 1000);
  CHECK(std::isnan((*table)[3].number("value")));
}

TEST_CASE("quoted fields hold commas and doubled quotes", "[unit]") {
  const auto table = CsvTable::read("salts.csv", "salt,note\n\"NaCl, dry\",\"called \"\"halite\"\"\"\n");
  REQUIRE(table);
  CHECK((*table)[0]["salt"] == "NaCl, dry");
  CHECK((*table)[0]["note"] == "called \"halite\"");
}

TEST_CASE("comment and blank lines are skipped but counted, and line ends may be CR LF", "[unit]") {
  const auto table =
      CsvTable::read("salts.csv", "# units: mol/kg\r\nsalt,value\r\n\n# halite\r\nNaCl,6.1\r\n");
  REQUIRE(table);
  REQUIRE(table->size() == 1);
  CHECK((*table)[0]["value"] == "6.1");
  CHECK((*table)[0].where() == "salts.csv:5");
}

TEST_CASE("the last line needs no line end", "[unit]") {
  const auto table = CsvTable::read("salts.csv", "salt,value\nNaCl,6.1");
  REQUIRE(table);
  CHECK((*table)[0]["value"] == "6.1");
}

TEST_CASE("a refused table names file and line, what stands there and what should", "[failure]") {
  struct Case {
    const char* content;
    const char* where;
    const char* what;
  };
  for (const Case& bad : {
           Case{"", "salts.csv", "the table is empty"},
           Case{"# only a comment\n", "salts.csv", "the table is empty"},
           Case{"salt,amount\nNaCl,1\n", "salts.csv:1", "the column value is missing"},
           Case{"salt,value\nNaCl\n", "salts.csv:2", "1 fields"},
           Case{"salt,value\n# note\nNaCl,1,2\n", "salts.csv:3", "3 fields"},
           Case{"salt,value\n\"NaCl,1\n", "salts.csv:2", "a quote is opened and not closed"},
           Case{"salt,value\nNaCl,0.1.2\n", "salts.csv:2", "value is '0.1.2'"},
           Case{"salt,value\nNaCl,\"0,1\"\n", "salts.csv:2", "value is '0,1'"},
           Case{"salt,value\nNaCl, 1\n", "salts.csv:2", "value is ' 1'"},
           Case{"salt,value\nNaCl,nan\n", "salts.csv:2", "value is 'nan'"},
           Case{"salt,value\nNaCl,inf\n", "salts.csv:2", "value is 'inf'"},
           Case{"salt,value\nNaCl,1e999\n", "salts.csv:2", "value is '1e999'"},
       }) {
    INFO(bad.content);
    const std::string message = refusal(bad.content);
    CHECK_THAT(message, Catch::Matchers::StartsWith(std::string(bad.where) + ": "));
    CHECK_THAT(message, Catch::Matchers::Contains(bad.what));
  }
}

TEST_CASE("every problem of a table is reported, not only the first", "[failure]") {
  const auto table = CsvTable::read("salts.csv", "salt,value\nNaCl\nKCl,x\n", value_is_numeric);
  REQUIRE_FALSE(table);
  REQUIRE(table.problems().size() == 2);
  CHECK(table.problems()[0].where == "salts.csv:2");
  CHECK(table.problems()[1].where == "salts.csv:3");
}

TEST_CASE("a field may hold a list", "[unit]") {
  const auto table = CsvTable::read("t.csv", "id,parts\n1,a|b c|d\n2,\n3,one\n");
  REQUIRE(table);
  CHECK((*table)[0].list("parts") == std::vector<std::string>{"a", "b c", "d"});
  CHECK((*table)[1].list("parts").empty());
  CHECK((*table)[2].list("parts") == std::vector<std::string>{"one"});
}
