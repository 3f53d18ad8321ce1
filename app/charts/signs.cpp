#include <algorithm>
#include <array>
#include <bathwright/charts/signs.hpp>
#include <cmath>

namespace bathwright::charts {
namespace {

void segment(Canvas& canvas, Point a, Point b, const Pen& pen) {
  const std::array<Point, 2> ends = {a, b};
  canvas.polyline(ends, pen);
}

Colour faint(Colour colour, std::uint8_t alpha) {
  colour.alpha = alpha;
  return colour;
}

void hatch(Canvas& canvas, const Box& box, Colour colour, double apart) {
  canvas.clip(box);
  for (double x = box.left - box.height; x < box.right(); x += apart)
    segment(canvas, {x, box.bottom()}, {x + box.height, box.top}, {colour});
  canvas.unclip();
}

/// A triangle that points to one side: something lies beyond.
void arrow(Canvas& canvas, Point tip, double way, Colour colour) {
  const std::array<Point, 3> corners = {tip, {tip.x - way * 7, tip.y - 5}, {tip.x - way * 7, tip.y + 5}};
  canvas.convex(corners, colour);
}

}  // namespace

void draw_mark(Canvas& canvas, Point at, double size, State state, const Palette& palette) {
  const double half = size / 2;
  if (state == State::act) {
    const std::array<Point, 3> corners = {
        Point{at.x, at.y - half}, {at.x + half, at.y + half}, {at.x - half, at.y + half}};
    canvas.convex(corners, palette.act);
  } else if (state == State::stop) {
    canvas.fill({at.x - half, at.y - half, size, size}, palette.stop);
  }
}

void draw_vessel(Canvas& canvas, const Box& box, const VesselSign& sign, const Palette& palette) {
  const double whole = 1 + std::max(0.0, sign.freeboard);
  const auto height_of = [&](double level) {
    return box.bottom() - std::clamp(level / whole, 0.0, 1.0) * box.height;
  };
  if (sign.level_known) {
    const double surface = height_of(sign.level);
    canvas.fill({box.left, surface, box.width, box.bottom() - surface}, faint(palette.accent, 60));
    segment(canvas, {box.left, surface}, {box.right(), surface}, {palette.accent, 1.5});
  }
  const double mark = height_of(1);
  segment(canvas, {box.left - 4, mark}, {box.left + 5, mark}, {palette.ink, 1.5});
  segment(canvas, {box.right() - 5, mark}, {box.right() + 4, mark}, {palette.ink, 1.5});
  const std::array<Point, 4> walls = {Point{box.left, box.top},
                                      {box.left, box.bottom()},
                                      {box.right(), box.bottom()},
                                      {box.right(), box.top}};
  canvas.polyline(walls, {palette.ink, 1.5});
}

void draw_strip(Canvas& canvas, const Box& box, const StripSign& sign, const Palette& palette) {
  // Half a window of room on both sides of it.
  const double width = std::max(sign.high - sign.low, 1e-12);
  const double least = sign.low - 0.5 * width, most = sign.high + 0.5 * width;
  const double y = box.top + box.height / 2;
  const auto x_of = [&](double value) { return box.left + (value - least) / (most - least) * box.width; };
  const auto inside = [&](double value) { return value >= least && value <= most; };
  segment(canvas, {box.left, y}, {box.right(), y}, {palette.rule, 1});
  const double arm = 5, half = std::min(8.0, box.height / 2);
  for (const auto& [at, way] : {std::pair{sign.low, 1.0}, {sign.high, -1.0}}) {
    const double x = x_of(at);
    const std::array<Point, 4> bracket = {
        Point{x + way * arm, y - half}, {x, y - half}, {x, y + half}, {x + way * arm, y + half}};
    canvas.polyline(bracket, {palette.ink, 1.5});
  }
  const double aim = x_of(sign.aim);
  const std::array<Point, 4> diamond = {Point{aim, y - 6}, {aim + 3.5, y}, {aim, y + 6}, {aim - 3.5, y}};
  canvas.convex(diamond, palette.ink);
  const auto place = [&](double value, Colour colour, bool filled) {
    if (inside(value))
      canvas.circle({x_of(value), y}, 4.5, colour, filled);
    else
      arrow(canvas, {value < least ? box.left : box.right(), y}, value < least ? -1 : 1, colour);
  };
  if (sign.found) {
    const double from = std::clamp(*sign.found - sign.u, least, most),
                 to = std::clamp(*sign.found + sign.u, least, most);
    if (sign.u > 0) segment(canvas, {x_of(from), y}, {x_of(to), y}, {palette.accent, 2.5});
    place(*sign.found, palette.accent, true);
  }
  if (sign.predicted) place(*sign.predicted, palette.predicted, false);
}

void draw_headroom(Canvas& canvas, const Box& box, double of_saturation, std::optional<double> then,
                   const Palette& palette) {
  const bool forms = of_saturation >= 1;
  const double share = std::clamp(of_saturation, 0.0, 1.0);
  const Box full{box.left, box.top, share * box.width, box.height};
  canvas.fill(full, faint(forms ? palette.stop : palette.quiet, forms ? 70 : 45));
  hatch(canvas, full, faint(forms ? palette.stop : palette.quiet, 200), 6 - 3 * share);
  segment(canvas, {box.right(), box.top - 2}, {box.right(), box.bottom() + 2}, {palette.stop, 2});
  segment(canvas, {box.left, box.bottom()}, {box.right(), box.bottom()}, {palette.rule, 1});
  if (!then) return;
  const double x = box.left + std::clamp(*then, 0.0, 1.0) * box.width;
  segment(canvas, {x, box.top - 1}, {x, box.bottom() + 1}, {palette.predicted, 2});
}

}  // namespace bathwright::charts
