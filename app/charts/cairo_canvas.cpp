#include "cairo_canvas.hpp"

#include <numbers>

namespace bathwright::charts {
namespace {

constexpr const char* font_family = "Noto Sans, sans-serif";

void trace(cairo_t* drawing, std::span<const Point> points) {
  for (const Point& point : points) cairo_line_to(drawing, point.x, point.y);
}

}  // namespace

CairoCanvas::CairoCanvas(cairo_surface_t* surface, double scale) : CairoCanvas(cairo_create(surface)) {
  cairo_destroy(drawing_.get());  // the reference of cairo_create: ours is held
  cairo_scale(drawing_.get(), scale, scale);
}

CairoCanvas::CairoCanvas(cairo_t* drawing) : drawing_(cairo_reference(drawing)) {
  cairo_set_line_join(drawing_.get(), CAIRO_LINE_JOIN_ROUND);
  layout_.reset(pango_cairo_create_layout(drawing_.get()));
}

void CairoCanvas::set(Colour c) {
  cairo_set_source_rgba(drawing_.get(), c.red / 255.0, c.green / 255.0, c.blue / 255.0, c.alpha / 255.0);
}

void CairoCanvas::polyline(std::span<const Point> points, const Pen& pen) {
  set(pen.colour);
  cairo_set_line_width(drawing_.get(), pen.width);
  constexpr double dashes[] = {6, 4};
  cairo_set_dash(drawing_.get(), dashes, pen.dashed ? 2 : 0, 0);
  cairo_new_path(drawing_.get());
  trace(drawing_.get(), points);
  cairo_stroke(drawing_.get());
}

void CairoCanvas::fill(const Box& box, Colour colour) {
  set(colour);
  cairo_rectangle(drawing_.get(), box.left, box.top, box.width, box.height);
  cairo_fill(drawing_.get());
}

void CairoCanvas::circle(Point centre, double radius, Colour colour, bool filled) {
  set(colour);
  cairo_new_path(drawing_.get());
  cairo_arc(drawing_.get(), centre.x, centre.y, radius, 0, 2 * std::numbers::pi);
  if (filled) return cairo_fill(drawing_.get());
  cairo_set_dash(drawing_.get(), nullptr, 0, 0);
  cairo_set_line_width(drawing_.get(), 1.5);
  cairo_stroke(drawing_.get());
}

void CairoCanvas::convex(std::span<const Point> corners, Colour colour) {
  set(colour);
  cairo_new_path(drawing_.get());
  trace(drawing_.get(), corners);
  cairo_fill(drawing_.get());
}

void CairoCanvas::strip(std::span<const Point> upper, std::span<const Point> lower, Colour colour) {
  set(colour);
  cairo_new_path(drawing_.get());
  trace(drawing_.get(), upper);
  for (std::size_t i = lower.size(); i-- > 0;) cairo_line_to(drawing_.get(), lower[i].x, lower[i].y);
  cairo_fill(drawing_.get());
}

void CairoCanvas::set_layout(std::string_view words, const Lettering& lettering) {
  PangoFontDescription* font = pango_font_description_new();
  pango_font_description_set_family_static(font, font_family);
  pango_font_description_set_absolute_size(font, lettering.size * PANGO_SCALE);
  if (lettering.bold) pango_font_description_set_weight(font, PANGO_WEIGHT_BOLD);
  pango_layout_set_font_description(layout_.get(), font);
  pango_font_description_free(font);
  pango_layout_set_text(layout_.get(), words.data(), static_cast<int>(words.size()));
}

double CairoCanvas::text_width(std::string_view words, const Lettering& lettering) {
  set_layout(words, lettering);
  int width = 0;
  pango_layout_get_size(layout_.get(), &width, nullptr);
  return static_cast<double>(width) / PANGO_SCALE;
}

void CairoCanvas::text(Point at, std::string_view words, const Lettering& lettering) {
  const double width = text_width(words, lettering);
  const double share = lettering.align == Align::start ? 0 : (lettering.align == Align::middle ? 0.5 : 1);
  const double baseline = static_cast<double>(pango_layout_get_baseline(layout_.get())) / PANGO_SCALE;
  set(lettering.colour);
  cairo_move_to(drawing_.get(), at.x - share * width, at.y - baseline);
  pango_cairo_show_layout(drawing_.get(), layout_.get());
}

void CairoCanvas::clip(const Box& box) {
  cairo_reset_clip(drawing_.get());
  cairo_rectangle(drawing_.get(), box.left, box.top, box.width, box.height);
  cairo_clip(drawing_.get());
}

void CairoCanvas::unclip() { cairo_reset_clip(drawing_.get()); }

void CairoCanvas::next_page() { cairo_show_page(drawing_.get()); }

}  // namespace bathwright::charts
