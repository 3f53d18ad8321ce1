// What every panel draws with, and the small pieces of text and signs they share.
#pragma once

#include <imgui.h>

#include <bathwright/charts/palette.hpp>
#include <functional>
#include <map>
#include <string>
#include <vector>

#include "../draw/draw_list_canvas.hpp"
#include "../window/fonts.hpp"
#include "../window/theme.hpp"

namespace bathwright::desktop {

/// Where things were drawn in this picture, by name: for tests that use mouse and keys as a person does.
using Places = std::map<std::string, ImVec4>;
/// Under this name the one that has the keyboard's focus and shows it.
inline constexpr const char* the_focus = "the focus";

class Textures;

struct Look {
  const Fonts& fonts;
  const charts::Palette& palette;
  float scale = 1;
  Places* places = nullptr;
  Textures* textures = nullptr;  ///< nullptr: sheets are shown as empty paper

  [[nodiscard]] float px(float at_100) const { return at_100 * scale; }
};

void heading(const Look& look, const std::string& words);  ///< of a card, with a rule to the right edge
void title(const Look& look, const std::string& words);    ///< of a page
void quiet(const Look& look, const std::string& words);    ///< in quiet ink, wrapped
void said(const Look& look, charts::Colour colour, const std::string& words);  ///< wrapped
void bold(const Look& look, const std::string& words);
/// Lines of a sheet as they stand, their columns one under the other.
void sheet(const Look& look, const std::vector<std::string>& lines);
/// Ends at the right edge of the cell or region.
void right_aligned(const std::string& words, ImFont* font = nullptr);

/// A mark and its word; of the normal state the word alone.
void standing(const Look& look, int state, const std::string& word);

/// Room of this size to draw in; the canvas has its origin at the upper left, lengths at 100 %.
DrawListCanvas drawing_room(const Look& look, float width_at_100, float height_at_100);

/// Notes where the last item was drawn, where somebody asks.
void note_place(const Look& look, const std::string& name);

/// Likewise of the window that is drawn into: a list that is open.
void note_window(const Look& look, const std::string& name);

/// A button; false while it is not ready, whatever fires it.
bool button(const Look& look, const char* label, bool ready = true);

/// A button that puts a text on the clipboard.
void copies(const Look& look, const char* what, const std::function<std::string()>& text);

/// The one thing to do next: a button in the accent.
bool main_button(const Look& look, const char* label, bool ready);

}  // namespace bathwright::desktop
