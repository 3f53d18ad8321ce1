#include "draw_list_canvas.hpp"

#include <algorithm>
#include <cmath>
#include <vector>

#include "../window/theme.hpp"

namespace bathwright::desktop {

using charts::Box;
using charts::Colour;
using charts::Lettering;
using charts::Pen;
using charts::Point;

namespace {

/// A line as dashes of 6 with gaps of 4, the pattern going on over its corners.
void dash(ImDrawList& list, std::span<const ImVec2> points, ImU32 colour, float width, float scale) {
  const float on = 6 * scale, period = 10 * scale;
  float walked = 0;
  for (std::size_t i = 1; i < points.size(); ++i) {
    const ImVec2 a = points[i - 1], b = points[i];
    const float length = std::hypot(b.x - a.x, b.y - a.y);
    if (!(length > 0)) continue;
    for (float at = 0; at < length;) {
      const float phase = std::fmod(walked + at, period);
      const float next = std::min(length, at + (phase < on ? on - phase : period - phase));
      if (phase < on)
        list.AddLine({a.x + (b.x - a.x) * at / length, a.y + (b.y - a.y) * at / length},
                     {a.x + (b.x - a.x) * next / length, a.y + (b.y - a.y) * next / length}, colour, width);
      at = std::max(next, at + 1e-3F * scale);
    }
    walked += length;
  }
}

}  // namespace

void DrawListCanvas::polyline(std::span<const Point> points, const Pen& pen) {
  std::vector<ImVec2> screen;
  screen.reserve(points.size());
  for (const Point& point : points) screen.push_back(on_screen(point));
  const float width = static_cast<float>(pen.width) * scale_;
  if (pen.dashed)
    dash(list_, screen, packed(pen.colour), width, scale_);
  else
    list_.AddPolyline(screen.data(), static_cast<int>(screen.size()), packed(pen.colour), 0, width);
}

void DrawListCanvas::fill(const Box& box, Colour colour) {
  list_.AddRectFilled(on_screen({box.left, box.top}), on_screen({box.right(), box.bottom()}), packed(colour));
}

void DrawListCanvas::circle(Point centre, double radius, Colour colour, bool filled) {
  const float r = static_cast<float>(radius) * scale_;
  if (filled)
    list_.AddCircleFilled(on_screen(centre), r, packed(colour));
  else
    list_.AddCircle(on_screen(centre), r, packed(colour), 0, 1.5F * scale_);
}

void DrawListCanvas::convex(std::span<const Point> corners, Colour colour) {
  std::vector<ImVec2> screen;
  for (const Point& point : corners) screen.push_back(on_screen(point));
  list_.AddConvexPolyFilled(screen.data(), static_cast<int>(screen.size()), packed(colour));
}

void DrawListCanvas::strip(std::span<const Point> upper, std::span<const Point> lower, Colour colour) {
  // Without anti-aliased edges: neighbouring pieces would show a seam.
  const ImDrawListFlags flags = list_.Flags;
  list_.Flags &= ~ImDrawListFlags_AntiAliasedFill;
  for (std::size_t i = 1; i < upper.size(); ++i)
    list_.AddQuadFilled(on_screen(upper[i - 1]), on_screen(upper[i]), on_screen(lower[i]),
                        on_screen(lower[i - 1]), packed(colour));
  list_.Flags = flags;
}

const ImFont* DrawListCanvas::font_for(const Lettering& lettering) const {
  if (lettering.size >= heading_px) return fonts_.heading;
  if (lettering.bold) return fonts_.bold;
  return lettering.size > caption_px ? fonts_.body : fonts_.caption;
}

double DrawListCanvas::text_width(std::string_view words, const Lettering& lettering) {
  const ImFont* font = font_for(lettering);
  const float size = static_cast<float>(lettering.size) * scale_;
  return font->CalcTextSizeA(size, FLT_MAX, 0, words.data(), words.data() + words.size()).x / scale_;
}

void DrawListCanvas::text(Point at, std::string_view words, const Lettering& lettering) {
  const ImFont* font = font_for(lettering);
  const float size = static_cast<float>(lettering.size) * scale_;
  const double share =
      lettering.align == charts::Align::start ? 0 : (lettering.align == charts::Align::middle ? 0.5 : 1);
  ImVec2 corner = on_screen({at.x - share * text_width(words, lettering), at.y});
  corner.y -= font->Ascent * size / font->FontSize;
  list_.AddText(font, size, {std::round(corner.x), std::round(corner.y)}, packed(lettering.colour),
                words.data(), words.data() + words.size());
}

void DrawListCanvas::clip(const Box& box) {
  unclip();
  list_.PushClipRect(on_screen({box.left, box.top}), on_screen({box.right(), box.bottom()}), true);
  clipped_ = true;
}

void DrawListCanvas::unclip() {
  if (clipped_) list_.PopClipRect();
  clipped_ = false;
}

}  // namespace bathwright::desktop
