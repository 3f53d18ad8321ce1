// The colours and what they mean, told once for the screen and for paper. No meaning by colour alone: a
// computed line is also dashed, a limit also hatched and named. tests/app/desktop/colours_test.cpp has what
// they must keep: contrast, and distance for eyes of every common kind.
#pragma once

#include <bathwright/charts/canvas.hpp>

namespace bathwright::charts {

struct Palette {
  Colour page{0xF6, 0xF5, 0xF1}, card{0xFF, 0xFF, 0xFF}, rule{0xD9, 0xD6, 0xCE};
  Colour ink{0x1E, 0x2A, 0x32}, quiet{0x5C, 0x67, 0x6F};
  Colour accent{0x0C, 0x5A, 0x6E};     ///< found; the one thing to do next
  Colour predicted{0x7A, 0x4E, 0x9B};  ///< computed for the future
  Colour act{0xA0, 0x54, 0x05};
  Colour stop{0x9B, 0x1C, 0x31};
  Colour edge{0x84, 0x8B, 0x91};  ///< around what is filled in, ticked or pressed
};

inline constexpr Palette day_palette{};

}  // namespace bathwright::charts
