#include "look.hpp"

#include <bathwright/charts/signs.hpp>

namespace bathwright::desktop {

void heading(const Look& look, const std::string& words) {
  ImGui::Dummy({0, look.px(4)});
  ImGui::PushFont(look.fonts.bold);
  ImGui::TextUnformatted(words.c_str());
  ImGui::PopFont();
  const ImVec2 lower = ImGui::GetItemRectMax();
  const float y = (ImGui::GetItemRectMin().y + lower.y) / 2;
  const float right = ImGui::GetWindowPos().x + ImGui::GetWindowContentRegionMax().x;
  ImGui::GetWindowDrawList()->AddLine({lower.x + look.px(8), y}, {right, y}, packed(look.palette.rule));
}

void said(const Look& look, charts::Colour c, const std::string& words) {
  static_cast<void>(look);
  ImGui::PushStyleColor(ImGuiCol_Text, colour(c));
  ImGui::PushTextWrapPos(0);
  ImGui::TextUnformatted(words.c_str());
  ImGui::PopTextWrapPos();
  ImGui::PopStyleColor();
}

void title(const Look& look, const std::string& words) {
  ImGui::PushFont(look.fonts.heading);
  ImGui::TextUnformatted(words.c_str());
  ImGui::PopFont();
}

void quiet(const Look& look, const std::string& words) {
  ImGui::PushFont(look.fonts.caption);
  said(look, look.palette.quiet, words);
  ImGui::PopFont();
}

void bold(const Look& look, const std::string& words) {
  ImGui::PushFont(look.fonts.bold);
  ImGui::TextUnformatted(words.c_str());
  ImGui::PopFont();
}

void sheet(const Look& look, const std::vector<std::string>& lines) {
  ImGui::PushFont(look.fonts.mono);
  for (const std::string& line : lines) ImGui::TextUnformatted(line.empty() ? " " : line.c_str());
  ImGui::PopFont();
}

void right_aligned(const std::string& words, ImFont* font) {
  if (font) ImGui::PushFont(font);
  const float room = ImGui::GetContentRegionAvail().x - ImGui::CalcTextSize(words.c_str()).x;
  if (room > 0) ImGui::SetCursorPosX(ImGui::GetCursorPosX() + room);
  ImGui::TextUnformatted(words.c_str());
  if (font) ImGui::PopFont();
}

void standing(const Look& look, int state, const std::string& word) {
  const auto which = static_cast<charts::State>(state);
  if (which != charts::State::in_window) {
    constexpr float size = 10;
    const float line = ImGui::GetTextLineHeight() / look.scale;
    DrawListCanvas canvas = drawing_room(look, size + 2, line);
    draw_mark(canvas, {size / 2 + 1, line / 2}, size, which, look.palette);
    ImGui::SameLine(0, look.px(4));
  }
  said(look,
       which == charts::State::in_window ? look.palette.quiet
       : which == charts::State::act     ? look.palette.act
                                         : look.palette.stop,
       word);
}

DrawListCanvas drawing_room(const Look& look, float width_at_100, float height_at_100) {
  const ImVec2 origin = ImGui::GetCursorScreenPos();
  ImGui::Dummy({look.px(width_at_100), look.px(height_at_100)});
  return {*ImGui::GetWindowDrawList(), look.fonts, origin, look.scale};
}

void note_place(const Look& look, const std::string& name) {
  if (!look.places) return;
  const ImVec2 low = ImGui::GetItemRectMin(), high = ImGui::GetItemRectMax();
  (*look.places)[name] = {low.x, low.y, high.x, high.y};
  if (ImGui::IsItemFocused() && ImGui::GetIO().NavVisible)
    (*look.places)[the_focus] = {low.x, low.y, high.x, high.y};
}

void note_window(const Look& look, const std::string& name) {
  if (!look.places) return;
  const ImVec2 low = ImGui::GetWindowPos(), size = ImGui::GetWindowSize();
  (*look.places)[name] = {low.x, low.y, low.x + size.x, low.y + size.y};
}

bool button(const Look& look, const char* label, bool ready) {
  ImGui::BeginDisabled(!ready);
  const bool pressed = ImGui::Button(label);
  ImGui::EndDisabled();
  note_place(look, label);
  return pressed && ready;  // a disabled button can still be fired from the keyboard
}

void copies(const Look& look, const char* what, const std::function<std::string()>& text) {
  ImGui::PushID(what);
  if (button(look, "Copy the figures")) ImGui::SetClipboardText(text().c_str());
  note_place(look, std::string("copy ") + what);
  if (ImGui::IsItemHovered()) ImGui::SetTooltip("as rows for a spreadsheet");
  ImGui::PopID();
}

bool main_button(const Look& look, const char* label, bool ready) {
  // Not the pale ground of other buttons under the pointer or the focus: the letters are pale.
  for (const ImGuiCol ground : {ImGuiCol_Button, ImGuiCol_ButtonHovered, ImGuiCol_ButtonActive})
    ImGui::PushStyleColor(ground, colour(look.palette.accent));
  ImGui::PushStyleColor(ImGuiCol_Text, colour(look.palette.card));
  const bool pressed = button(look, label, ready);
  ImGui::PopStyleColor(4);
  return pressed;
}

}  // namespace bathwright::desktop
