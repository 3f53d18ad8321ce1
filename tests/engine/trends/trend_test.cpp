#include <bathwright/trends/trend.hpp>
#include <catch2/catch.hpp>
#include <cmath>

using namespace bathwright::trends;

namespace {

/// A level that is let fall and brought back, as predicted; the last is off what was to be expected.
std::vector<Point> corrected_bath(double last_off) {
  std::vector<Point> points;
  constexpr double noise[] = {0.2, -0.3, 0.1, 0.3, -0.1, -0.2, 0.2, 0.1, -0.2, -0.1};
  for (std::size_t i = 0; i < 20; ++i) {
    const double expected = 70 + 5 * std::sin(static_cast<double>(i));
    points.push_back(
        {static_cast<double>(i), expected + noise[i % 10], expected, static_cast<std::int64_t>(i + 1)});
  }
  points.back().value += last_off;
  return points;
}

bool tells(const std::optional<ControlChart>& chart, const std::string& rule) {
  for (const Finding& finding : chart->findings)
    if (finding.rule == rule) return true;
  return false;
}

}  // namespace

TEST_CASE("what the additions explain is not in the residual", "[unit][trends]") {
  const auto quiet = trend_of(corrected_bath(0), {60.0, 80.0});
  REQUIRE(quiet);
  REQUIRE(quiet->residual);
  CHECK(quiet->residual->findings.empty());
  CHECK(quiet->residual->limits.sigma < 0.2 * quiet->found->limits.sigma);
  CHECK(quiet->capability.value() > 0);
  const auto off = trend_of(corrected_bath(3), {60.0, 80.0});
  REQUIRE(off);
  CHECK(tells(off->residual, "Western Electric 1, Nelson 1"));
  CHECK(tells(off->residual, "moving range"));
  CHECK(off->residual->findings.back().points == std::vector<std::size_t>{19});
}

TEST_CASE("a chart waits for values, and a residual for predictions", "[unit][trends]") {
  auto points = corrected_bath(0);
  for (std::size_t i = 0; i < 13; ++i) points[i].predicted.reset();
  const auto trend = trend_of(points, {});
  REQUIRE(trend);
  CHECK(trend->found);
  CHECK_FALSE(trend->residual);  // seven
  CHECK_FALSE(trend->capability);
  points.resize(7);
  CHECK_FALSE(trend_of(points, {})->found);
  points.back().value = NAN;
  points.push_back({8, 1});
  CHECK_FALSE(trend_of(points, {}));
}

TEST_CASE("a drift is told to resemble itself", "[unit][trends]") {
  std::vector<Point> points;
  for (int i = 0; i < 20; ++i) points.push_back({1.0 * i, 1.0 * i + (i % 2 ? 0.3 : -0.3)});
  CHECK(resembles(*trend_of(points, {})));
  for (int i = 0; i < 20; ++i) points[static_cast<std::size_t>(i)].value = i % 2 ? 1 : -1;
  CHECK_FALSE(resembles(*trend_of(points, {})));
}
