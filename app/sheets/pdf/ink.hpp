// Words and lines on a PDF, letters by Pango. Lengths are points of the paper, 1/72 inch, y grows downward.
#pragma once

#include <cairo.h>
#include <pango/pangocairo.h>

#include <bathwright/charts/chart.hpp>
#include <memory>
#include <string>

namespace bathwright::sheets::pdf {

inline constexpr charts::Palette colours = charts::day_palette;

struct Look {
  double size = 9;  ///< of the letters, points
  bool bold = false;
  charts::Colour colour = colours.ink;
};

/// A text laid out, ready to be put somewhere.
class Words {
 public:
  [[nodiscard]] double width() const { return width_; }
  [[nodiscard]] double height() const { return height_; }
  /// From the top to the foot of the first line's letters.
  [[nodiscard]] double baseline() const;

 private:
  friend class Ink;
  std::shared_ptr<PangoLayout> layout_;
  charts::Colour colour_;
  double width_ = 0, height_ = 0, trim_ = 0;
};

class Ink {
 public:
  /// The surface outlives it; `scale` of its dots are a point.
  explicit Ink(cairo_surface_t* surface, double scale = 1);

  /// On one line.
  [[nodiscard]] Words words(const std::string& text, const Look& look) const;
  /// Broken between words into lines as wide as `room`; those after the first begin `hang` further right.
  [[nodiscard]] Words words(const std::string& text, const Look& look, double room, double hang = 0) const;

  void put(const Words& words, double left, double top);
  void line(double left, double y, double right, charts::Colour colour, double width = 0.5);
  void open_square(double left, double top, double size);
  void full_square(double left, double top, double size, charts::Colour colour);
  void chart(const charts::Chart& chart, double left, double top, double width, double height);
  /// Everything drawn until `restore` is smaller, seen from a point.
  void shrink(double left, double top, double times);
  void restore();
  void next_page();

 private:
  void set(charts::Colour colour);

  struct Release {
    void operator()(cairo_t* drawing) const { cairo_destroy(drawing); }
  };
  std::unique_ptr<cairo_t, Release> drawing_;
};

}  // namespace bathwright::sheets::pdf
