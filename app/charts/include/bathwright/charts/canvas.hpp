// What a chart is drawn on: a page of a file or a part of a window. Charts know nothing else of either, so
// that what is saved is what was seen. Lengths are pixels of a screen at 100 %, y grows downward.
#pragma once

#include <cstdint>
#include <span>
#include <string_view>

namespace bathwright::charts {

struct Point {
  double x = 0, y = 0;
};

struct Box {
  double left = 0, top = 0, width = 0, height = 0;
  [[nodiscard]] double right() const { return left + width; }
  [[nodiscard]] double bottom() const { return top + height; }
};

struct Colour {
  std::uint8_t red = 0, green = 0, blue = 0, alpha = 255;
};

struct Pen {
  Colour colour;
  double width = 1;
  bool dashed = false;
};

enum class Align : std::uint8_t { start, middle, end };

struct Lettering {
  Colour colour;
  double size = 13;  ///< height of the line of letters
  Align align = Align::start;
  bool bold = false;
};

class Canvas {
 public:
  virtual ~Canvas() = default;

  virtual void polyline(std::span<const Point> points, const Pen& pen) = 0;
  virtual void fill(const Box& box, Colour colour) = 0;
  virtual void circle(Point centre, double radius, Colour colour, bool filled) = 0;
  /// A closed shape without dents.
  virtual void convex(std::span<const Point> corners, Colour colour) = 0;
  /// What lies between two lines with the same x, as many points each.
  virtual void strip(std::span<const Point> upper, std::span<const Point> lower, Colour colour) = 0;
  /// UTF-8, one line; `at` is the left, middle or right of its baseline.
  virtual void text(Point at, std::string_view words, const Lettering& lettering) = 0;
  [[nodiscard]] virtual double text_width(std::string_view words, const Lettering& lettering) = 0;
  /// Nothing drawn until `unclip` reaches outside the box.
  virtual void clip(const Box& box) = 0;
  virtual void unclip() = 0;
};

}  // namespace bathwright::charts
