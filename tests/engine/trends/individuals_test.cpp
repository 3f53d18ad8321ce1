#include <bathwright/trends/individuals.hpp>
#include <bathwright/trends/statistics.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <vector>

using namespace bathwright::trends;

// NIST/SEMATECH e-Handbook of Statistical Methods, 6.3.2.2, Individuals Control Charts: flow rates of ten
// batches with the limits printed there (from memory; mean and ranges were added up again by hand).
TEST_CASE("limits of the handbook's ten batches", "[reference][trends]") {
  const std::vector<double> rates{49.6, 47.6, 49.9, 51.3, 47.8, 51.2, 52.6, 52.4, 53.6, 52.1};
  const auto chart = individuals(rates);
  REQUIRE(chart);
  CHECK(chart->mean == Approx(50.81).margin(0.005));
  CHECK(chart->mean_moving_range == Approx(1.8778).margin(0.00005));
  CHECK(chart->high == Approx(55.8041).margin(0.00005));
  CHECK(chart->low == Approx(45.8159).margin(0.00005));
  CHECK(chart->moving_range_high == Approx(3.267 * 1.8778).margin(0.0005));
}

TEST_CASE("the factors are those of ranges of two", "[unit][trends]") {
  // Mean range 1 by steps of one.
  const auto chart = individuals(std::vector<double>{0, 1, 0, 1, 0});
  REQUIRE(chart);
  CHECK(chart->high - chart->mean == Approx(2.660).margin(0.0005));
  CHECK(chart->sigma == Approx(std::sqrt(std::acos(-1.0)) / 2).epsilon(0.001));
}

TEST_CASE("too few values and none are told", "[failure][trends]") {
  CHECK_FALSE(individuals(std::vector<double>{1}));
  CHECK_FALSE(individuals(std::vector<double>{1, NAN, 2}));
}

// NIST/SEMATECH e-Handbook, 6.1.6: limits 8 and 20, mean 16, s 2 give 0.6667 (from memory).
TEST_CASE("capability looks at the nearer limit", "[reference][trends]") {
  CHECK(capability(16, 2, 8, 20).value() == Approx(0.6667).margin(0.00005));
  CHECK(capability(16, 2, 8, std::nullopt).value() == Approx(1.3333).margin(0.00005));
  CHECK(capability(21, 2, 8, 20).value() < 0);
  CHECK_FALSE(capability(16, 2, std::nullopt, std::nullopt));
  CHECK_FALSE(capability(16, 0, 8, 20));
}

TEST_CASE("precision of samples that were analysed twice", "[unit][trends]") {
  // d = 1, -1, 2: sqrt((1 + 1 + 4) / 6) = 1
  const std::vector<std::pair<double, double>> pairs{{10, 9}, {20, 21}, {30, 28}};
  CHECK(precision_of(pairs).value() == Approx(1));
  CHECK_FALSE(precision_of({}));
}

TEST_CASE("a drift resembles itself, a saw does not", "[unit][trends]") {
  CHECK(resemblance(std::vector<double>{1, 2, 3, 4, 5, 6, 7, 8}).value() > 0.6);
  CHECK(resemblance(std::vector<double>{1, 2, 1, 2, 1, 2, 1, 2}).value() < -0.8);
  CHECK_FALSE(resemblance(std::vector<double>{1, 1, 1}));
}
