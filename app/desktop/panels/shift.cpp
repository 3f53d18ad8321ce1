#include "panels.hpp"

namespace bathwright::desktop {

void draw_shift(const ShiftView& view, const Look& look) {
  bold(look, view.shift);
  ImGui::SameLine();
  quiet(look, view.clock);
  if (view.elapsed >= 0) {
    ImGui::SameLine(0, look.px(16));
    DrawListCanvas canvas = drawing_room(look, 200, 14);
    canvas.fill({0, 6, 200, 3}, look.palette.rule);
    canvas.fill({0, 6, 200 * view.elapsed, 3}, look.palette.accent);
  }
  for (const std::string& open : view.open) {
    ImGui::SameLine(0, look.px(16));
    standing(look, static_cast<int>(charts::State::act), open);
  }
  for (const std::string& due : view.due) {
    ImGui::SameLine(0, look.px(16));
    quiet(look, "due: " + due);
  }
  ImGui::PushFont(look.fonts.caption);
  for (std::size_t i = 0; i < view.entries.size() && i < 4; ++i) {
    const LogRow& row = view.entries[i];
    if (i > 0) ImGui::SameLine(0, look.px(16));
    ImGui::TextUnformatted((row.seq + "  " + row.at + "  " + row.kind + "  " + row.by).c_str());
    if (ImGui::IsItemHovered()) ImGui::SetTooltip("%s", row.words.c_str());
  }
  if (view.entries.empty()) quiet(look, "Nothing logged in this shift.");
  ImGui::PopFont();
}

}  // namespace bathwright::desktop
