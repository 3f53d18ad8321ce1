#include "ink.hpp"

#include "charts/cairo_canvas.hpp"

namespace bathwright::sheets::pdf {
namespace {

constexpr const char* font_family = "Noto Sans, sans-serif";
// Of the font's own, which is made for tall scripts; and as much is left off above the first line.
constexpr float line_spacing = 0.87F;
constexpr double trim = 0.15;  // of the size

int in_pango(double points) { return static_cast<int>(points * PANGO_SCALE); }
double from_pango(int units) { return static_cast<double>(units) / PANGO_SCALE; }

}  // namespace

double Words::baseline() const { return from_pango(pango_layout_get_baseline(layout_.get())) - trim_; }

Ink::Ink(cairo_surface_t* surface, double scale) : drawing_(cairo_create(surface)) {
  cairo_scale(drawing_.get(), scale, scale);
}

Words Ink::words(const std::string& text, const Look& look) const { return words(text, look, -1); }

Words Ink::words(const std::string& text, const Look& look, double room, double hang) const {
  Words words;
  words.layout_.reset(pango_cairo_create_layout(drawing_.get()), [](PangoLayout* l) { g_object_unref(l); });
  words.colour_ = look.colour;
  PangoLayout* layout = words.layout_.get();
  PangoFontDescription* font = pango_font_description_new();
  pango_font_description_set_family_static(font, font_family);
  pango_font_description_set_absolute_size(font, look.size * PANGO_SCALE);
  if (look.bold) pango_font_description_set_weight(font, PANGO_WEIGHT_BOLD);
  pango_layout_set_font_description(layout, font);
  pango_font_description_free(font);
  pango_layout_set_line_spacing(layout, line_spacing);
  if (room >= 0) {
    pango_layout_set_width(layout, in_pango(room));
    pango_layout_set_wrap(layout, PANGO_WRAP_WORD_CHAR);
    pango_layout_set_indent(layout, -in_pango(hang));
  }
  pango_layout_set_text(layout, text.data(), static_cast<int>(text.size()));
  int width = 0, height = 0;
  pango_layout_get_size(layout, &width, &height);
  words.width_ = from_pango(width);
  words.trim_ = trim * look.size;
  words.height_ = from_pango(height) - words.trim_;
  return words;
}

void Ink::set(charts::Colour c) {
  cairo_set_source_rgb(drawing_.get(), c.red / 255.0, c.green / 255.0, c.blue / 255.0);
}

void Ink::put(const Words& words, double left, double top) {
  set(words.colour_);
  cairo_move_to(drawing_.get(), left, top - words.trim_);
  pango_cairo_show_layout(drawing_.get(), words.layout_.get());
}

void Ink::line(double left, double y, double right, charts::Colour colour, double width) {
  set(colour);
  cairo_set_line_width(drawing_.get(), width);
  cairo_move_to(drawing_.get(), left, y);
  cairo_line_to(drawing_.get(), right, y);
  cairo_stroke(drawing_.get());
}

void Ink::open_square(double left, double top, double size) {
  set(colours.ink);
  cairo_set_line_width(drawing_.get(), 0.8);
  cairo_rectangle(drawing_.get(), left, top, size, size);
  cairo_stroke(drawing_.get());
}

void Ink::full_square(double left, double top, double size, charts::Colour colour) {
  set(colour);
  cairo_rectangle(drawing_.get(), left, top, size, size);
  cairo_fill(drawing_.get());
}

void Ink::chart(const charts::Chart& chart, double left, double top, double width, double height) {
  constexpr double points_a_pixel = 0.66;  // letters of 11 pixels are 7 points
  shrink(left, top, 1);
  cairo_translate(drawing_.get(), left, top);
  cairo_scale(drawing_.get(), points_a_pixel, points_a_pixel);
  charts::CairoCanvas canvas(drawing_.get());
  draw(chart, canvas, {0, 0, width / points_a_pixel, height / points_a_pixel}, colours);
  restore();
}

void Ink::shrink(double left, double top, double times) {
  cairo_save(drawing_.get());
  cairo_translate(drawing_.get(), left, top);
  cairo_scale(drawing_.get(), times, times);
  cairo_translate(drawing_.get(), -left, -top);
}

void Ink::restore() { cairo_restore(drawing_.get()); }

void Ink::next_page() { cairo_show_page(drawing_.get()); }

}  // namespace bathwright::sheets::pdf
