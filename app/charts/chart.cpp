#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <bathwright/charts/chart.hpp>
#include <cmath>

namespace bathwright::charts {
namespace {

// Room around the plot: the title above, figures to the left and below, names of lines to the right.
constexpr double above = 26, below = 36, left_of = 52, right_of = 14, names = 96;
constexpr double small_text = 12, plain_text = 13;
constexpr double hatching_apart = 9;
constexpr double pixels_a_tick_x = 56, pixels_a_tick_y = 28;

struct Range {
  double low = HUGE_VAL, high = -HUGE_VAL;
  void take(double value) {
    if (!std::isfinite(value)) return;
    low = std::min(low, value);
    high = std::max(high, value);
  }
  [[nodiscard]] bool empty() const { return low > high; }
};

Range x_range(const Chart& chart) {
  Range range;
  for (const Band& band : chart.bands)
    for (const double x : band.x) range.take(x);
  for (const Series& line : chart.lines)
    for (const double x : line.x) range.take(x);
  for (const Found& found : chart.found) range.take(found.x);
  return range;
}

Range y_range(const Chart& chart) {
  const bool log = chart.y_scale == Scale::log10;
  Range range;
  const auto take = [&](double y) {
    if (!log || y > 0) range.take(y);
  };
  for (const Band& band : chart.bands) {
    std::ranges::for_each(band.low, take);
    std::ranges::for_each(band.high, take);
  }
  for (const Series& line : chart.lines) std::ranges::for_each(line.y, take);
  for (const Found& found : chart.found) take(found.y - found.u), take(found.y + found.u);
  if (chart.window) take(chart.window->low), take(chart.window->aim), take(chart.window->high);
  if (range.empty()) return range;
  const double height = range.high - range.low;
  for (const Limit& limit : chart.limits) {
    const bool near = log ? limit.at > range.low / 100 && limit.at < range.high * 100
                          : limit.at > range.low - std::max(height, 0.5 * std::abs(range.low)) &&
                                limit.at < range.high + std::max(height, 0.5 * std::abs(range.high));
    if (!near) continue;
    take(limit.at);
    std::ranges::for_each(limit.y, take);
  }
  if (chart.least_height > range.high - range.low) {
    const double middle = (range.high + range.low) / 2;
    range = {middle - chart.least_height / 2, middle + chart.least_height / 2};
  }
  // A scale that nearly reaches zero begins there: small changes of large levels are not made to look large.
  if (!log && range.low > 0 && range.low < 0.6 * range.high) range.low = 0;
  return range;
}

bool has_names(const Chart& chart) {
  return std::ranges::any_of(chart.lines, [](const Series& line) { return !line.name.empty(); });
}

int ticks_along(double pixels, double each) { return std::max(2, static_cast<int>(pixels / each)); }

class Drawing {
 public:
  Drawing(const Chart& chart, Canvas& canvas, const Box& box, const Palette& palette)
      : chart_(chart), canvas_(canvas), box_(box), colours_(palette), frame_(frame_of(chart, box)) {}

  Frame run() {
    canvas_.text({box_.left, box_.top + plain_text}, chart_.title,
                 {colours_.ink, plain_text + 1, Align::start, true});
    const double title = canvas_.text_width(chart_.title, {colours_.ink, plain_text + 1, Align::start, true});
    canvas_.text({box_.left + title + 6, box_.top + plain_text}, chart_.unit, {colours_.quiet, small_text});
    grid();
    canvas_.clip(frame_.plot);
    for (const Limit& limit : chart_.limits) forbid(limit);
    for (const Band& band : chart_.bands) draw_band(band);
    for (const Series& line : chart_.lines) draw_line(line);
    canvas_.unclip();
    if (chart_.window) draw_window(*chart_.window);
    for (const Found& found : chart_.found) draw_found(found);
    for (const Moment& moment : chart_.moments) draw_moment(moment);
    name_limits();
    name_lines();
    return frame_;
  }

 private:
  [[nodiscard]] double x_of(double value) const { return frame_.at(value, frame_.y.low()).x; }
  [[nodiscard]] double y_of(double value) const { return frame_.at(frame_.x.low(), value).y; }
  [[nodiscard]] Colour colour_of(Meaning meaning) const {
    return meaning == Meaning::found ? colours_.accent
                                     : (meaning == Meaning::predicted ? colours_.predicted : colours_.ink);
  }
  void segment(Point a, Point b, const Pen& pen) {
    const std::array<Point, 2> ends = {a, b};
    canvas_.polyline(ends, pen);
  }

  void grid() {
    const Box& plot = frame_.plot;
    for (const Tick& tick : frame_.y.ticks(ticks_along(plot.height, pixels_a_tick_y))) {
      const double y = y_of(tick.at);
      segment({plot.left, y}, {plot.right(), y}, {colours_.rule});
      canvas_.text({plot.left - 6, y + small_text / 3}, tick.label, {colours_.quiet, small_text, Align::end});
    }
    for (const Tick& tick : frame_.x.ticks(ticks_along(plot.width, pixels_a_tick_x))) {
      const double x = x_of(tick.at);
      segment({x, plot.bottom()}, {x, plot.bottom() + 4}, {colours_.quiet});
      canvas_.text({x, plot.bottom() + 5 + small_text}, tick.label,
                   {colours_.quiet, small_text, Align::middle});
    }
    segment({plot.left, plot.bottom()}, {plot.right(), plot.bottom()}, {colours_.quiet});
    canvas_.text({plot.right(), plot.bottom() + 8 + 2 * small_text}, chart_.x_title,
                 {colours_.quiet, small_text, Align::end});
  }

  /// Slanted lines where nobody should be, and the border of that.
  void forbid(const Limit& limit) {
    if (!limit.x.empty()) return forbid_beyond(limit);
    const Box& plot = frame_.plot;
    const double y = y_of(limit.at);
    if (!(y > plot.top - 1 && y < plot.bottom() + 1)) return;
    const double top = limit.upper ? plot.top : y, bottom = limit.upper ? y : plot.bottom();
    canvas_.clip({plot.left, top, plot.width, bottom - top});
    const double height = bottom - top;
    for (double x = plot.left - height; x < plot.right(); x += hatching_apart)
      segment({x, bottom}, {x + height, top}, {hatching()});
    canvas_.clip(plot);
    segment({plot.left, y}, {plot.right(), y}, {colours_.stop, 1.5});
  }

  [[nodiscard]] Colour hatching() const {
    Colour faint = colours_.stop;
    faint.alpha = 70;
    return faint;
  }

  /// The same beyond a border that moves: each slanted line ends where it meets the border, found in a few
  /// rounds, for a border is far from steep.
  void forbid_beyond(const Limit& limit) {
    std::vector<Point> border;
    for (std::size_t i = 0; i < limit.x.size(); ++i) border.push_back(frame_.at(limit.x[i], limit.y[i]));
    const auto border_at = [&](double x) {
      const auto after = std::ranges::lower_bound(border, x, {}, &Point::x);
      if (after == border.begin()) return border.front().y;
      if (after == border.end()) return border.back().y;
      const Point before = *(after - 1);
      return before.y + (after->y - before.y) * (x - before.x) / (after->x - before.x);
    };
    const Box& plot = frame_.plot;
    constexpr int rounds = 6;
    for (double x = plot.left - plot.height; x < plot.right(); x += hatching_apart) {
      double up = 0;  // from the bottom to the border
      for (int i = 0; i < rounds; ++i) up = std::clamp(plot.bottom() - border_at(x + up), 0.0, plot.height);
      const Point meets{x + up, plot.bottom() - up};
      if (limit.upper)
        segment(meets, {x + plot.height, plot.top}, {hatching()});
      else
        segment({x, plot.bottom()}, meets, {hatching()});
    }
    canvas_.polyline(border, {colours_.stop, 1.5});
  }

  void draw_band(const Band& band) {
    Colour faint = colours_.predicted;
    faint.alpha = 46;
    std::vector<Point> upper, lower;
    for (std::size_t i = 0; i < band.x.size(); ++i) {
      if (!std::isfinite(band.low[i]) || !std::isfinite(band.high[i])) continue;
      upper.push_back(frame_.at(band.x[i], band.high[i]));
      lower.push_back(frame_.at(band.x[i], band.low[i]));
    }
    if (upper.size() > 1) canvas_.strip(upper, lower, faint);
  }

  void draw_line(const Series& line) {
    const Pen pen{colour_of(line.meaning), 2, line.meaning == Meaning::predicted};
    std::vector<Point> points;
    const auto finish = [&] {
      if (points.size() > 1) canvas_.polyline(points, pen);
      points.clear();
    };
    for (std::size_t i = 0; i < line.x.size(); ++i) {
      if (std::isfinite(line.y[i]))
        points.push_back(frame_.at(line.x[i], line.y[i]));
      else
        finish();
    }
    finish();
  }

  void draw_found(const Found& found) {
    const Point at = frame_.at(found.x, found.y);
    if (found.u > 0) {
      segment(frame_.at(found.x, found.y - found.u), frame_.at(found.x, found.y + found.u),
              {colours_.accent, 1.5});
    }
    canvas_.circle(at, 4, colours_.accent, true);
  }

  /// A bracket at the left edge of the plot from low to high, the aim a diamond on it.
  void draw_window(const Window& window) {
    const double x = frame_.plot.left + 3, arm = 6;
    const double low = y_of(window.low), high = y_of(window.high), aim = y_of(window.aim);
    const std::array<Point, 4> bracket = {Point{x + arm, high}, {x, high}, {x, low}, {x + arm, low}};
    canvas_.polyline(bracket, {colours_.ink, 1.5});
    const std::array<Point, 4> diamond = {Point{x, aim - 6}, {x + 3.5, aim}, {x, aim + 6}, {x - 3.5, aim}};
    canvas_.convex(diamond, colours_.ink);
  }

  void draw_moment(const Moment& moment) {
    const Box& plot = frame_.plot;
    const double x = x_of(moment.x);
    segment({x, plot.top + small_text}, {x, plot.bottom()}, {colours_.ink, 1, true});
    const Lettering plain{colours_.ink, small_text};
    const bool fits_right = x + 4 + canvas_.text_width(moment.name, plain) < plot.right();
    canvas_.text({fits_right ? x + 4 : x - 4, plot.top + small_text - 1}, moment.name,
                 {colours_.ink, small_text, fits_right ? Align::start : Align::end});
  }

  /// At the border of a limit, on its forbidden side, where the hatching is kept off the words; of one
  /// outside the picture, at the edge it lies beyond.
  void name_limits() {
    const Box& plot = frame_.plot;
    for (const Limit& limit : chart_.limits) {
      const double y = y_of(limit.at);
      const bool beyond_top = y<plot.top - 1, beyond_bottom = y> plot.bottom() + 1;
      const std::string words = limit.name + (beyond_top ? " (above)" : beyond_bottom ? " (below)" : "");
      double base = limit.upper ? y - 5 : y + small_text + 1;
      if (beyond_top) base = plot.top + small_text;
      if (beyond_bottom) base = plot.bottom() - 4;
      // No room on that side of the border: the other one.
      base = std::clamp(base, plot.top + small_text, plot.bottom() - 2);
      const Lettering lettering{colours_.stop, small_text, Align::end};
      const double width = canvas_.text_width(words, lettering);
      canvas_.fill({plot.right() - 7 - width, base - small_text + 1, width + 6, small_text + 2},
                   colours_.card);
      canvas_.text({plot.right() - 4, base}, words, lettering);
    }
  }

  /// Beside the last point of each line, moved apart where they would lie on each other.
  void name_lines() {
    struct Name {
      double y;
      const Series* line;
    };
    std::vector<Name> all;
    for (const Series& line : chart_.lines) {
      if (line.name.empty()) continue;
      for (std::size_t i = line.x.size(); i-- > 0;)
        if (std::isfinite(line.y[i])) {
          all.push_back({std::clamp(y_of(line.y[i]), frame_.plot.top, frame_.plot.bottom()), &line});
          break;
        }
    }
    std::ranges::sort(all, {}, &Name::y);
    for (std::size_t i = 1; i < all.size(); ++i) all[i].y = std::max(all[i].y, all[i - 1].y + small_text + 2);
    const double overflow = all.empty() ? 0 : std::max(0.0, all.back().y - frame_.plot.bottom());
    for (const Name& name : all)
      canvas_.text({frame_.plot.right() + 6, name.y - overflow + small_text / 3}, name.line->name,
                   {colour_of(name.line->meaning), small_text});
  }

  const Chart& chart_;
  Canvas& canvas_;
  Box box_;
  const Palette& colours_;
  Frame frame_;
};

}  // namespace

Point Frame::at(double x_value, double y_value) const {
  return {plot.left + x.share(x_value) * plot.width, plot.bottom() - y.share(y_value) * plot.height};
}

Frame frame_of(const Chart& chart, const Box& box) {
  const Box plot{box.left + left_of, box.top + above,
                 std::max(1.0, box.width - left_of - (has_names(chart) ? names : right_of)),
                 std::max(1.0, box.height - above - below)};
  Range x = x_range(chart), y = y_range(chart);
  if (x.empty()) x = {0, 1};
  if (y.empty()) y = chart.y_scale == Scale::log10 ? Range{1, 10} : Range{0, 1};
  if (!(x.high > x.low)) x.high = x.low + 1;
  return {plot, Axis(chart.x_scale, x.low, x.high),
          Axis::around(chart.y_scale, y.low, y.high, ticks_along(plot.height, pixels_a_tick_y))};
}

Frame draw(const Chart& chart, Canvas& canvas, const Box& box, const Palette& palette) {
  return Drawing(chart, canvas, box, palette).run();
}

}  // namespace bathwright::charts
