// Colours and spaces of the desktop, from the palette that charts on paper use.
#pragma once

#include <imgui.h>

#include <bathwright/charts/palette.hpp>

namespace bathwright::desktop {

[[nodiscard]] constexpr ImU32 packed(charts::Colour c) { return IM_COL32(c.red, c.green, c.blue, c.alpha); }
[[nodiscard]] ImVec4 colour(charts::Colour c);

/// The dark variant: the same meanings on a dark page, contrast at least 4.5 to 1.
[[nodiscard]] const charts::Palette& palette(bool dark);

/// Sets the style of the current ImGui context.
void set_theme(const charts::Palette& palette, float scale);

}  // namespace bathwright::desktop
