// The signs of the shop, drawn the same on the screen and on paper: a vessel with its level, the strip of a
// component, the bar of a solid's headroom, the mark of a state. None speaks by colour alone.
#pragma once

#include <bathwright/charts/palette.hpp>
#include <optional>

namespace bathwright::charts {

/// What a person has to do about something; the normal state is silent.
enum class State : std::uint8_t { in_window, act, stop };

/// A triangle for act, a square for stop, nothing for in window, `size` high with its middle at `at`.
void draw_mark(Canvas& canvas, Point at, double size, State state, const Palette& palette = day_palette);

/// An open vessel: its liquid, the mark it is filled to, the freeboard above.
struct VesselSign {
  double level = 1;        ///< of the volume at the mark; above 1 is in the freeboard
  double freeboard = 0.1;  ///< of the volume at the mark
  bool level_known = true;
};
void draw_vessel(Canvas& canvas, const Box& box, const VesselSign& sign,
                 const Palette& palette = day_palette);

/// A component in its window: a bracket from low to high, a diamond for the aim, a filled dot with its error
/// bar for what was found, a hollow dot for what is predicted. Values outside the strip stand at its end as
/// an arrow.
struct StripSign {
  double low = 0, aim = 0, high = 1;
  std::optional<double> found, predicted;
  double u = 0;  ///< standard uncertainty of what was found
};
void draw_strip(Canvas& canvas, const Box& box, const StripSign& sign, const Palette& palette = day_palette);

/// How near a solid is to forming: `of_saturation` 0 to 1 fills the bar, hatched toward the limit; 1 and more
/// is full. `then`: the same after what is planned, as a mark in the colour of what is predicted.
void draw_headroom(Canvas& canvas, const Box& box, double of_saturation,
                   std::optional<double> then = std::nullopt, const Palette& palette = day_palette);

}  // namespace bathwright::charts
