// Rows of values made so that each trips one rule and no other: mean 0, sigma 1.
#include <bathwright/trends/run_rules.hpp>
#include <catch2/catch.hpp>

using namespace bathwright::trends;
using Row = std::vector<double>;
using Places = std::vector<std::size_t>;

namespace {

struct Made {
  const char* rule;
  Row values;
  Places points;
};

Row turned(Row values) {
  for (double& value : values) value = -value;
  return values;
}

Places from_to(std::size_t first, std::size_t last) {
  Places places;
  for (std::size_t i = first; i <= last; ++i) places.push_back(i);
  return places;
}

std::vector<Made> rows() {
  return {
      {"Western Electric 1, Nelson 1", {0.5, -0.5, 3.1, -0.2, 0.3}, {2}},
      {"Western Electric 2, Nelson 5", {0.3, 2.1, -0.4, 2.2, -0.3}, {1, 3}},
      {"Western Electric 3, Nelson 6", {-0.3, 1.1, 1.4, -0.2, 1.2, 1.3, -0.6}, {1, 2, 4, 5}},
      {"Western Electric 4", {-0.5, 0.3, 0.6, 0.2, 0.4, 0.3, 0.8, 0.2, 0.5, -0.1}, from_to(1, 8)},
      {"Western Electric 4, Nelson 2",
       {-0.5, 0.3, 0.6, 0.2, 0.4, 0.3, 0.8, 0.2, 0.5, 0.1, -0.1},
       from_to(1, 9)},
      {"Nelson 3", {0.5, -0.9, -0.6, -0.2, 0.1, 0.4, 0.9, 0.2}, from_to(1, 6)},
      {"Nelson 4",
       {0.5, -0.5, 0.4, -0.4, 0.6, -0.3, 0.2, -0.6, 0.5, -0.1, 0.4, -0.5, 0.3, -0.2},
       from_to(0, 13)},
      {"Nelson 7",
       {0.5, 0.4, -0.3, -0.5, 0.1, 0.2, -0.8, -0.2, 0.3, 0.9, -0.1, -0.4, 0.2, 0.6, -0.3},
       from_to(0, 14)},
      {"Nelson 8", {1.2, 1.5, -1.3, -1.1, 1.6, 1.2, -1.4, -1.8}, from_to(0, 7)},
  };
}

}  // namespace

TEST_CASE("each pattern trips its rule and no other, on either side", "[unit][trends]") {
  for (const Made& made : rows())
    for (const Row& values : {made.values, turned(made.values)}) {
      INFO(made.rule);
      const auto found = run_rules(values, 0, 1);
      REQUIRE(found.size() == 1);
      CHECK(found.front().rule == made.rule);
      CHECK(found.front().points == made.points);
    }
}

TEST_CASE("a pattern one point short trips nothing", "[unit][trends]") {
  for (Made made : rows()) {
    if (std::string(made.rule) == "Western Electric 4, Nelson 2")
      continue;  // that leaves eight, another rule
    INFO(made.rule);
    made.values.resize(made.points.back());
    CHECK(run_rules(made.values, 0, 1).empty());
  }
}

TEST_CASE("values at the border do not count", "[unit][trends]") {
  CHECK(run_rules(Row{3, -3}, 0, 1).empty());
  CHECK(run_rules(Row{2, 0, 2}, 0, 1).empty());
  CHECK(run_rules(Row{0.1, 0.2, 0.1, 0.3, 0, 0.2, 0.1, 0.2, 0.1}, 0, 1).empty());  // one on the mean
  CHECK(run_rules(Row{-0.9, -0.6, -0.2, -0.2, 0.4, 0.9}, 0, 1).empty());           // two alike do not rise
  CHECK(run_rules(Row{5, 6, 7}, 0, 0).empty());
}

TEST_CASE("what goes on is one finding; what comes again is another", "[unit][trends]") {
  const auto long_run = run_rules(Row(12, 0.5), 0, 1);
  REQUIRE(long_run.size() == 1);
  CHECK(long_run.front().points == from_to(0, 11));
  CHECK(long_run.front().what == "12 in a row above the mean");
  const auto twice = run_rules(Row{2.5, 2.5, 0, -0.1, 0.1, 2.5, 0, 2.5, 0, 2.5}, 0, 1);
  REQUIRE(twice.size() == 2);
  CHECK(twice[0].points == Places{0, 1});
  CHECK(twice[1].points == Places{5, 7, 9});
  // Down, then up again from the lowest point.
  const auto valley = run_rules(Row{0.9, 0.5, 0.2, -0.1, -0.5, -0.9, -0.6, -0.2, 0.1, 0.3, 0.6}, 0, 1);
  REQUIRE(valley.size() == 2);
  CHECK(valley[0].points == from_to(0, 5));
  CHECK(valley[1].points == from_to(5, 10));
}
