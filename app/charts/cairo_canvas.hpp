// A Canvas on a cairo surface, letters by Pango in the open font of the sheets.
#pragma once

#include <cairo.h>
#include <pango/pangocairo.h>

#include <bathwright/charts/canvas.hpp>
#include <memory>
#include <string>

namespace bathwright::charts {

class CairoCanvas final : public Canvas {
 public:
  /// The surface outlives the canvas; `scale` pixels or points of it are one of ours.
  CairoCanvas(cairo_surface_t* surface, double scale);
  /// Goes on where another draws: with its place and size.
  explicit CairoCanvas(cairo_t* drawing);

  void polyline(std::span<const Point> points, const Pen& pen) override;
  void fill(const Box& box, Colour colour) override;
  void circle(Point centre, double radius, Colour colour, bool filled) override;
  void convex(std::span<const Point> corners, Colour colour) override;
  void strip(std::span<const Point> upper, std::span<const Point> lower, Colour colour) override;
  void text(Point at, std::string_view words, const Lettering& lettering) override;
  [[nodiscard]] double text_width(std::string_view words, const Lettering& lettering) override;
  void clip(const Box& box) override;
  void unclip() override;

  /// Ends a page of a surface that has several.
  void next_page();

 private:
  void set(Colour colour);
  void set_layout(std::string_view words, const Lettering& lettering);

  struct Release {
    void operator()(cairo_t* drawing) const { cairo_destroy(drawing); }
    void operator()(PangoLayout* layout) const { g_object_unref(layout); }
  };
  std::unique_ptr<cairo_t, Release> drawing_;
  std::unique_ptr<PangoLayout, Release> layout_;
};

}  // namespace bathwright::charts
