#include <algorithm>
#include <bathwright/charts/page.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <limits>

using namespace bathwright::charts;

namespace {

/// Remembers what was asked of it.
class Recorder final : public Canvas {
 public:
  struct Line {
    std::vector<Point> points;
    Pen pen;
  };
  struct Words {
    Point at;
    std::string words;
    Align align;
  };
  std::vector<Line> lines;
  std::vector<Words> words;
  std::vector<Point> dots, strip_points;

  void polyline(std::span<const Point> points, const Pen& pen) override {
    lines.push_back({{points.begin(), points.end()}, pen});
  }
  void fill(const Box&, Colour) override {}
  void circle(Point centre, double, Colour, bool) override { dots.push_back(centre); }
  void convex(std::span<const Point>, Colour) override {}
  void strip(std::span<const Point> upper, std::span<const Point> lower, Colour) override {
    strip_points.insert(strip_points.end(), upper.begin(), upper.end());
    strip_points.insert(strip_points.end(), lower.begin(), lower.end());
  }
  void text(Point at, std::string_view text, const Lettering& lettering) override {
    words.push_back({at, std::string(text), lettering.align});
  }
  double text_width(std::string_view text, const Lettering& lettering) override {
    return 0.5 * lettering.size * static_cast<double>(text.size());
  }
  void clip(const Box&) override {}
  void unclip() override {}

  [[nodiscard]] bool says(const std::string& text) const {
    return std::ranges::any_of(words, [&](const Words& one) { return one.words == text; });
  }
  /// The longest line drawn with this look.
  [[nodiscard]] std::size_t dashed_points() const {
    std::size_t most = 0;
    for (const Line& line : lines)
      if (line.pen.dashed) most = std::max(most, line.points.size());
    return most;
  }
};

constexpr Box box{0, 0, 500, 250};

Chart rising() {
  Chart chart;
  chart.title = "orthophosphite";
  chart.unit = "g/L";
  chart.x_scale = Scale::days;
  Series line{"", Meaning::predicted, {}, {}};
  for (int day = 0; day <= 28; ++day) line.x.push_back(day), line.y.push_back(36 + 4.0 * day);
  chart.lines = {line};
  return chart;
}

}  // namespace

TEST_CASE("a value stands where its frame says", "[unit][charts]") {
  Recorder canvas;
  Chart chart = rising();
  chart.found = {{0, 36, 2}};
  const Frame frame = draw(chart, canvas, box);
  REQUIRE(canvas.dots.size() == 1);
  CHECK(canvas.dots[0].x == Approx(frame.at(0, 36).x));
  CHECK(canvas.dots[0].y == Approx(frame.at(0, 36).y));
  CHECK(frame.at(0, 36).x == Approx(frame.plot.left));
  CHECK(frame.y.value((frame.plot.bottom() - canvas.dots[0].y) / frame.plot.height) == Approx(36));
  CHECK(canvas.dashed_points() == 29);
}

TEST_CASE("a limit near the values is in the picture, one far off is told in words", "[unit][charts]") {
  Chart near = rising(), far = rising();
  near.limits = {{200, true, "limit 200"}};
  far.limits = {{5000, true, "limit 5000"}};
  CHECK(frame_of(near, box).y.high() >= 200);
  CHECK(frame_of(far, box).y.high() < 1000);
  Recorder canvas;
  draw(far, canvas, box);
  CHECK(canvas.says("limit 5000 (above)"));
}

TEST_CASE("a border that moves is in the picture as far as it goes", "[unit][charts]") {
  Chart chart = rising();
  chart.limits = {{150, true, "limit", {0, 14, 28}, {150, 170, 190}}};
  const Frame frame = frame_of(chart, box);
  CHECK(frame.at(28, 190).y > frame.plot.top - 1);
}

TEST_CASE("hatching ends at a border that moves", "[unit][charts]") {
  for (const bool upper : {true, false}) {
    Chart chart = rising();
    chart.limits = {{100, upper, "limit", {0, 14, 28}, {100, 120, 110}}};
    Recorder recorder;
    const Frame frame = draw(chart, recorder, box);
    std::size_t met = 0;
    for (const Recorder::Line& line : recorder.lines) {
      if (line.pen.colour.alpha != 70 || line.points.size() != 2) continue;
      const Point end = upper ? line.points.front() : line.points.back();
      if (end.x <= frame.plot.left || end.x >= frame.plot.right()) continue;
      ++met;
      const double share = (end.x - frame.at(0, 0).x) / (frame.at(28, 0).x - frame.at(0, 0).x);
      const double y = share < 0.5 ? 100 + 40 * share : 120 - 20 * (share - 0.5);
      CHECK(end.y == Approx(frame.at(0, y).y).margin(0.5));
    }
    CHECK(met > 20);
  }
}

TEST_CASE("a line is broken where there is no value", "[unit][charts]") {
  Chart chart = rising();
  chart.lines[0].y[10] = std::numeric_limits<double>::quiet_NaN();
  Recorder canvas;
  draw(chart, canvas, box);
  CHECK(canvas.dashed_points() == 18);
  for (const auto& line : canvas.lines)
    for (const Point& point : line.points) CHECK(std::isfinite(point.y));
}

TEST_CASE("names of lines do not lie on each other", "[unit][charts]") {
  Chart chart = rising();
  chart.lines.push_back(chart.lines[0]);
  chart.lines[0].name = "at 55 °C";
  chart.lines[1].name = "at 18 °C";
  Recorder canvas;
  draw(chart, canvas, box);
  std::vector<double> heights;
  for (const auto& one : canvas.words)
    if (one.words.starts_with("at ")) heights.push_back(one.at.y);
  REQUIRE(heights.size() == 2);
  CHECK(std::abs(heights[0] - heights[1]) >= 12);
}

TEST_CASE("nothing, one value and zeros are drawn without a fault", "[unit][charts]") {
  Recorder canvas;
  draw(Chart{}, canvas, box);
  Chart one;
  one.y_scale = Scale::log10;
  one.found = {{1, 5, 0}};
  draw(one, canvas, box);
  one.found = {{1, 0, 0}};
  draw(one, canvas, box);
  one.y_scale = Scale::linear;
  draw(one, canvas, box);
  for (const Point& dot : canvas.dots) CHECK(std::isfinite(dot.x));
  Recorder page;
  draw(Page{"N-07", {}, {}, ""}, page, 1000, 500);
  CHECK(page.words.size() > 1);
}
