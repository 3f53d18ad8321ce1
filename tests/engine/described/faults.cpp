// Every fault of a bath type in TOML is refused at its line.
#include <algorithm>

#include "small_bath.hpp"

using namespace bathwright;

namespace {

/// The text with the first `from` in it replaced by `to`.
std::string spoilt(const std::string& from, const std::string& to) {
  std::string text = small_bath;
  const std::size_t at = text.find(from);
  REQUIRE(at != std::string::npos);
  return text.replace(at, from.size(), to);
}

}  // namespace

TEST_CASE("the small bath type is sound", "[unit][described]") {
  const auto type = read_small(small_bath);
  INFO((type ? "" : text(type.problems())));
  REQUIRE(type);
  CHECK(type->id == "test-bath");
  CHECK(type->components[2].found_by == bath::FoundBy::charge);
  CHECK(type->quantities[1].formula.text() == "H2SO4");
  CHECK(type->own_species[0].constant.log10_K == -7.5);
  CHECK(type->own_species[0].constant.uncertainty == 0.2);
  CHECK(type->own_solids[0].max_C == 60);
  CHECK(type->uses[0].effects[0].g_per_unit == -0.1);
}

TEST_CASE("the example that people copy loads", "[unit][described]") {
  const auto type = described::read_bath_type_file(PROJECT_DIR "/plugins/described/example.bathtype.toml");
  INFO((type ? "" : text(type.problems())));
  REQUIRE(type);
  CHECK(type->validity.find("6 mol/kg, 15 to 40 degC, chloride") != std::string::npos);
  CHECK(type->indicators.size() == 3);
}

TEST_CASE("each fault is refused at its line", "[failure][described]") {
  struct Row {
    const char* from;
    const char* to;
    const char* where;
    const char* what;
  };
  const Row rows[] = {
      {"name = \"Test bath\"", "nam = \"Test bath\"", "small.bathtype.toml:2: nam",
       "is not a key of this table"},
      {"min_C = 10", "min_C = \"10\"", "small.bathtype.toml:8: min_C", "is not a number"},
      {"max_C = 70", "max_C = 7000", "small.bathtype.toml:9: max_C", "is out of range"},
  };
  for (const Row& row : rows) {
    INFO(row.from << " -> " << row.to);
    const auto type = read_small(spoilt(row.from, row.to));
    REQUIRE_FALSE(type);
    INFO(text(type.problems()));
    CHECK(std::ranges::any_of(type.problems(), [&](const Problem& p) {
      return p.where == row.where && p.what.find(row.what) != std::string::npos;
    }));
  }
}
