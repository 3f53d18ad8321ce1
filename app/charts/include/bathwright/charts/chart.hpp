// One chart as a value, and how it is drawn. The signs are the same everywhere: a filled dot was found, a
// dashed line is computed, a thin diamond is an aim, brackets are a window, hatching is where a limit forbids
// to be.
#pragma once

#include <bathwright/charts/axis.hpp>
#include <bathwright/charts/canvas.hpp>
#include <bathwright/charts/palette.hpp>
#include <optional>
#include <string>
#include <vector>

namespace bathwright::charts {

enum class Meaning : std::uint8_t { found, predicted, plain };

/// Points in the order of x, joined; where y is NaN the line is broken.
struct Series {
  std::string name;  ///< stands at the end of the line; may be empty
  Meaning meaning = Meaning::plain;
  std::vector<double> x, y;
};

/// Between low and high at every x.
struct Band {
  std::vector<double> x, low, high;
};

/// A level not to pass.
struct Limit {
  double at = 0;
  bool upper = true;                   ///< above it is forbidden; else below
  std::string name;                    ///< "limit 120"
  std::vector<double> x = {}, y = {};  ///< its border where that moves with x; empty: it is at `at`
};

/// What was measured, with one standard uncertainty; 0: not known.
struct Found {
  double x = 0, y = 0, u = 0;
};

/// A moment worth a word: the day a limit is met.
struct Moment {
  double x = 0;
  std::string name;
};

struct Window {
  double low = 0, aim = 0, high = 0;
};

struct Chart {
  std::string title;  ///< "orthophosphite"
  std::string unit;   ///< "g/L"
  std::string x_title;
  Scale x_scale = Scale::linear, y_scale = Scale::linear;
  std::vector<Band> bands;
  std::vector<Series> lines;
  std::vector<Limit> limits;
  std::vector<Found> found;
  std::vector<Moment> moments;
  std::optional<Window> window;
  double least_height = 0;  ///< of the y axis, so that noise is not drawn as a mountain
};

/// Where a chart put its values, to find what the pointer is over.
struct Frame {
  Box plot;
  Axis x, y;
  [[nodiscard]] Point at(double x_value, double y_value) const;
};

/// The axes a chart gets in a box: they hold every line, band and found value, zero where the values come
/// near it, and a limit where it lies within one more height of the values; one farther off is only told in
/// words.
[[nodiscard]] Frame frame_of(const Chart& chart, const Box& box);

/// Draws the chart into the box and says where its values are.
Frame draw(const Chart& chart, Canvas& canvas, const Box& box, const Palette& palette = day_palette);

}  // namespace bathwright::charts
