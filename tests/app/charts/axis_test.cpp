#include <bathwright/charts/axis.hpp>
#include <catch2/catch.hpp>

using namespace bathwright::charts;

namespace {

std::string labels(const Axis& axis, int most) {
  std::string all;
  for (const Tick& tick : axis.ticks(most)) all += (all.empty() ? "" : " ") + tick.label;
  return all;
}

}  // namespace

TEST_CASE("ticks stand at steps of 1, 2 or 5 with as many decimals as they need", "[unit][charts]") {
  struct Row {
    Scale scale;
    double low, high;
    int most;
    const char* ticks;
  };
  const auto row = GENERATE(values<Row>({
      {Scale::linear, 0, 1, 5, "0.0 0.2 0.4 0.6 0.8 1.0"},
      {Scale::linear, 0, 100, 4, "0 50 100"},
      {Scale::linear, -0.03, 0.03, 4, "-0.02 0.00 0.02"},
      {Scale::linear, 3.8, 4.6, 6, "3.8 4.0 4.2 4.4 4.6"},
      {Scale::linear, 1000, 9000, 5, "2000 4000 6000 8000"},
      {Scale::log10, 0.001, 10, 6, "0.001 0.01 0.1 1 10"},
      {Scale::log10, 1, 10, 6, "1 2 5 10"},
      {Scale::log10, 20, 80, 5, "20 50"},
      {Scale::log10, 1e-8, 1, 4, "1e-08 1e-05 0.01"},
      {Scale::days, 0, 30, 5, "0 7 14 21 28"},
      {Scale::days, 0, 365, 6, "0 91 182 273 364"},
      {Scale::days, 0, 6, 8, "0 1 2 3 4 5 6"},
  }));
  CHECK(labels(Axis(row.scale, row.low, row.high), row.most) == row.ticks);
}

TEST_CASE("an axis around values ends on ticks and gives one value room", "[unit][charts]") {
  const Axis wide = Axis::around(Scale::linear, 3, 97, 5);
  CHECK(wide.low() == 0);
  CHECK(wide.high() == 100);
  const Axis one = Axis::around(Scale::linear, 50, 50, 5);
  CHECK(one.low() < 50);
  CHECK(one.high() > 50);
  const Axis decades = Axis::around(Scale::log10, 3, 97);
  CHECK(decades.low() == Approx(1));
  CHECK(decades.high() == Approx(100));
}

TEST_CASE("an axis takes values to shares and back", "[unit][charts]") {
  for (const Axis& axis : {Axis(Scale::linear, -2, 6), Axis(Scale::log10, 0.01, 100)}) {
    CHECK(axis.share(axis.low()) == Approx(0).margin(1e-12));
    CHECK(axis.share(axis.high()) == Approx(1));
    CHECK(axis.value(axis.share(3)) == Approx(3));
  }
  CHECK(Axis(Scale::log10, 0.01, 100).share(1) == Approx(0.5));
}
