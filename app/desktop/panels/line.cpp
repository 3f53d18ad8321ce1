#include "panels.hpp"

namespace bathwright::desktop {
namespace {

constexpr float width = 44, height = 46;

void draw_tank(const TankOnLine& tank, int index, bool selected, const Look& look, Intents& out) {
  ImGui::PushID(index);
  const ImVec2 corner = ImGui::GetCursorPos();
  const float row = look.px(height + 16);
  if (ImGui::Selectable("##open", selected, 0, {0, row})) out.emplace_back(OpenTank{index});
  note_place(look, "tank " + tank.name);
  ImGui::SetCursorPos({corner.x + look.px(8), corner.y + look.px(8)});
  constexpr float words_need = 70;  // in a narrow line the words come before the vessel
  if (ImGui::GetContentRegionAvail().x > look.px(width + 10 + words_need)) {
    DrawListCanvas canvas = drawing_room(look, width, height);
    draw_vessel(canvas, {2, 2, width - 4, height - 4}, tank.vessel, look.palette);
    ImGui::SameLine(0, look.px(10));
  }
  ImGui::BeginGroup();
  bold(look, tank.name);
  ImGui::PushFont(look.fonts.caption);
  standing(look, static_cast<int>(tank.state), tank.word);
  ImGui::PopFont();
  ImGui::EndGroup();
  ImGui::SetCursorPos({corner.x, corner.y + row + look.px(2)});
  ImGui::PopID();
}

}  // namespace

void draw_line(const LineView& view, const Look& look, Intents& out) {
  quiet(look, view.shop);
  heading(look, "The line");
  for (const UnreadTank& one : view.unread) {
    standing(look, static_cast<int>(charts::State::stop), one.file + " cannot be read");
    ImGui::PushID(one.file.c_str());
    ImGui::PushFont(look.fonts.caption);
    const bool open = ImGui::TreeNodeEx("why");
    note_place(look, "why " + one.file);
    if (ImGui::IsItemHovered()) ImGui::SetTooltip("%s", one.why.c_str());
    if (open) {
      said(look, look.palette.ink, one.why);
      ImGui::TreePop();
    }
    ImGui::PopFont();
    ImGui::PopID();
  }
  if (!view.unread.empty() && button(look, "Read them again")) out.emplace_back(OpenFolder{view.folder});
  int* shown = ImGui::GetStateStorage()->GetIntRef(ImGui::GetID("shown"), -1);
  for (int i = 0; i < static_cast<int>(view.tanks.size()); ++i) {
    if (i == view.selected && *shown != i) {
      ImGui::SetScrollHereY();  // opened by the keys, it may be out of sight
      *shown = i;
    }
    draw_tank(view.tanks[static_cast<std::size_t>(i)], i, i == view.selected, look, out);
  }
  if (view.tanks.empty()) quiet(look, "No tank files in this folder. Copy one from the demonstration shop.");
}

}  // namespace bathwright::desktop
