// The letters of the desktop: one open sans in four sizes, with Greek, sub- and superscripts.
#pragma once

#include <imgui.h>

#include <bathwright/base/result.hpp>

namespace bathwright::desktop {

struct Fonts {
  ImFont *mono = nullptr,  ///< of sheets laid out in columns
      *caption = nullptr, *body = nullptr, *bold = nullptr, *heading = nullptr, *large = nullptr;
};

/// Heights of a line in pixels at a scale of 1; the letters are three quarters of it.
inline constexpr float caption_px = 16, body_px = 18, heading_px = 25, large_px = 36;

/// Loads the font into the current ImGui context at a scale (1 to 2). Fails where the font is not installed
/// and says what to install.
Result<Fonts> load_fonts(float scale);

}  // namespace bathwright::desktop
