#include <bathwright/sheets/table.hpp>
#include <catch2/catch.hpp>

using namespace bathwright::sheets;

TEST_CASE("numbers stand with their decimal marks in one column", "[unit][sheets]") {
  Table table({{"ion"}, {"mol/kg", Align::number}});
  table.add({"Ni²⁺", "1.25"});
  table.add({"H⁺", "10"});
  table.add({"Cl⁻", "0.125"});
  CHECK(table.lines() == Lines{"  ion   mol/kg", "  Ni²⁺   1.25", "  H⁺    10", "  Cl⁻    0.125"});
}

TEST_CASE("the last column wraps under itself", "[unit][sheets]") {
  Table table({{"a"}, {"words"}});
  std::string words;
  for (int i = 0; i < 30; ++i) words += "word ";
  table.add({"x", words});
  const Lines lines = table.lines();
  REQUIRE(lines.size() == 3);
  CHECK(lines[2].starts_with("     word"));
  for (const std::string& line : lines) CHECK(columns(line) <= width);
}

TEST_CASE("text wraps between words and a long word is cut", "[unit][sheets]") {
  Lines lines;
  say(lines, "  " + std::string(100, 'x') + " end", 2);
  REQUIRE(lines.size() == 2);
  CHECK(columns(lines[0]) == width);
  CHECK(lines[1] == "    " + std::string(22, 'x') + " end");
}
